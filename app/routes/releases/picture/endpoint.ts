import { createReadableStreamFromReadable } from '@react-router/node'
import type { Route } from './+types/endpoint'
import { openPicture } from '~/domain/releases/release-picture.server'
import { DomainError, statusOf } from '~/lib/domain-error'
import { actorContext } from '~/server/context'
import { services } from '~/server/services.server'

/** Nothing in a picture may run, load or be read by a page, whatever is in it. */
const asPicture = {
  'Content-Security-Policy': "default-src 'none'; style-src 'unsafe-inline'; sandbox",
  'Cross-Origin-Resource-Policy': 'same-origin'
}

const plain = (status: number, text: string) =>
  new Response(text, { status, headers: { 'Content-Type': 'text/plain; charset=utf-8', 'Cache-Control': 'no-store' } })

export async function loader({ request, params, context }: Route.LoaderArgs) {
  const { board, version, file } = params
  try {
    const picture = await openPicture(services(), context.get(actorContext), board, version, file, request)
    if (picture === 'storage-failed') return plain(502, 'The file store did not answer.')
    const headers = { ...asPicture, ...picture.headers }
    return new Response(picture.body && createReadableStreamFromReadable(picture.body), { status: picture.status, headers })
  } catch (error) {
    if (error instanceof DomainError) return plain(statusOf[error.kind], error.message)
    throw error
  }
}
