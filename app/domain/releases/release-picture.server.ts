import type { Readable } from 'node:stream'
import type { Actor } from '~/domain/accounts/can'
import { isNoneMatchHit } from '~/lib/byte-range'
import { DomainError } from '~/lib/domain-error'
import { logError } from '~/server/log.server'
import type { Services } from '~/server/services.server'
import { objectKey } from '~/server/storage.server'
import { findRelease } from './releases.server'

export type OpenPicture = { status: 200 | 304; headers: Record<string, string>; body: Readable | null }

/**
 * The picture of one side of a release, `top.svg` or `bottom.svg`, for whoever may see the release.
 * @throws DomainError `not-found`
 */
export async function openPicture(
  { db, storage }: Pick<Services, 'db' | 'storage'>,
  actor: Actor,
  slug: string,
  version: string,
  file: string,
  request: Pick<Request, 'method' | 'headers' | 'signal'>
): Promise<OpenPicture | 'storage-failed'> {
  const { release } = await findRelease(db, actor, slug, version)
  const sha256 = file === 'top.svg' ? release.picture_top_sha256 : file === 'bottom.svg' ? release.picture_bottom_sha256 : null
  if (sha256 === null) throw new DomainError('not-found', 'There is no such picture.')
  const etag = `"${sha256}"`
  const headers = {
    ETag: etag,
    'Cache-Control': release.state === 'draft' ? 'private, no-cache' : 'public, max-age=31536000, immutable'
  }
  if (isNoneMatchHit(request.headers.get('If-None-Match'), etag)) return { status: 304, headers, body: null }
  const key = objectKey('picture', sha256)
  try {
    const object = request.method === 'HEAD' ? null : await storage.get(key, undefined, request.signal)
    if (object || request.method === 'HEAD') return { status: 200, headers, body: object?.stream ?? null }
    logError('picture-missing', new Error('storage lacks the object'), { key, release: release.id })
  } catch (error) {
    if (request.signal.aborted) throw error
    logError('picture-unreadable', error, { key, release: release.id })
  }
  return 'storage-failed'
}
