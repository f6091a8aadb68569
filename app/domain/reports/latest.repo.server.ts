import { sql } from 'kysely'
import type { DbOrTx } from '~db/client.server'

/**
 * The latest reports on the boards that somebody maintains, newest first. Reads at most `limit` reports of each release, from the end of
 * the index install_reports_latest.
 */
export const latestOfMaintainer = (db: DbOrTx, userId: string, limit: number) =>
  db
    .selectFrom('board_maintainers as m')
    .innerJoin('boards as b', 'b.id', 'm.board_id')
    .innerJoin('releases as v', 'v.board_id', 'b.id')
    .innerJoin('install_reports as r', (join) =>
      join.on(
        sql<boolean>`r.id in (select l.id from install_reports as l where l.release_id = v.id
          order by l.filed_at desc, l.id desc limit ${limit})`
      )
    )
    .innerJoin('console_revisions as c', 'c.id', 'r.console_revision_id')
    .leftJoin('failures as f', 'f.report_id', 'r.id')
    .leftJoin('users as u', 'u.id', 'r.reporter_id')
    .where('m.user_id', '=', userId)
    .orderBy('r.filed_at', 'desc')
    .orderBy('r.id', 'desc')
    .limit(limit)
    .select([
      'r.id',
      'r.filed_on',
      'r.first_power',
      'r.excluded_at',
      'v.version',
      'b.name as board_name',
      'c.code as revision_code',
      'f.found_on as failed_on',
      'f.cause',
      'u.display_name as reporter_name'
    ])

/** What `latestOfMaintainer` asks for. */
export const listLatestOfMaintainer = (db: DbOrTx, userId: string, limit: number) =>
  latestOfMaintainer(db, userId, limit).execute()
