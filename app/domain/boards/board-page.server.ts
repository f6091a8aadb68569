import type { Db } from '~db/client.server'
import { can, type Actor } from '~/domain/accounts/can'
import type { BundleFacts } from '~/domain/bundle/bundle-check.types'
import { dayOf } from '~/lib/dates'
import { renderMarkdown } from '~/server/markdown.server'
import { must } from '~/domain/accounts/must'
import * as repo from './boards.repo.server'
import { boardBySlug } from './boards.server'
import * as fitRepo from './fit-claims.repo.server'

/** The fit of a board on each revision of its console, in the order of the revisions. */
export const claimsOf = (db: Db, board: repo.BoardRow) => fitRepo.listByBoard(db, board.id, board.console_id)

export type BoardPage = Awaited<ReturnType<typeof boardPage>>

/** Everything that a board's page prints, its releases aside (`releasesOfBoard` of the area releases has them). */
export async function boardPage(db: Db, actor: Actor, slug: string) {
  const board = await boardBySlug(db, slug)
  const [fit, maintainers, newest] = await Promise.all([
    claimsOf(db, board),
    repo.listMaintainers(db, board.id),
    repo.listNewestReleases(db, [board.id])
  ])
  const shown = newest[0]
  const facts = shown?.facts_json ? (JSON.parse(shown.facts_json) as BundleFacts) : null
  return {
    id: board.id,
    slug: board.slug,
    name: board.name,
    summary: board.summary,
    replaces: board.replaces,
    licence: board.licence,
    consoleName: board.console_name,
    consoleSlug: board.console_slug,
    openedOn: dayOf(board.created_at),
    description: board.description_md === '' ? null : renderMarkdown(board.description_md),
    fit,
    maintainers: maintainers.map((m) => ({ name: m.display_name, role: m.role })),
    newest: shown
      ? {
          version: shown.version,
          state: shown.state as 'trial' | 'released',
          boardRevision: shown.board_revision,
          publishedOn: dayOf(shown.published_at!),
          widthMm: facts?.width ?? null,
          heightMm: facts?.height ?? null,
          pictureSha256: shown.picture_top_sha256
        }
      : null,
    canEdit: can(actor, 'board.edit', { boardId: board.id }),
    canDraft: can(actor, 'release.draft', { boardId: board.id })
  }
}

/**
 * What the form of a board starts with.
 * @throws DomainError `not-found`, `forbidden`, `unauthenticated`
 */
export async function boardToEdit(db: Db, actor: Actor, slug: string) {
  const board = await boardBySlug(db, slug)
  must(actor, 'board.edit', { boardId: board.id })
  return {
    board,
    consoles: await repo.listConsoles(db),
    isConsoleFixed: await repo.hasPublished(db, board.id),
    fit: await claimsOf(db, board)
  }
}

export const consolesToChoose = (db: Db) => repo.listConsoles(db)
