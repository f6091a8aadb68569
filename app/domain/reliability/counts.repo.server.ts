import { sql } from 'kysely'
import type { DbOrTx, Tx } from '~db/client.server'
import { countingRules, type Slice } from './count-slices'

/** How `life_counts` has it that there is no upper end. */
export const noUpper = -1

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
  tx
    .selectFrom('counted_boards')
    .where('board_id', '=', boardId)
    .select(['rules', 'last_filed_on', 'uncounted'])
    .executeTakeFirst()

/** Whether a board's counts are of the present rules, with nothing written past them. */
export const isCounted = (board: { rules: number; uncounted: string | null } | undefined): boolean =>
  board !== undefined && board.rules === countingRules && board.uncounted === null

/** Every board, with what is known of its counts; `rules` is null where it was never counted. */
export const listBoards = (db: DbOrTx) =>
  db
    .selectFrom('boards as b')
    .leftJoin('counted_boards as c', 'c.board_id', 'b.id')
    .orderBy('b.slug')
    .select(['b.id', 'b.slug', 'c.rules', 'c.last_filed_on', 'c.uncounted'])
    .execute()
