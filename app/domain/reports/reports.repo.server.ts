import type { Insertable } from 'kysely'
import type { Day } from '~/lib/dates'
import type { DbOrTx } from '~db/client.server'
import type { CheckInsTable, FailuresTable, InstallReportsTable } from '~db/schema'
import type { ExclusionInput } from './report.schema'

export const insertReport = (db: DbOrTx, row: Insertable<InstallReportsTable>) =>
  db.insertInto('install_reports').values(row).execute()

export const insertCheckIn = (db: DbOrTx, row: Insertable<CheckInsTable>) => db.insertInto('check_ins').values(row).execute()

export const insertFailure = (db: DbOrTx, row: Insertable<FailuresTable>) => db.insertInto('failures').values(row).execute()

/** A report with the names of what it is about. */
export const findById = (db: DbOrTx, id: string) =>
  db
    .selectFrom('install_reports as r')
    .innerJoin('releases as v', 'v.id', 'r.release_id')
    .innerJoin('boards as b', 'b.id', 'v.board_id')
    .innerJoin('console_revisions as c', 'c.id', 'r.console_revision_id')
    .innerJoin('consoles as k', 'k.id', 'c.console_id')
    .leftJoin('users as u', 'u.id', 'r.reporter_id')
    .leftJoin('users as x', 'x.id', 'r.excluded_by')
    .where('r.id', '=', id)
    .selectAll('r')
    .select([
      'v.version',
      'v.state',
      'v.withdrawn_reason',
      'b.name as board_name',
      'b.slug as board_slug',
      'c.code as revision_code',
      'k.name as console_name',
      'u.display_name as reporter_name',
      'x.display_name as excluded_by_name'
    ])
    .executeTakeFirst()

export const findByFormKey = (db: DbOrTx, formKey: string) =>
  db.selectFrom('install_reports').where('form_key', '=', formKey).select(['id', 'reporter_id']).executeTakeFirst()

export const findCheckInByFormKey = (db: DbOrTx, formKey: string) =>
  db.selectFrom('check_ins').where('form_key', '=', formKey).select(['id', 'report_id']).executeTakeFirst()

/** More check-ins of one report than anybody files; the page shows no more. */
export const maxCheckIns = 200

export const listCheckIns = (db: DbOrTx, reportId: string) =>
  db
    .selectFrom('check_ins')
    .where('report_id', '=', reportId)
    .orderBy('stated_on')
    .orderBy('filed_at')
    .select(['id', 'statement', 'stated_on', 'filed_at', 'notes'])
    .limit(maxCheckIns)
    .execute()

export const countCheckIns = async (db: DbOrTx, reportId: string) => {
  const row = await db
    .selectFrom('check_ins')
    .where('report_id', '=', reportId)
    .select((e) => e.fn.countAll<number>().as('n'))
    .executeTakeFirstOrThrow()
  return row.n
}

/** The last day of each statement of a report. */
export const lastStatedOn = (db: DbOrTx, reportId: string) =>
  db
    .selectFrom('check_ins')
    .where('report_id', '=', reportId)
    .groupBy('statement')
    .select((e) => ['statement', e.fn.max<Day>('stated_on').as('stated_on')])
    .execute()

export const findFailure = (db: DbOrTx, reportId: string) =>
  db.selectFrom('failures').where('report_id', '=', reportId).selectAll().executeTakeFirst()

/** One page of somebody's reports, newest first, with what was last said of each. */
export const listByReporter = (db: DbOrTx, reporterId: string, limit: number, offset: number) =>
  db
    .selectFrom('install_reports as r')
    .innerJoin('releases as v', 'v.id', 'r.release_id')
    .innerJoin('boards as b', 'b.id', 'v.board_id')
    .innerJoin('console_revisions as c', 'c.id', 'r.console_revision_id')
    .leftJoin('failures as f', 'f.report_id', 'r.id')
    .where('r.reporter_id', '=', reporterId)
    .orderBy('r.filed_at', 'desc')
    .orderBy('r.id')
    .select((e) => [
      'r.id',
      'r.installed_on',
      'r.unit_tag',
      'r.first_power',
      'r.excluded_at',
      'v.version',
      'b.name as board_name',
      'c.code as revision_code',
      'f.found_on as failed_on',
      e
        .selectFrom('check_ins as i')
        .whereRef('i.report_id', '=', 'r.id')
        .where('i.statement', '=', 'running')
        .select((i) => i.fn.max<Day>('i.stated_on').as('on'))
        .as('last_running_on'),
      e
        .selectFrom('check_ins as i')
        .whereRef('i.report_id', '=', 'r.id')
        .where('i.statement', '=', 'parted')
        .select((i) => i.fn.max<Day>('i.stated_on').as('on'))
        .as('parted_on')
    ])
    .limit(limit)
    .offset(offset)
    .execute()

export const countByReporter = async (db: DbOrTx, reporterId: string) => {
  const row = await db
    .selectFrom('install_reports')
    .where('reporter_id', '=', reporterId)
    .select((e) => e.fn.countAll<number>().as('n'))
    .executeTakeFirstOrThrow()
  return row.n
}

export const markExcluded = (db: DbOrTx, id: string, by: string, at: string, { kind, reason }: ExclusionInput) =>
  db
    .updateTable('install_reports')
    .set({ excluded_at: at, excluded_by: by, exclusion_kind: kind, exclusion_reason: reason })
    .where('id', '=', id)
    .where('excluded_at', 'is', null)
    .execute()
