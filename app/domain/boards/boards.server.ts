import type { Db } from '~db/client.server'
import type { BundleFacts } from '~/domain/bundle/bundle-check.types'
import { recordAudit } from '~/domain/audit/record.server'
import type { Actor } from '~/domain/accounts/can'
import { must } from '~/domain/accounts/must'
import { picturePath, thumbnailPath } from '~/domain/releases/release-path'
import { DomainError } from '~/lib/domain-error'
import { newId } from '~/lib/new-id'
import type { BoardEdit, BoardOpening } from './board.schema'
import * as repo from './boards.repo.server'
import * as fitRepo from './fit-claims.repo.server'

type Deps = { db: Db; now: () => Date }

export type { BoardRow } from './boards.repo.server'

/** @throws DomainError `not-found` */
export async function boardBySlug(db: Db, slug: string): Promise<repo.BoardRow> {
  const board = await repo.findBySlug(db, slug)
  if (!board) throw new DomainError('not-found', `There is no board at /boards/${slug.slice(0, 60)}.`)
  return board
}

const noConsole = () =>
  new DomainError('invalid', 'Choose the console that the board is made for.', [
    { path: 'console', message: 'Choose the console that the board is made for.' }
  ])

/**
 * Opens a board; whoever opens it is its owner.
 * @returns the board's address
 * @throws DomainError `invalid` (unknown console), `conflict` (address taken), `unauthenticated`
 */
export async function openBoard({ db, now }: Deps, actor: Actor, input: BoardOpening): Promise<string> {
  must(actor, 'board.open', null)
  const at = now().toISOString()
  const id = newId()
  await db.transaction().execute(async (tx) => {
    if (!(await repo.listConsoles(tx)).some((c) => c.id === input.console)) throw noConsole()
    if (await repo.isSlugTaken(tx, input.slug))
      throw new DomainError('conflict', 'This address is taken.', [
        { path: 'slug', message: `/boards/${input.slug} is taken. Write another address.` }
      ])
    await repo.insert(tx, {
      id,
      slug: input.slug,
      name: input.name,
      summary: input.summary,
      replaces: input.replaces,
      console_id: input.console,
      licence: input.licence,
      description_md: input.description,
      created_at: at,
      created_by: actor.userId
    })
    await repo.insertMaintainer(tx, { board_id: id, user_id: actor.userId!, role: 'owner', added_at: at })
    await recordAudit(
      tx,
      { actorId: actor.userId, action: 'board.open', subjectKind: 'board', subjectId: id, detail: { slug: input.slug } },
      at
    )
  })
  return input.slug
}

/**
 * Changes what a board says about itself; its address stays. The console is fixed once a release is published, because reports and claims
 * speak of its revisions.
 * @throws DomainError `not-found`, `forbidden`, `invalid`
 */
export async function editBoard({ db, now }: Deps, actor: Actor, slug: string, input: BoardEdit): Promise<void> {
  const board = await boardBySlug(db, slug)
  must(actor, 'board.edit', { boardId: board.id })
  const at = now().toISOString()
  await db.transaction().execute(async (tx) => {
    if (input.console !== board.console_id) {
      if (!(await repo.listConsoles(tx)).some((c) => c.id === input.console)) throw noConsole()
      if (await repo.hasPublished(tx, board.id))
        throw new DomainError('conflict', 'The console is fixed.', [
          {
            path: 'console',
            message: `The console stays ${board.console_name}: a release is published for it. Open another board.`
          }
        ])
      await fitRepo.deleteForOtherConsoles(tx, board.id, input.console)
    }
    await repo.update(tx, board.id, {
      name: input.name,
      summary: input.summary,
      replaces: input.replaces,
      console_id: input.console,
      licence: input.licence,
      description_md: input.description
    })
    await recordAudit(
      tx,
      {
        actorId: actor.userId,
        action: 'board.edit',
        subjectKind: 'board',
        subjectId: board.id,
        detail: { from: { name: board.name, licence: board.licence }, to: { name: input.name, licence: input.licence } }
      },
      at
    )
  })
}

export type ListedBoard = {
  id: string
  slug: string
  name: string
  summary: string
  replaces: string
  licence: string
  consoleSlug: string
  consoleName: string
  openedAt: string
  newest: {
    version: string
    state: 'trial' | 'released'
    boardRevision: string
    publishedAt: string
    widthMm: number | null
    heightMm: number | null
    /** The address of its top side, small; null where it was not drawn. */
    thumbnail: string | null
  } | null
}

export type BoardPage = { boards: ListedBoard[]; next: string | null }

export const readCursor = (text: string | null): { name: string; id: string } | undefined => {
  if (text === null || text === '') return undefined
  const at = text.lastIndexOf('~')
  if (at < 1 || at === text.length - 1)
    throw new DomainError('invalid', 'This place in the list cannot be read.', [
      { path: 'after', message: 'is not a place that a page of this list gave' }
    ])
  return { name: text.slice(0, at), id: text.slice(at + 1) }
}

/**
 * One page of boards by name, those that hold `q` in name, summary, replaced part or console. `next` is what to pass as `after` for the page that follows; null
 * at the end.
 */
export async function listBoards(
  db: Db,
  { q, after, limit = 20 }: { q?: string; after?: string | null; limit?: number }
): Promise<BoardPage> {
  const rows = await repo.list(db, { q: q?.trim(), after: readCursor(after ?? null), limit: limit + 1 })
  const page = rows.slice(0, limit)
  const last = page.at(-1)
  return {
    boards: await withNewest(db, page),
    next: rows.length > limit && last ? `${last.name}~${last.id}` : null
  }
}

/** The boards that somebody maintains, by name. */
export const boardsOfMaintainer = async (db: Db, userId: string) => withNewest(db, await repo.listByMaintainer(db, userId))

async function withNewest(db: Db, boards: repo.BoardRow[]): Promise<ListedBoard[]> {
  const ids = boards.map((b) => b.id)
  const newest = new Map((await repo.listNewestReleases(db, ids)).map((r) => [r.board_id, r]))
  return boards.map((b) => {
    const r = newest.get(b.id)
    const facts = r?.facts_json ? (JSON.parse(r.facts_json) as BundleFacts) : null
    return {
      id: b.id,
      slug: b.slug,
      name: b.name,
      summary: b.summary,
      replaces: b.replaces,
      licence: b.licence,
      consoleSlug: b.console_slug,
      consoleName: b.console_name,
      openedAt: b.created_at,
      newest: r
        ? {
            version: r.version,
            state: r.state as 'trial' | 'released',
            boardRevision: r.board_revision,
            publishedAt: r.published_at!,
            widthMm: facts?.width ?? null,
            heightMm: facts?.height ?? null,
            thumbnail: thumbnailOf(b.slug, r)
          }
        : null
    }
  })
}

/** The thumbnail, or the picture itself where only that could be drawn. */
function thumbnailOf(
  slug: string,
  release: { version: string; picture_top_sha256: string | null; thumb_top_sha256: string | null }
): string | null {
  const { version, picture_top_sha256: picture, thumb_top_sha256: thumbnail } = release
  if (thumbnail !== null) return thumbnailPath(slug, version, 'top', thumbnail)
  return picture === null ? null : picturePath(slug, version, 'top', picture)
}
