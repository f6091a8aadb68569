import type { Db } from '~db/client.server'
import { visitor } from '~/domain/accounts/can'
import { boardBySlug } from '~/domain/boards/boards.server'
import type { BundleFacts } from '~/domain/bundle/bundle-check.types'
import { DomainError } from '~/lib/domain-error'
import { declaredOf } from './declared-of.server'
import * as downloads from './downloads.repo.server'
import * as findings from './findings.repo.server'
import * as repo from './releases.repo.server'
import { findRelease } from './releases.server'
import { precedenceKey, readVersion } from './version'

const summary = (r: repo.ReleaseRow) => ({
  version: r.version,
  state: r.state as 'trial' | 'released' | 'withdrawn',
  boardRevision: r.board_revision,
  publishedAt: r.published_at!,
  withdrawn: r.withdrawn_at === null ? null : { at: r.withdrawn_at, reason: r.withdrawn_reason! },
  bundle: { sha256: r.bundle_sha256!, bytes: r.bundle_bytes! }
})

/**
 * Published releases of a board, highest version first; `after` is the last version of the page before.
 * @throws DomainError `not-found`, `invalid` (`after` is no version)
 */
export async function publishedReleases(db: Db, slug: string, { after, limit }: { after: string | null; limit: number }) {
  const board = await boardBySlug(db, slug)
  const place = after === null ? null : readVersion(after)
  if (place && !place.ok)
    throw new DomainError('invalid', 'The query of this address is not valid.', [
      { path: 'after', message: 'is not a place that a page of this list gave' }
    ])
  const below = place ? precedenceKey(place.version) : undefined
  const rows = await repo.listPublished(db, board.id, { below, limit: limit + 1 })
  const page = rows.slice(0, limit)
  return { releases: page.map(summary), next: rows.length > limit ? page.at(-1)!.version : null }
}

/**
 * One published release with all that the check found.
 * @throws DomainError `not-found`, also for a draft
 */
export async function releaseDetail(db: Db, slug: string, version: string) {
  const { release } = await findRelease(db, visitor, slug, version)
  const [files, found, taken] = await Promise.all([
    findings.listFiles(db, release.id),
    findings.listFindings(db, release.id),
    downloads.total(db, release.id)
  ])
  return {
    ...summary(release),
    declared: {
      ...declaredOf(release),
      note: release.order_note === '' ? null : release.order_note
    },
    notes: release.notes_md,
    facts: release.facts_json === null ? null : (JSON.parse(release.facts_json) as BundleFacts),
    layers: files.map((f) => ({
      file: f.file,
      function: f.function,
      side: f.side,
      index: f.layer_index,
      evidence: f.evidence
    })),
    findings: found.map((f) => ({
      code: f.code,
      severity: f.severity,
      file: f.file,
      message: f.message,
      expected: f.expected,
      found: f.found,
      answer: f.answer
    })),
    downloads: taken
  }
}
