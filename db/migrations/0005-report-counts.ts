import { sql, type Kysely } from 'kysely'

/*
 * What reliability pages read instead of reports: counts of all that was ever told, kept up to date by whatever changes a report. A group is
 * a release or batch (`scope_id`) on a console revision, of one evidence grade, method and first-power result or of all (`*`). Days are numbered from
 * the installation; `counts` holds 32 of them (`day-block.ts`). In `life_counts` an `upper` of -1 and an empty `cause` mean none. `last_filed_on` is the
 * last UTC day on which anything was filed, excluded or changed: from then on the counts are what is known.
 *
 * Whatever writes to reports is noticed by triggers: `uncounted` names the report that was written since the board was counted, `*` when there
 * are several. Who writes through `withCounts` counts it and clears that; otherwise the counts are not read until they are rebuilt.
 */
const mark = (boardId: string, reportId: string) =>
  `update counted_boards set uncounted = case when ifnull(uncounted, ${reportId}) = ${reportId} then ${reportId} else '*' end
    where board_id = ${boardId};`
const markReport = (row: 'old' | 'new') => mark(`(select board_id from releases where id = ${row}.release_id)`, `${row}.id`)
const markAbout = (row: 'old' | 'new') =>
  mark(
    `(select v.board_id from install_reports r join releases v on v.id = r.release_id where r.id = ${row}.report_id)`,
    `${row}.report_id`
  )
const reportColumns =
  'id, release_id, console_revision_id, unit_tag, installed_on, filed_on, filed_at, evidence, method, first_power, excluded_at, exclusion_kind'
const triggers = [
  `create trigger counted_boards_report after insert on install_reports begin ${markReport('new')} end`,
  `create trigger counted_boards_report_changed after update of ${reportColumns} on install_reports
    begin ${markReport('old')} ${markReport('new')} end`,
  `create trigger counted_boards_report_gone after delete on install_reports begin ${markReport('old')} end`,
  ...(['check_ins', 'failures'] as const).flatMap((table) => [
    `create trigger counted_boards_${table} after insert on ${table} begin ${markAbout('new')} end`,
    `create trigger counted_boards_${table}_changed after update on ${table} begin ${markAbout('old')} ${markAbout('new')} end`,
    `create trigger counted_boards_${table}_gone after delete on ${table} begin ${markAbout('old')} end`
  ]),
  `create trigger counted_boards_unit_moved after update of batch_id on units begin
    update counted_boards set uncounted = '*' where board_id in (select v.board_id from install_reports r
      join releases v on v.id = r.release_id where r.unit_tag = new.tag); end`
]

const statements = [
  `create table group_totals (
    id integer primary key,
    board_id text not null references boards (id),
    scope_id text not null,
    evidence text not null,
    method text not null,
    first_power text not null check (first_power in ('works', '*')),
    console_revision_id text not null references console_revisions (id),
    totals_json text not null,
    unique (scope_id, evidence, method, first_power, console_revision_id)
  ) strict`,
  'create index group_totals_by_board on group_totals (board_id)',
  `create table day_counts (
    group_id integer not null references group_totals (id),
    block integer not null,
    counts blob not null check (length(counts) > 0),
    primary key (group_id, block)
  ) strict, without rowid`,
  `create table life_counts (
    group_id integer not null references group_totals (id),
    grain integer not null check (grain in (1, 14)),
    entry integer not null,
    lower integer not null,
    upper integer not null,
    cause text not null,
    count integer not null check (count > 0),
    primary key (group_id, grain, entry, lower, upper, cause)
  ) strict, without rowid`,
  `create table counted_boards (
    board_id text primary key references boards (id),
    rules integer not null,
    last_filed_on text,
    uncounted text
  ) strict, without rowid`,
  ...triggers
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of statements) await sql.raw(statement).execute(db)
}
