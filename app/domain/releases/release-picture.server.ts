import type { Readable } from 'node:stream'
import type { Db } from '~db/client.server'
import type { Actor } from '~/domain/accounts/can'
import { isNoneMatchHit } from '~/lib/byte-range'
import { DomainError } from '~/lib/domain-error'
import { logError } from '~/server/log.server'
import type { Services } from '~/server/services.server'
import { objectKey } from '~/server/storage.server'
import * as layerPictures from './layer-pictures.repo.server'
import type { ReleaseRow } from './releases.repo.server'
import { findRelease } from './releases.server'

export type OpenPicture = { status: 200 | 304; headers: Record<string, string>; body: Readable | null }

type Wanted = { sha256: string; contentType: 'image/svg+xml' | 'image/png' }

/** Which picture an address means; null where the release has none of that name. */
async function wantedOf(db: Db, release: ReleaseRow, file: string): Promise<Wanted | null> {
  const sides: Record<string, string | null> = {
    'top.svg': release.picture_top_sha256,
    'bottom.svg': release.picture_bottom_sha256,
    'top.png': release.thumb_top_sha256,
    'bottom.png': release.thumb_bottom_sha256
  }
  const position = /^layer-([1-9]\d{0,3})\.svg$/.exec(file)?.[1]
  const ofSide = Object.hasOwn(sides, file) ? sides[file]! : null
  const sha256 = position ? await layerPictures.findSha256(db, release.id, Number(position)) : ofSide
  return sha256 === null ? null : { sha256, contentType: file.endsWith('.png') ? 'image/png' : 'image/svg+xml' }
}

/**
 * A picture of a release for whoever may see the release: a side (`top.svg`), its thumbnail (`top.png`), a single layer (`layer-3.svg`).
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
  const wanted = await wantedOf(db, release, file)
  if (wanted === null) throw new DomainError('not-found', 'There is no such picture.')
  const { sha256, contentType } = wanted
  const etag = `"${sha256}"`
  const headers = {
    'Content-Type': contentType,
    ETag: etag,
    'Cache-Control': release.state === 'draft' ? 'private, no-cache' : 'public, max-age=31536000, immutable'
  }
  if (isNoneMatchHit(request.headers.get('If-None-Match'), etag)) return { status: 304, headers, body: null }
  const key = objectKey('picture', sha256)
  try {
    if (request.method === 'HEAD') return { status: 200, headers, body: null }
    const object = await storage.get(key, undefined, request.signal)
    if (object?.contentType === contentType) return { status: 200, headers, body: object.stream }
    object?.stream.destroy()
    const what = object ? `storage holds the object as ${object.contentType}` : 'storage lacks the object'
    logError('picture-missing', new Error(what), { key, release: release.id })
  } catch (error) {
    if (request.signal.aborted) throw error
    logError('picture-unreadable', error, { key, release: release.id })
  }
  return 'storage-failed'
}
