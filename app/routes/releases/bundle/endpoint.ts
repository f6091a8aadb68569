import { createReadableStreamFromReadable } from '@react-router/node'
import type { Route } from './+types/endpoint'
import { downloadBundle } from '~/domain/releases/download-bundle.server'
import { intakeDeps } from '~/domain/releases/intake-deps.server'
import { releasePath } from '~/domain/releases/release-path'
import { takeInBundle } from '~/domain/releases/take-in-bundle.server'
import { DomainError, statusOf } from '~/lib/domain-error'
import { answerApi } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { discardBody, receiveFile } from '~/server/receive-file.server'
import { services } from '~/server/services.server'
import { plainPage } from '../plain-page.server'

export async function loader({ request, params, context }: Route.LoaderArgs) {
  const { board, version } = params
  const way = { label: 'To the release', href: releasePath(board, version) }
  try {
    const answer = await downloadBundle(services(), context.get(actorContext), board, version, request)
    if (answer.kind === 'answer') {
      const body = answer.body && createReadableStreamFromReadable(answer.body)
      return new Response(body, { status: answer.status, headers: answer.headers })
    }
    return plainPage({
      status: 502,
      heading: 'The file store did not answer',
      lead: 'The bundle is safe, but it cannot be fetched just now. The failure is noted in our log; try again in a few minutes.',
      way
    })
  } catch (error) {
    if (!(error instanceof DomainError)) throw error
    return plainPage({
      status: statusOf[error.kind],
      heading: 'No bundle here',
      lead: error.message,
      way: { label: 'To the board', href: `/boards/${encodeURIComponent(board)}` }
    })
  }
}

/** Takes the bundle that a script sends, and answers it in JSON; without scripts the form goes to the draft's own page. */
export async function action({ request, params, context }: Route.ActionArgs) {
  const { board, version } = params
  const s = services()
  return answerApi(async () => {
    try {
      await takeInBundle(intakeDeps(s), context.get(actorContext), board, version, () =>
        receiveFile(request, 'bundle', s.config.uploadDir, s.config.uploadMaxBytes)
      )
    } finally {
      discardBody(request)
    }
    return { location: `${releasePath(board, version)}?done=checked#found` }
  })
}
