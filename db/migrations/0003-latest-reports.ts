import { sql, type Kysely } from 'kysely'

/* The latest reports of a release, wherever they were fitted, read from the end of an index. */
export async function up(db: Kysely<unknown>): Promise<void> {
  await sql.raw('create index install_reports_latest on install_reports (release_id, filed_at, id)').execute(db)
}
