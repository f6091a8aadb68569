import { sql, type Kysely } from 'kysely'

/*
 * What reliability pages read instead of reports: counts of all that was ever told, kept up to date by whatever changes a report. A group is
 * a release or batch (`scope_id`) on a console revision, of one evidence grade, method and first-power result or of all (`*`). Days are numbered from
 * the installation; `counts` holds 32 of them (`day-block.ts`). In `life_counts` an `upper` of -1 and an empty `cause` mean none. `last_filed_on` is the
 * last UTC day on which anything was filed, excluded or changed: from then on the counts are what is known.
 */
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
    last_filed_on text
  ) strict, without rowid`
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of statements) await sql.raw(statement).execute(db)
}
