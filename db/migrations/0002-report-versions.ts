import { sql, type Kysely } from 'kysely'

/* How often the reports of a board changed, so that a computed figure can be kept until it is stale. Held by triggers: whatever writes. */
const bump = (boardId: string) =>
  `insert into report_versions (board_id, version) values (${boardId}, 1) on conflict (board_id) do update set version = version + 1;`
const boardOfRelease = (releaseId: string) => `(select board_id from releases where id = ${releaseId})`
const boardOfReport = (reportId: string) =>
  `(select v.board_id from install_reports r join releases v on v.id = r.release_id where r.id = ${reportId})`

const statements = [
  `create table report_versions (
    board_id text primary key references boards (id),
    version integer not null
  ) strict, without rowid`,
  `create trigger report_versions_filed after insert on install_reports begin ${bump(boardOfRelease('new.release_id'))} end`,
  `create trigger report_versions_changed after update on install_reports begin ${bump(boardOfRelease('new.release_id'))} end`,
  `create trigger report_versions_checked_in after insert on check_ins begin ${bump(boardOfReport('new.report_id'))} end`,
  `create trigger report_versions_failed after insert on failures begin ${bump(boardOfReport('new.report_id'))} end`,
  `create trigger report_versions_failure_changed after update on failures begin ${bump(boardOfReport('new.report_id'))} end`,
  `create trigger report_versions_released after update of state on releases begin ${bump('new.board_id')} end`
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of statements) await sql.raw(statement).execute(db)
}
