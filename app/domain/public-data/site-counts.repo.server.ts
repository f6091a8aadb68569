import type { DbOrTx } from '~db/client.server'

const tables = ['boards', 'consoles', 'install_reports'] as const
/** A count stops here; it runs along the table's smallest index. */
const most = 1_000_000

/** The rows of each table, at most `most`. */
export async function countRows(db: DbOrTx): Promise<Record<(typeof tables)[number], number>> {
  const counts = await Promise.all(
    tables.map(async (table) => {
      const { n } = await db
        .selectFrom(db.selectFrom(table).select('id').limit(most).as('rows'))
        .select((eb) => eb.fn.countAll<number>().as('n'))
        .executeTakeFirstOrThrow()
      return [table, Number(n)] as const
    })
  )
  return Object.fromEntries(counts) as Record<(typeof tables)[number], number>
}
