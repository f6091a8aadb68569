import { sql, type RawBuilder } from 'kysely'
import type { Tx } from '~db/client.server'
import type { CountTables } from './counts-writing.repo.server'

/** Where a recount counts, beside the stored counts and in their layout: tables of its connection only, for one board at a time. */
export const freshTables: CountTables = {
  groups: 'temp.fresh_group_totals',
  days: 'temp.fresh_day_counts',
  lives: 'temp.fresh_life_counts'
}

export async function emptyFreshTables(tx: Tx): Promise<void> {
  for (const statement of [
    `create temp table if not exists fresh_group_totals (id integer primary key, board_id text, scope_id text, evidence text, method text,
      first_power text, console_revision_id text, totals_json text,
      unique (scope_id, evidence, method, first_power, console_revision_id)) strict`,
    `create temp table if not exists fresh_day_counts (group_id integer, block integer, counts blob,
      primary key (group_id, block)) strict, without rowid`,
    `create temp table if not exists fresh_life_counts (group_id integer, grain integer, entry integer, lower integer, upper integer,
      cause text, count integer, primary key (group_id, grain, entry, lower, upper, cause)) strict, without rowid`,
    'delete from temp.fresh_group_totals',
    'delete from temp.fresh_day_counts',
    'delete from temp.fresh_life_counts'
  ])
    await sql.raw(statement).execute(tx)
}

/** How many rows of each kind a board's counts have when counted anew. */
export async function countFresh(tx: Tx): Promise<number> {
  const { rows } = await sql<{ n: number }>`select (select count(*) from temp.fresh_group_totals) +
    (select count(*) from temp.fresh_day_counts) + (select count(*) from temp.fresh_life_counts) as n`.execute(tx)
  return rows[0]!.n
}

/** Puts the board's fresh counts into the place of the stored ones, which are gone already. */
export async function keepFresh(tx: Tx): Promise<void> {
  await sql`insert into main.group_totals (id, board_id, scope_id, evidence, method, first_power, console_revision_id, totals_json)
    select id, board_id, scope_id, evidence, method, first_power, console_revision_id, totals_json
    from temp.fresh_group_totals`.execute(tx)
  await sql`insert into main.day_counts (group_id, block, counts) select group_id, block, counts
    from temp.fresh_day_counts`.execute(tx)
  await sql`insert into main.life_counts (group_id, grain, entry, lower, upper, cause, count)
    select group_id, grain, entry, lower, upper, cause, count from temp.fresh_life_counts`.execute(tx)
}

/** A row that the stored counts have otherwise than the fresh ones; null where one side has none. `total`: how many there are of its kind. */
export type DifferingRow = {
  scope: string
  revision: string
  evidence: string
  method: string
  first_power: string
  /** The block's number, or the observation's; empty for totals. */
  place: string
  stored: string | Uint8Array | number | null
  counted: string | Uint8Array | number | null
  total: number
}

// A release by its version, a batch by its release's and its code, what is neither by its id.
const named = sql`coalesce((select version from releases where id = g.scope_id),
    (select v.version || '/' || b.code from batches b join releases v on v.id = b.release_id where b.id = g.scope_id), g.scope_id) as scope,
  coalesce((select code from console_revisions where id = g.console_revision_id), g.console_revision_id) as revision,
  g.evidence, g.method, g.first_power`

const differing = async (tx: Tx, rows: RawBuilder<unknown>, limit: number) =>
  (await sql<DifferingRow>`select *, count(*) over () as total from (${rows}) limit ${limit}`.execute(tx)).rows

export const listDifferingTotals = (tx: Tx, boardId: string, limit: number) =>
  differing(
    tx,
    sql`select ${named}, '' as place, g.totals_json as stored, f.totals_json as counted
        from main.group_totals g left join temp.fresh_group_totals f on f.id = g.id
        where g.board_id = ${boardId} and f.totals_json is not g.totals_json
      union all select ${named}, '', null, g.totals_json
        from temp.fresh_group_totals g left join main.group_totals s on s.id = g.id where s.id is null`,
    limit
  )

export const listDifferingDays = (tx: Tx, boardId: string, limit: number) =>
  differing(
    tx,
    sql`select ${named}, 'block ' || d.block as place, d.counts as stored, f.counts as counted
        from main.group_totals g join main.day_counts d on d.group_id = g.id
        left join temp.fresh_day_counts f on f.group_id = d.group_id and f.block = d.block
        where g.board_id = ${boardId} and f.counts is not d.counts
      union all select ${named}, 'block ' || f.block, null, f.counts
        from temp.fresh_group_totals g join temp.fresh_day_counts f on f.group_id = g.id
        left join main.day_counts d on d.group_id = f.group_id and d.block = f.block where d.group_id is null`,
    limit
  )

const life = (row: 'd' | 'f') =>
  sql.raw(`'grain ' || ${row}.grain || ', entered ' || ${row}.entry || ', ran until ' || ${row}.lower ||
    case when ${row}.upper < 0 then '' else ', failed by ' || ${row}.upper || ' (' || ${row}.cause || ')' end`)
const sameLife =
  sql.raw(`f.group_id = d.group_id and f.grain = d.grain and f.entry = d.entry and f.lower = d.lower and f.upper = d.upper
  and f.cause = d.cause`)

export const listDifferingLives = (tx: Tx, boardId: string, limit: number) =>
  differing(
    tx,
    sql`select ${named}, ${life('d')} as place, d.count as stored, f.count as counted
        from main.group_totals g join main.life_counts d on d.group_id = g.id
        left join temp.fresh_life_counts f on ${sameLife}
        where g.board_id = ${boardId} and f.count is not d.count
      union all select ${named}, ${life('f')}, null, f.count
        from temp.fresh_group_totals g join temp.fresh_life_counts f on f.group_id = g.id
        left join main.life_counts d on ${sameLife} where d.group_id is null`,
    limit
  )

/** Whether the database is new enough to have counts. */
export async function hasCounts(tx: Tx): Promise<boolean> {
  const { rows } = await sql`select 1 from sqlite_schema where type = 'table' and name = 'counted_boards'`.execute(tx)
  return rows.length > 0
}
