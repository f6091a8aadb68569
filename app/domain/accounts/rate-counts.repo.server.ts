import type { DbOrTx } from '~db/client.server'

/** Counts one more use of a bucket in its window. @returns the uses so far, this one included */
export async function add(db: DbOrTx, bucket: string, windowStart: number): Promise<number> {
  const { count } = await db
    .insertInto('rate_counts')
    .values({ bucket, window_start: windowStart, count: 1 })
    .onConflict((c) => c.columns(['bucket', 'window_start']).doUpdateSet((e) => ({ count: e('rate_counts.count', '+', 1) })))
    .returning('count')
    .executeTakeFirstOrThrow()
  return count
}

export const removeBefore = (db: DbOrTx, windowStart: number) =>
  db.deleteFrom('rate_counts').where('window_start', '<', windowStart).execute()
