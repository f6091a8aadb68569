import { sql } from 'kysely'
import type { Day } from '~/lib/dates'
import type { Tx } from '~db/client.server'
import { countingRules } from './count-slices'
import { noUpper } from './counts.repo.server'
import type { GroupDelta } from './counts-delta'
import type { LifeCount } from './group-counts'

/** Where counts are written: the stored ones, or those of the same layout that a recount sets beside them to compare. */
export type CountTables = { groups: string; days: string; lives: string }
export const storedTables: CountTables = { groups: 'main.group_totals', days: 'main.day_counts', lives: 'main.life_counts' }

export type GroupKey = Pick<GroupDelta, 'scopeId' | 'revisionId' | 'slice'>

export async function findGroup(tx: Tx, { groups }: CountTables, { scopeId, revisionId, slice }: GroupKey) {
  const { rows } = await sql<{ id: number; totals_json: string }>`select id, totals_json from ${sql.table(groups)}
    where scope_id = ${scopeId} and evidence = ${slice.evidence} and method = ${slice.method}
      and first_power = ${slice.firstPower} and console_revision_id = ${revisionId}`.execute(tx)
  return rows[0]
}

/** Makes a group; beside stored ones it gets the number of the stored group of the same key, so that they can be compared. */
export async function insertGroup(tx: Tx, { groups }: CountTables, boardId: string, key: GroupKey, totalsJson: string) {
  const stored = sql.table(storedTables.groups)
  const { scopeId, revisionId, slice } = key
  const id =
    groups === storedTables.groups
      ? sql`null`
      : sql`coalesce((select id from ${stored} where scope_id = ${scopeId} and evidence = ${slice.evidence}
          and method = ${slice.method} and first_power = ${slice.firstPower} and console_revision_id = ${revisionId}),
        1 + max(coalesce((select max(id) from ${sql.table(groups)}), 0), coalesce((select max(id) from ${stored}), 0)))`
  const { rows } = await sql<{ id: number }>`insert into ${sql.table(groups)}
    (id, board_id, scope_id, evidence, method, first_power, console_revision_id, totals_json)
    values (${id}, ${boardId}, ${scopeId}, ${slice.evidence}, ${slice.method}, ${slice.firstPower}, ${revisionId}, ${totalsJson})
    returning id`.execute(tx)
  return rows[0]!.id
}

export const updateTotals = (tx: Tx, { groups }: CountTables, id: number, totalsJson: string) =>
  sql`update ${sql.table(groups)} set totals_json = ${totalsJson} where id = ${id}`.execute(tx)

export const deleteGroup = (tx: Tx, { groups }: CountTables, id: number) =>
  sql`delete from ${sql.table(groups)} where id = ${id}`.execute(tx)

export async function findBlock(tx: Tx, { days }: CountTables, groupId: number, block: number) {
  const { rows } = await sql<{ counts: Uint8Array }>`select counts from ${sql.table(days)}
    where group_id = ${groupId} and block = ${block}`.execute(tx)
  return rows[0]?.counts
}

export const putBlock = (tx: Tx, { days }: CountTables, groupId: number, block: number, counts: Uint8Array) =>
  sql`insert into ${sql.table(days)} (group_id, block, counts) values (${groupId}, ${block}, ${counts})
    on conflict (group_id, block) do update set counts = excluded.counts`.execute(tx)

export const deleteBlock = (tx: Tx, { days }: CountTables, groupId: number, block: number) =>
  sql`delete from ${sql.table(days)} where group_id = ${groupId} and block = ${block}`.execute(tx)

/** Adds any number of joint observations, with counts above 0, to those of a group. */
export const addLives = (tx: Tx, { lives }: CountTables, groupId: number, grain: 1 | 14, more: LifeCount[]) => {
  const rows = JSON.stringify(more.map((l) => [l.entry, l.lower, l.upper ?? noUpper, l.cause ?? '', l.count]))
  return sql`insert into ${sql.table(lives)} (group_id, grain, entry, lower, upper, cause, count)
    select ${groupId}, ${grain}, value ->> 0, value ->> 1, value ->> 2, value ->> 3, value ->> 4 from json_each(${rows}) where true
    on conflict (group_id, grain, entry, lower, upper, cause) do update set count = count + excluded.count`.execute(tx)
}

const lifeKeyed = (groupId: number, grain: 1 | 14, { entry, lower, upper, cause }: LifeCount) =>
  sql`group_id = ${groupId} and grain = ${grain} and entry = ${entry} and lower = ${lower} and upper = ${upper ?? noUpper}
    and cause = ${cause ?? ''}`

/** How many units there are with a joint observation. */
export async function countLives(tx: Tx, { lives }: CountTables, groupId: number, grain: 1 | 14, life: LifeCount) {
  const { rows } = await sql<{ count: number }>`select count from ${sql.table(lives)}
    where ${lifeKeyed(groupId, grain, life)}`.execute(tx)
  return rows[0]?.count ?? 0
}

export const setLives = (tx: Tx, { lives }: CountTables, groupId: number, grain: 1 | 14, life: LifeCount, count: number) =>
  sql`update ${sql.table(lives)} set count = ${count} where ${lifeKeyed(groupId, grain, life)}`.execute(tx)

export const deleteLives = (tx: Tx, { lives }: CountTables, groupId: number, grain: 1 | 14, life: LifeCount) =>
  sql`delete from ${sql.table(lives)} where ${lifeKeyed(groupId, grain, life)}`.execute(tx)

/** Says that a board is counted by the present rules, with nothing uncounted. */
export const markCounted = (tx: Tx, boardId: string, lastFiledOn: Day | null) =>
  tx
    .insertInto('counted_boards')
    .values({ board_id: boardId, rules: countingRules, last_filed_on: lastFiledOn, uncounted: null })
    .onConflict((conflict) =>
      conflict.column('board_id').doUpdateSet({ rules: countingRules, last_filed_on: lastFiledOn, uncounted: null })
    )
    .execute()

/** Keeps a board's counts from being read until they are rebuilt. One that was never counted is not read anyway. */
export const markUncounted = (tx: Tx, boardId: string) =>
  tx.updateTable('counted_boards').set({ uncounted: '*' }).where('board_id', '=', boardId).execute()

/** Whether a board has more than so many reports. Reads no more of them. */
export async function hasMoreReports(tx: Tx, boardId: string, limit: number): Promise<boolean> {
  const rows = await tx
    .selectFrom('install_reports as r')
    .innerJoin('releases as v', 'v.id', 'r.release_id')
    .where('v.board_id', '=', boardId)
    .select('r.id')
    .limit(limit + 1)
    .execute()
  return rows.length > limit
}

export const findBoardOfRelease = (tx: Tx, releaseId: string) =>
  tx.selectFrom('releases').where('id', '=', releaseId).select('board_id').executeTakeFirstOrThrow()

export const listReleaseIds = (tx: Tx, boardId: string) =>
  tx.selectFrom('releases').where('board_id', '=', boardId).orderBy('id').select('id').execute()

/** Deletes everything that is stored of a board's counts. */
export async function deleteCounts(tx: Tx, boardId: string): Promise<void> {
  const groups = tx.selectFrom('group_totals').where('board_id', '=', boardId).select('id')
  await tx.deleteFrom('day_counts').where('group_id', 'in', groups).execute()
  await tx.deleteFrom('life_counts').where('group_id', 'in', groups).execute()
  await tx.deleteFrom('group_totals').where('board_id', '=', boardId).execute()
}
