import { sql, type Insertable, type Updateable } from 'kysely'
import type { DbOrTx } from '~db/client.server'
import type { BoardsTable } from '~db/schema'

const columns = [
  'boards.id',
  'boards.slug',
  'boards.name',
  'boards.summary',
  'boards.replaces',
  'boards.licence',
  'boards.description_md',
  'boards.created_at',
  'boards.console_id',
  'consoles.slug as console_slug',
  'consoles.name as console_name',
  'consoles.kind as console_kind'
] as const

const selectBoard = (db: DbOrTx) =>
  db.selectFrom('boards').innerJoin('consoles', 'consoles.id', 'boards.console_id').select(columns)

export type BoardRow = NonNullable<Awaited<ReturnType<typeof findBySlug>>>

export const findBySlug = (db: DbOrTx, slug: string) => selectBoard(db).where('boards.slug', '=', slug).executeTakeFirst()

export const isSlugTaken = async (db: DbOrTx, slug: string) =>
  (await db.selectFrom('boards').select('id').where('slug', '=', slug).executeTakeFirst()) !== undefined

const pattern = (q: string) => `%${q.replace(/[\\%_]/g, (c) => `\\${c}`)}%`

/**
 * Boards by name, `limit` of them after the board `after` (its name and id), optionally only those whose name, summary or replaced part
 * holds `q`.
 */
export function list(db: DbOrTx, { q, after, limit }: { q?: string; after?: { name: string; id: string }; limit: number }) {
  let query = selectBoard(db)
  if (after)
    query = query.where(sql<boolean>`(boards.name collate nocase, boards.id) > (${after.name} collate nocase, ${after.id})`)
  if (q !== undefined && q !== '') {
    const like = pattern(q)
    query = query.where(
      sql<boolean>`(boards.name like ${like} escape '\\' or boards.summary like ${like} escape '\\' or boards.replaces like ${like} escape '\\'
        or consoles.name like ${like} escape '\\')`
    )
  }
  return query
    .orderBy(sql`boards.name collate nocase`)
    .orderBy('boards.id')
    .limit(limit)
    .execute()
}

export const listByMaintainer = (db: DbOrTx, userId: string) =>
  selectBoard(db)
    .innerJoin('board_maintainers', 'board_maintainers.board_id', 'boards.id')
    .where('board_maintainers.user_id', '=', userId)
    .orderBy(sql`boards.name collate nocase`)
    .limit(200)
    .execute()

/** Whether a release of the board was ever published. */
export const hasPublished = async (db: DbOrTx, boardId: string) =>
  (await db
    .selectFrom('releases')
    .select('id')
    .where('board_id', '=', boardId)
    .where('state', '<>', 'draft')
    .limit(1)
    .executeTakeFirst()) !== undefined

export const countAll = async (db: DbOrTx) =>
  Number(
    (
      await db
        .selectFrom('boards')
        .select((eb) => eb.fn.countAll().as('n'))
        .executeTakeFirstOrThrow()
    ).n
  )

export const insert = (db: DbOrTx, board: Insertable<BoardsTable>) => db.insertInto('boards').values(board).execute()

export const update = (db: DbOrTx, id: string, board: Updateable<BoardsTable>) =>
  db.updateTable('boards').set(board).where('id', '=', id).execute()

export const insertMaintainer = (
  db: DbOrTx,
  row: { board_id: string; user_id: string; role: 'owner' | 'maintainer'; added_at: string }
) => db.insertInto('board_maintainers').values(row).execute()

export const listMaintainers = (db: DbOrTx, boardId: string) =>
  db
    .selectFrom('board_maintainers')
    .innerJoin('users', 'users.id', 'board_maintainers.user_id')
    .select(['users.display_name', 'board_maintainers.role'])
    .where('board_id', '=', boardId)
    .orderBy(sql`board_maintainers.role = 'owner' desc`)
    .orderBy('users.display_name')
    .limit(50)
    .execute()

export const listConsoles = (db: DbOrTx) =>
  db.selectFrom('consoles').select(['id', 'slug', 'name']).orderBy('name').limit(500).execute()

/** The newest release of each board: the highest precedence among the released, else among the trials. */
export function listNewestReleases(db: DbOrTx, boardIds: string[]) {
  if (boardIds.length === 0) return Promise.resolve([])
  const ranked = db
    .selectFrom('releases')
    .select([
      'board_id',
      'version',
      'state',
      'board_revision',
      'published_at',
      'facts_json',
      'picture_top_sha256',
      'thumb_top_sha256'
    ])
    .select(
      sql<number>`row_number() over (partition by board_id order by state = 'released' desc, precedence_key desc)`.as('place')
    )
    .where('board_id', 'in', boardIds)
    .where('state', 'in', ['released', 'trial'])
  return db.selectFrom(ranked.as('ranked')).selectAll().where('place', '=', 1).execute()
}
