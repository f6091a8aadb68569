import type { Db } from '~db/client.server'
import type { Actor } from '~/domain/accounts/can'
import { boardsOfMaintainer } from '~/domain/boards/boards.server'
import { must } from '~/domain/accounts/must'
import { DomainError } from '~/lib/domain-error'
import { dayOf } from '~/lib/dates'
import * as repo from './releases.repo.server'
import { findRelease } from './releases.server'
import { newestOf } from './version'

export type BoardRelease = Awaited<ReturnType<typeof releasesOfBoard>>[number]

/** The releases of a board for its page: published ones for everybody, drafts only when asked for. Newest version first. */
export async function releasesOfBoard(db: Db, boardId: string, withDrafts: boolean) {
  const rows = (await repo.listByBoard(db, boardId)).filter((r) => withDrafts || r.state !== 'draft')
  const newest = newestOf(rows.map((r) => ({ id: r.id, state: r.state, precedenceKey: r.precedence_key })))
  return rows.map((r) => ({
    version: r.version,
    state: r.state,
    boardRevision: r.board_revision,
    publishedOn: r.published_at === null ? null : dayOf(r.published_at),
    withdrawnOn: r.withdrawn_at === null ? null : dayOf(r.withdrawn_at),
    withdrawnReason: r.withdrawn_reason,
    changedOn: dayOf(r.updated_at),
    isNewest: r.id === newest?.id
  }))
}

/** A maintainer's desk: their boards with the newest release, and their drafts with what each waits for. */
export async function benchOf(db: Db, actor: Actor) {
  if (actor.userId === null) throw new DomainError('unauthenticated', 'Sign in to see your bench.')
  const [boards, drafts] = await Promise.all([
    boardsOfMaintainer(db, actor.userId),
    repo.listDraftsOfMaintainer(db, actor.userId)
  ])
  return {
    boards,
    drafts: drafts.map((d) => ({
      boardSlug: d.board_slug,
      boardName: d.board_name,
      version: d.version,
      boardRevision: d.board_revision,
      changedOn: dayOf(d.updated_at),
      waitsFor:
        d.bundle_sha256 === null
          ? 'a bundle'
          : d.check_state !== 'done'
            ? 'the check'
            : d.is_check_ok === 0
              ? 'mended files: a stop stands'
              : 'answers, then publishing'
    }))
  }
}

/** What the form of a draft starts with. */
export async function draftToEdit(db: Db, actor: Actor, slug: string, version: string) {
  const { board, release } = await findRelease(db, actor, slug, version)
  must(actor, 'release.edit', { boardId: board.id, state: release.state })
  return { board, release }
}
