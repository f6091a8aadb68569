import type { DbOrTx } from '~db/client.server'

/** Objects on their way into storage, or out of it: written down before they are there, forgotten when a release refers to them. */
export const stage = (db: DbOrTx, objectKey: string, stagedAt: string) =>
  db
    .insertInto('staged_objects')
    .values({ object_key: objectKey, staged_at: stagedAt })
    .onConflict((oc) => oc.column('object_key').doUpdateSet({ staged_at: stagedAt }))
    .execute()

export const unstage = (db: DbOrTx, objectKey: string) =>
  db.deleteFrom('staged_objects').where('object_key', '=', objectKey).execute()

export const listOlderThan = async (db: DbOrTx, at: string, limit: number) =>
  (
    await db
      .selectFrom('staged_objects')
      .select('object_key')
      .where('staged_at', '<', at)
      .orderBy('staged_at')
      .limit(limit)
      .execute()
  ).map((row) => row.object_key)

export const isOlderThan = async (db: DbOrTx, objectKey: string, at: string) =>
  (await db
    .selectFrom('staged_objects')
    .select('object_key')
    .where('object_key', '=', objectKey)
    .where('staged_at', '<', at)
    .executeTakeFirst()) !== undefined
