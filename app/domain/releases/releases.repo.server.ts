import type { Insertable, Updateable } from 'kysely'
import type { DbOrTx } from '~db/client.server'
import type { ReleasesTable } from '~db/schema'

export type ReleaseRow = NonNullable<Awaited<ReturnType<typeof findById>>>

export const findById = (db: DbOrTx, id: string) => db.selectFrom('releases').selectAll().where('id', '=', id).executeTakeFirst()

export const findByVersion = (db: DbOrTx, boardId: string, precedenceKey: string) =>
  db
    .selectFrom('releases')
    .selectAll()
    .where('board_id', '=', boardId)
    .where('precedence_key', '=', precedenceKey)
    .executeTakeFirst()

/** Every release of a board, newest version first; a board has no more than a few dozen. */
export const listByBoard = (db: DbOrTx, boardId: string) =>
  db
    .selectFrom('releases')
    .select([
      'id',
      'board_id',
      'version',
      'precedence_key',
      'board_revision',
      'state',
      'bundle_bytes',
      'bundle_sha256',
      'check_state',
      'is_check_ok',
      'created_at',
      'updated_at',
      'published_at',
      'withdrawn_at',
      'withdrawn_reason'
    ])
    .where('board_id', '=', boardId)
    .orderBy('precedence_key', 'desc')
    .limit(500)
    .execute()

/** Published releases for the API, by precedence downwards, those below the key `below`. */
export function listPublished(db: DbOrTx, boardId: string, { below, limit }: { below?: string; limit: number }) {
  let query = db.selectFrom('releases').selectAll().where('board_id', '=', boardId).where('state', '<>', 'draft')
  if (below !== undefined) query = query.where('precedence_key', '<', below)
  return query.orderBy('precedence_key', 'desc').limit(limit).execute()
}

export const listDraftsOfMaintainer = (db: DbOrTx, userId: string) =>
  db
    .selectFrom('releases')
    .innerJoin('boards', 'boards.id', 'releases.board_id')
    .innerJoin('board_maintainers', 'board_maintainers.board_id', 'boards.id')
    .select([
      'releases.id',
      'releases.version',
      'releases.board_revision',
      'releases.updated_at',
      'releases.bundle_sha256',
      'releases.check_state',
      'releases.is_check_ok',
      'boards.slug as board_slug',
      'boards.name as board_name'
    ])
    .where('board_maintainers.user_id', '=', userId)
    .where('releases.state', '=', 'draft')
    .orderBy('releases.updated_at', 'desc')
    .limit(100)
    .execute()

export const insert = (db: DbOrTx, release: Insertable<ReleasesTable>) => db.insertInto('releases').values(release).execute()

/** @returns whether the release was there in the state `draft` and is changed now */
export const updateDraft = async (db: DbOrTx, id: string, release: Updateable<ReleasesTable>) =>
  (await db.updateTable('releases').set(release).where('id', '=', id).where('state', '=', 'draft').executeTakeFirst())
    .numUpdatedRows === 1n

/** As `updateDraft`, for a published release that is being withdrawn. */
export const updatePublished = async (db: DbOrTx, id: string, release: Updateable<ReleasesTable>) =>
  (
    await db
      .updateTable('releases')
      .set(release)
      .where('id', '=', id)
      .where('state', 'in', ['trial', 'released'])
      .executeTakeFirst()
  ).numUpdatedRows === 1n

export const deleteDraft = async (db: DbOrTx, id: string) =>
  (await db.deleteFrom('releases').where('id', '=', id).where('state', '=', 'draft').executeTakeFirst()).numDeletedRows === 1n

/** Whether any release row refers to a stored content, as its bundle or as a picture of a side. */
export const refersTo = async (db: DbOrTx, sha256: string) => {
  for (const column of [
    'bundle_sha256',
    'picture_top_sha256',
    'picture_bottom_sha256',
    'thumb_top_sha256',
    'thumb_bottom_sha256'
  ] as const) {
    const found = await db.selectFrom('releases').select('id').where(column, '=', sha256).limit(1).executeTakeFirst()
    if (found) return true
  }
  return false
}
