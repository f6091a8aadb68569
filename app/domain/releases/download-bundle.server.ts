import type { Readable } from 'node:stream'
import type { Actor } from '~/domain/accounts/can'
import { must } from '~/domain/accounts/must'
import { isIfRangeMet, isNoneMatchHit, readRange } from '~/lib/byte-range'
import { attachment } from '~/lib/content-disposition'
import { dayOf } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import { logError } from '~/server/log.server'
import type { Services } from '~/server/services.server'
import { objectKey } from '~/server/storage.server'
import * as downloads from './downloads.repo.server'
import { bundleFileName } from './release-path'
import { findRelease } from './releases.server'

type Deps = Pick<Services, 'db' | 'storage' | 'now'>

/** The bundle as an HTTP answer; `body` is null where none is sent. `storage-failed` is for the caller to show. */
export type Download =
  | { kind: 'answer'; status: 200 | 206 | 304 | 416; headers: Record<string, string>; body: Readable | null }
  | { kind: 'storage-failed' }

const published = 'public, max-age=31536000, immutable'

/**
 * Opens the bundle of a release for the reader of a request: whole, a single range of it, or only its headers. A whole GET, or a range from
 * the first byte, counts as one download. Digest by RFC 9530, ranges by RFC 9110.
 * @throws DomainError `not-found` (no release, or no bundle yet), `forbidden`
 */
export async function downloadBundle(
  { db, storage, now }: Deps,
  actor: Actor,
  slug: string,
  version: string,
  request: Pick<Request, 'method' | 'headers' | 'signal'>
): Promise<Download> {
  const { board, release } = await findRelease(db, actor, slug, version)
  must(actor, 'release.download', { boardId: board.id, state: release.state })
  const { bundle_sha256: sha256, bundle_bytes: size } = release
  if (sha256 === null || size === null) throw new DomainError('not-found', 'This draft has no bundle yet.')
  const etag = `"${sha256}"`
  const headers: Record<string, string> = {
    'Accept-Ranges': 'bytes',
    ETag: etag,
    'Cache-Control': release.state === 'draft' ? 'private, no-cache' : published
  }
  if (isNoneMatchHit(request.headers.get('If-None-Match'), etag)) return { kind: 'answer', status: 304, headers, body: null }

  const isHead = request.method === 'HEAD'
  /* Range is defined for GET alone (RFC 9110, 14.2). */
  const wanted =
    !isHead && isIfRangeMet(request.headers.get('If-Range'), etag)
      ? readRange(request.headers.get('Range'), size)
      : ({ kind: 'whole' } as const)
  if (wanted.kind === 'unsatisfiable')
    return { kind: 'answer', status: 416, headers: { ...headers, 'Content-Range': `bytes */${size}` }, body: null }
  const part = wanted.kind === 'part' ? wanted : { start: 0, end: size - 1 }
  Object.assign(headers, {
    'Content-Type': 'application/zip',
    'Content-Disposition': attachment(bundleFileName(slug, version)),
    'Content-Length': String(part.end - part.start + 1),
    'Repr-Digest': `sha-256=:${Buffer.from(sha256, 'hex').toString('base64')}:`,
    'X-Checksum-Sha256': sha256,
    ...(wanted.kind === 'part' ? { 'Content-Range': `bytes ${part.start}-${part.end}/${size}` } : {})
  })
  const status = wanted.kind === 'part' ? 206 : 200
  if (isHead) return { kind: 'answer', status, headers, body: null }

  const key = objectKey('bundle', sha256)
  try {
    const object = await storage.get(key, wanted.kind === 'part' ? part : undefined, request.signal)
    if (object && object.bytes === part.end - part.start + 1) {
      if (part.start === 0 && release.state !== 'draft') await countDownload({ db, now }, release.id)
      return { kind: 'answer', status, headers, body: object.stream }
    }
    object?.stream.destroy()
    logError('bundle-missing', new Error(object ? 'storage holds another length' : 'storage lacks the object'), {
      key,
      release: release.id
    })
  } catch (error) {
    if (request.signal.aborted) throw error
    logError('bundle-unreadable', error, { key, release: release.id })
  }
  return { kind: 'storage-failed' }
}

/** A count that cannot be written is noted, and does not keep the reader from the file. */
async function countDownload({ db, now }: Pick<Deps, 'db' | 'now'>, releaseId: string): Promise<void> {
  try {
    await downloads.count(db, releaseId, dayOf(now()))
  } catch (error) {
    logError('download-not-counted', error, { release: releaseId })
  }
}
