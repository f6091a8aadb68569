import type { Insertable } from 'kysely'
import type { Tx } from '~db/client.server'
import type { Schema } from '~db/schema'

/** SQLite takes 32,766 bound values in one statement; the widest table here has 33 columns. */
const chunk = 500

/** Inserts any number of rows of one table. */
export async function insertRows<T extends keyof Schema>(tx: Tx, table: T, rows: Insertable<Schema[T]>[]): Promise<void> {
  for (let i = 0; i < rows.length; i += chunk)
    await tx
      .insertInto(table)
      .values(rows.slice(i, i + chunk))
      .execute()
}
