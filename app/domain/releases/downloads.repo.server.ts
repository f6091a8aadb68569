import { sql } from 'kysely'
import type { DbOrTx } from '~db/client.server'

/** Counts one download on a day. */
export const count = (db: DbOrTx, releaseId: string, day: string) =>
  db
    .insertInto('downloads')
    .values({ release_id: releaseId, day, count: 1 })
    .onConflict((oc) => oc.columns(['release_id', 'day']).doUpdateSet({ count: sql`count + 1` }))
    .execute()

export const total = async (db: DbOrTx, releaseId: string): Promise<number> =>
  Number(
    (
      await db
        .selectFrom('downloads')
        .select((eb) => eb.fn.sum<number>('count').as('n'))
        .where('release_id', '=', releaseId)
        .executeTakeFirst()
    )?.n ?? 0
  )
