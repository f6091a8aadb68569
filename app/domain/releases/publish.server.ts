import type { Db, Tx } from '~db/client.server'
import { recordAudit } from '~/domain/audit/record.server'
import type { Actor } from '~/domain/accounts/can'
import { must } from '~/domain/accounts/must'
import { DomainError } from '~/lib/domain-error'
import { draftGone } from './drafts.server'
import * as findings from './findings.repo.server'
import { compareFingerprints } from '~/domain/bundle/compare-fingerprints'
import { sentence } from '~/domain/bundle/check-revision'
import { obstacles } from './publish-rules'
import * as records from './record.repo.server'
import type { PublishWish } from './release.schema'
import * as repo from './releases.repo.server'
import { findRelease } from './releases.server'
import { mustReadVersion, stateWhenPublished } from './version'

type Deps = { db: Db; now: () => Date }

/**
 * Publishes a draft, for good: with a pre-release as a trial, else as released. It must still be what the person saw: the same bundle, nothing edited
 * since. Two who press at once, or an upload in between, give one of them a conflict and change nothing.
 * @throws DomainError `not-found`, `forbidden`, `conflict`, `impossible` (something keeps it from being published; one error each)
 */
export async function publishRelease(
  { db, now }: Deps,
  actor: Actor,
  slug: string,
  version: string,
  wish: PublishWish
): Promise<void> {
  const { board, release } = await findRelease(db, actor, slug, version)
  if (release.state !== 'draft') throw draftGone()
  must(actor, 'release.publish', { boardId: board.id, state: release.state })
  const at = now().toISOString()
  await db.transaction().execute(async (tx) => {
    const row = await repo.findById(tx, release.id)
    if (!row || row.state !== 'draft') throw draftGone()
    if ((row.bundle_sha256 ?? '') !== wish.bundle || row.updated_at !== wish.updatedAt)
      throw new DomainError('conflict', 'The draft changed since you opened this page. Look at it again, then publish.')
    const standing = obstacles(
      {
        hasBundle: row.bundle_sha256 !== null,
        checkState: row.check_state,
        isCheckOk: row.is_check_ok === null ? null : row.is_check_ok === 1
      },
      await findings.listFindings(tx, row.id)
    )
    if (standing.length > 0)
      throw new DomainError(
        'impossible',
        'It cannot be published yet.',
        standing.map(({ message }) => ({ path: '', message }))
      )
    await refuseOtherGeometry(tx, row)
    const state = stateWhenPublished(mustReadVersion(row.version))
    await repo.updateDraft(tx, row.id, { state, published_at: at, published_by: actor.userId, updated_at: at })
    await recordAudit(
      tx,
      {
        actorId: actor.userId,
        action: 'release.publish',
        subjectKind: 'release',
        subjectId: row.id,
        detail: { board: slug, version: row.version, state, bundle: row.bundle_sha256 }
      },
      at
    )
  })
}

/** Another release of the revision may have been published since the check, so that it is compared once more with what is published by now. */
async function refuseOtherGeometry(tx: Tx, row: repo.ReleaseRow): Promise<void> {
  const own = await records.listFingerprints(tx, row.id)
  for (const { version, fingerprints } of await records.listEarlier(tx, row)) {
    const differences = fingerprints.length === 0 ? [] : compareFingerprints(fingerprints, own)
    if (differences.length === 0) continue
    const message = `${sentence(differences)} from release ${version}, which stands for board revision ${row.board_revision} by now. Give this board another revision and have it checked again.`
    throw new DomainError('impossible', 'It cannot be published under this board revision.', [{ path: '', message }])
  }
}

/**
 * Withdraws a published release. It stays listed and downloadable behind the reason, and is never the newest again.
 * @throws DomainError `not-found`, `forbidden`, `conflict` (withdrawn already)
 */
export async function withdrawRelease(
  { db, now }: Deps,
  actor: Actor,
  slug: string,
  version: string,
  reason: string
): Promise<void> {
  const { board, release } = await findRelease(db, actor, slug, version)
  if (release.state === 'withdrawn') throw new DomainError('conflict', 'This release is withdrawn already.')
  must(actor, 'release.withdraw', { boardId: board.id, state: release.state })
  const at = now().toISOString()
  await db.transaction().execute(async (tx) => {
    const isDone = await repo.updatePublished(tx, release.id, {
      state: 'withdrawn',
      withdrawn_at: at,
      withdrawn_by: actor.userId,
      withdrawn_reason: reason,
      updated_at: at
    })
    if (!isDone) throw new DomainError('conflict', 'This release is withdrawn already.')
    await recordAudit(
      tx,
      {
        actorId: actor.userId,
        action: 'release.withdraw',
        subjectKind: 'release',
        subjectId: release.id,
        detail: { board: slug, version, reason }
      },
      at
    )
  })
}
