import type { Db, Tx } from '~db/client.server'
import { recordAudit } from '~/domain/audit/record.server'
import type { Actor } from '~/domain/accounts/can'
import { must } from '~/domain/accounts/must'
import { boardBySlug } from '~/domain/boards/boards.server'
import { DomainError } from '~/lib/domain-error'
import { newId } from '~/lib/new-id'
import * as findings from './findings.repo.server'
import type { Draft } from './release.schema'
import * as repo from './releases.repo.server'
import { findRelease } from './releases.server'
import * as staged from './staged-objects.repo.server'
import { objectsOfRelease } from './store-pictures.server'
import { precedenceKey, type Version } from './version'

type Deps = { db: Db; now: () => Date }

/** What a draft's form says, as columns of its row. */
export const detailColumns = (draft: Draft) => ({
  board_revision: draft.boardRevision,
  notes_md: draft.notes,
  declared_layers: draft.layers ?? null,
  declared_thickness_mm: draft.thicknessMm ?? null,
  declared_copper_um: draft.copperUm ?? null,
  declared_finish: draft.finish ?? null,
  declared_mask: draft.mask ?? null,
  declared_legend: draft.legend ?? null,
  declared_stencil: draft.stencil ?? null,
  order_note: draft.orderNote
})

/** A version is used once for all on a board; build metadata does not make it another one (SemVer 2.0.0, item 10). */
async function refuseUsedVersion(tx: Tx, boardId: string, version: Version, exceptId?: string) {
  const taken = await repo.findByVersion(tx, boardId, precedenceKey(version))
  if (!taken || taken.id === exceptId) return
  const what = taken.state === 'draft' ? `There is a draft ${taken.version} already.` : `${taken.version} is published already.`
  const why = taken.version === version.text ? '' : ' What stands behind + does not make another version.'
  throw new DomainError('conflict', 'This version is used.', [{ path: 'version', message: `${what}${why} Take the next one.` }])
}

/**
 * Begins a release of a board as a draft.
 * @returns the version, which is its address
 * @throws DomainError `not-found`, `forbidden`, `conflict` (version used)
 */
export async function draftRelease({ db, now }: Deps, actor: Actor, slug: string, draft: Draft): Promise<string> {
  const board = await boardBySlug(db, slug)
  must(actor, 'release.draft', { boardId: board.id })
  const at = now().toISOString()
  const id = newId()
  await db.transaction().execute(async (tx) => {
    await refuseUsedVersion(tx, board.id, draft.version)
    await repo.insert(tx, {
      id,
      board_id: board.id,
      version: draft.version.text,
      precedence_key: precedenceKey(draft.version),
      state: 'draft',
      ...detailColumns(draft),
      created_at: at,
      created_by: actor.userId,
      updated_at: at
    })
    await recordAudit(
      tx,
      {
        actorId: actor.userId,
        action: 'release.draft',
        subjectKind: 'release',
        subjectId: id,
        detail: { board: slug, version: draft.version.text }
      },
      at
    )
  })
  return draft.version.text
}

export const draftGone = () =>
  new DomainError('conflict', 'This draft was published or deleted in the meantime. Open the board to see how it stands.')

/**
 * Changes a draft. When the board revision, the declared layers or the thickness change, what the check said no longer holds and must be run
 * again.
 * @returns the version, and whether the bundle must be checked again
 * @throws DomainError `not-found`, `forbidden`, `conflict` (version used; published meanwhile)
 */
export async function editDraft({ db, now }: Deps, actor: Actor, slug: string, version: string, draft: Draft) {
  const { board, release } = await findRelease(db, actor, slug, version)
  must(actor, 'release.edit', { boardId: board.id, state: release.state })
  const at = now().toISOString()
  const needsCheck =
    release.bundle_sha256 !== null &&
    (draft.boardRevision !== release.board_revision ||
      (draft.layers ?? null) !== release.declared_layers ||
      (draft.thicknessMm ?? null) !== release.declared_thickness_mm)
  await db.transaction().execute(async (tx) => {
    await refuseUsedVersion(tx, board.id, draft.version, release.id)
    const isChanged = await repo.updateDraft(tx, release.id, {
      version: draft.version.text,
      precedence_key: precedenceKey(draft.version),
      ...detailColumns(draft),
      ...(needsCheck ? { check_state: 'none' as const, is_check_ok: null } : {}),
      updated_at: at
    })
    if (!isChanged) throw draftGone()
    await recordAudit(
      tx,
      {
        actorId: actor.userId,
        action: 'release.edit',
        subjectKind: 'release',
        subjectId: release.id,
        detail: { from: release.version, to: draft.version.text }
      },
      at
    )
  })
  return { version: draft.version.text, releaseId: release.id, needsCheck }
}

/** Deletes a draft; its objects go to the sweep, which keeps those that another release shares. */
export async function deleteDraft({ db, now }: Deps, actor: Actor, slug: string, version: string): Promise<void> {
  const { board, release } = await findRelease(db, actor, slug, version)
  must(actor, 'release.edit', { boardId: board.id, state: release.state })
  const at = now().toISOString()
  await db.transaction().execute(async (tx) => {
    const row = await repo.findById(tx, release.id)
    const keys = row ? await objectsOfRelease(tx, row) : []
    if (!row || !(await repo.deleteDraft(tx, release.id))) throw draftGone()
    for (const key of keys) await staged.stage(tx, key, at)
    await recordAudit(
      tx,
      {
        actorId: actor.userId,
        action: 'release.delete-draft',
        subjectKind: 'release',
        subjectId: release.id,
        detail: { board: slug, version }
      },
      at
    )
  })
}

/**
 * Writes the maintainer's answers to the cautions of the check, by the finding's id; an empty one takes an answer back.
 * @throws DomainError `not-found`, `forbidden`, `conflict` (another bundle meanwhile, or published)
 */
export async function answerCautions(
  { db, now }: Deps,
  actor: Actor,
  slug: string,
  version: string,
  answers: ReadonlyMap<string, string>
): Promise<void> {
  const { board, release } = await findRelease(db, actor, slug, version)
  must(actor, 'release.edit', { boardId: board.id, state: release.state })
  const at = now().toISOString()
  await db.transaction().execute(async (tx) => {
    if (!(await repo.updateDraft(tx, release.id, { updated_at: at }))) throw draftGone()
    const stored = new Map((await findings.listFindings(tx, release.id)).map((f) => [f.id, f]))
    const changed: string[] = []
    for (const [id, answer] of answers) {
      const finding = stored.get(id)
      if (!finding || finding.severity !== 'caution')
        throw new DomainError('conflict', 'The files were checked again since you opened this page. Look at the new findings.')
      if ((finding.answer ?? '') === answer) continue
      changed.push(finding.code)
      await findings.setAnswer(
        tx,
        release.id,
        id,
        answer === ''
          ? { answer: null, answered_at: null, answered_by: null }
          : { answer, answered_at: at, answered_by: actor.userId }
      )
    }
    await recordAudit(
      tx,
      { actorId: actor.userId, action: 'release.answer', subjectKind: 'release', subjectId: release.id, detail: { changed } },
      at
    )
  })
}
