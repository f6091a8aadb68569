import type { DbOrTx } from '~db/client.server'

/** A session that holds at `at`, with its user; none for a disabled user. */
export const findLive = (db: DbOrTx, idHash: string, at: string) =>
  db
    .selectFrom('sessions')
    .innerJoin('users', 'users.id', 'sessions.user_id')
    .select([
      'sessions.id_hash as idHash',
      'sessions.created_at as createdAt',
      'sessions.last_seen_at as lastSeenAt',
      'users.id as userId',
      'users.display_name as displayName',
      'users.is_steward as isSteward'
    ])
    .where('sessions.id_hash', '=', idHash)
    .where('sessions.expires_at', '>', at)
    .where('users.disabled_at', 'is', null)
    .executeTakeFirst()

export const listMaintained = (db: DbOrTx, userId: string, limit: number) =>
  db.selectFrom('board_maintainers').select(['board_id as boardId', 'role']).where('user_id', '=', userId).limit(limit).execute()

export type NewSession = { idHash: string; userId: string; at: string; expiresAt: string }

export const insert = (db: DbOrTx, session: NewSession) =>
  db
    .insertInto('sessions')
    .values({
      id_hash: session.idHash,
      user_id: session.userId,
      created_at: session.at,
      last_seen_at: session.at,
      expires_at: session.expiresAt
    })
    .execute()

export const touch = (db: DbOrTx, idHash: string, at: string, expiresAt: string) =>
  db.updateTable('sessions').set({ last_seen_at: at, expires_at: expiresAt }).where('id_hash', '=', idHash).execute()

/** The live sessions of a user, the one used last first. */
export const listByUser = (db: DbOrTx, userId: string, at: string, limit: number) =>
  db
    .selectFrom('sessions')
    .select(['id_hash as idHash', 'created_at as createdAt', 'last_seen_at as lastSeenAt', 'expires_at as expiresAt'])
    .where('user_id', '=', userId)
    .where('expires_at', '>', at)
    .orderBy('last_seen_at', 'desc')
    .limit(limit)
    .execute()

export const remove = async (db: DbOrTx, idHash: string) =>
  Number((await db.deleteFrom('sessions').where('id_hash', '=', idHash).executeTakeFirst()).numDeletedRows)

/** Removes a session only if it is the user's own. */
export const removeOfUser = async (db: DbOrTx, userId: string, idHash: string) =>
  Number(
    (await db.deleteFrom('sessions').where('user_id', '=', userId).where('id_hash', '=', idHash).executeTakeFirst())
      .numDeletedRows
  )

export const removeOthers = async (db: DbOrTx, userId: string, keepHash: string | null) =>
  Number(
    (
      await db
        .deleteFrom('sessions')
        .where('user_id', '=', userId)
        .$if(keepHash !== null, (q) => q.where('id_hash', '!=', keepHash!))
        .executeTakeFirst()
    ).numDeletedRows
  )

/** Removes what a user has beyond the `keep` sessions used last. */
export const removeOldest = (db: DbOrTx, userId: string, keep: number) =>
  db
    .deleteFrom('sessions')
    .where('id_hash', 'in', (q) =>
      q
        .selectFrom('sessions')
        .select('id_hash')
        .where('user_id', '=', userId)
        .orderBy('last_seen_at', 'desc')
        .limit(1000)
        .offset(keep)
    )
    .execute()

export const removeExpired = async (db: DbOrTx, at: string, limit: number) =>
  Number(
    (
      await db
        .deleteFrom('sessions')
        .where('id_hash', 'in', (q) => q.selectFrom('sessions').select('id_hash').where('expires_at', '<=', at).limit(limit))
        .executeTakeFirst()
    ).numDeletedRows
  )
