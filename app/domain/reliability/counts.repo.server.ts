import { sql } from 'kysely'
import type { Tx } from '~db/client.server'
import type { Slice } from './count-slices'

/** Groups of one or more scopes (releases or batches) in one or more slices of the same method and first-power result. */
export type GroupsAsked = { scopeIds: readonly string[]; revisionId: string | null; slices: readonly Slice[] }

/** The groups asked for, each with its totals. Bounded: at most one a scope, slice and console revision. */
export const listGroups = async (tx: Tx, { scopeIds, revisionId, slices }: GroupsAsked) => {
  if (scopeIds.length === 0 || slices.length === 0) return []
  return tx
    .selectFrom('group_totals')
    .where('scope_id', 'in', scopeIds)
    .where(
      'evidence',
      'in',
      slices.map((slice) => slice.evidence)
    )
    .where('method', '=', slices[0]!.method)
    .where('first_power', '=', slices[0]!.firstPower)
    .$if(revisionId !== null, (q) => q.where('console_revision_id', '=', revisionId))
    .select(['id', 'scope_id', 'console_revision_id', 'totals_json'])
    .execute()
}

const idsIn = (ids: readonly number[]) => sql<number>`(select value from json_each(${JSON.stringify(ids)}))`

/** The blocks of day counts of groups. */
export const listBlocks = (tx: Tx, groupIds: readonly number[]) =>
  tx.selectFrom('day_counts').where('group_id', 'in', idsIn(groupIds)).select(['group_id', 'block', 'counts']).execute()

/** The joint observations of groups. */
export const listLifeCounts = (tx: Tx, groupIds: readonly number[], grain: 1 | 14) =>
  tx
    .selectFrom('life_counts')
    .where('group_id', 'in', idsIn(groupIds))
    .where('grain', '=', grain)
    .select(['group_id', 'entry', 'lower', 'upper', 'cause', 'count'])
    .execute()

export const findCountedBoard = (tx: Tx, boardId: string) =>
  tx.selectFrom('counted_boards').where('board_id', '=', boardId).select(['rules', 'last_filed_on']).executeTakeFirst()
