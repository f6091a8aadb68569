import type { Day } from '~/lib/dates'
import type { Tx } from '~db/client.server'
import type { Cause } from '../reports/report-words'
import { slicesFor } from './count-slices'
import * as repo from './counts.repo.server'
import { blockDays, counterOf, dayInBlock, readBlock } from './day-block'
import { addLife, noCounts, totalKeys, type Counter, type GroupCounts, type GroupTotals, type LifeCounts } from './group-counts'
import type { ReliabilityFilters } from './reliability-filters'

/** Counts by scope (release or batch) and console revision. Groups without any are absent. */
export type CountCells<T = GroupCounts> = Map<string, Map<string, T>>

/** What is asked of the stored counts. `filters` choose the slice only: evidence, method, first power. */
export type CountsAsked = {
  /** Releases, or batches: a unit with a tag is counted in both. */
  scopeIds: readonly string[]
  /** Null for all. */
  revisionId: string | null
  filters: ReliabilityFilters
}

/**
 * Whether the stored counts are what was known at the end of a day: counted by the present rules, and nothing filed, excluded or changed since.
 * A board that was never counted is not.
 */
export async function areCountsCurrent(tx: Tx, boardId: string, asOf: Day): Promise<boolean> {
  const counted = await repo.findCountedBoard(tx, boardId)
  return repo.isCounted(counted) && (counted!.last_filed_on ?? '') <= asOf
}

/**
 * The stored counts of releases or batches under filters, without joint observations (`lives` is null; see `readLives`): two queries, whatever
 * the number of units. What they give is known to be true only where `areCountsCurrent`, in the same transaction.
 * @throws Error when the filters ask for units fitted since a day, which are not counted apart
 */
export async function readCounts(tx: Tx, asked: CountsAsked): Promise<CountCells> {
  const { cells, byGroup } = await cellsOf(tx, asked, (): GroupCounts => ({ ...noCounts(), lives: null }))
  for (const { group, cell } of byGroup.values()) addTotals(cell.totals, group.totals_json)
  for (const { group_id, block, counts } of await repo.listBlocks(tx, [...byGroup.keys()])) {
    const { days } = byGroup.get(group_id)!.cell
    // Slots come counter by counter: its days are looked up once.
    let counter: Counter | null = null
    let byDay = new Map<number, number>()
    readBlock(counts, (slot, count) => {
      if (counterOf(slot) !== counter) {
        counter = counterOf(slot)
        byDay = days.get(counter) ?? new Map()
        days.set(counter, byDay)
      }
      const day = block * blockDays + dayInBlock(slot)
      byDay.set(day, (byDay.get(day) ?? 0) + count)
    })
  }
  return cells
}

/**
 * The joint observations of releases or batches under filters, to the day or on the grid of 14 days (`coarseLife`). As many rows as there are
 * different ones.
 */
export async function readLives(tx: Tx, asked: CountsAsked, grain: 1 | 14): Promise<CountCells<LifeCounts>> {
  const { cells, byGroup } = await cellsOf(tx, asked, (): LifeCounts => new Map())
  for (const { group_id, entry, lower, upper, cause, count } of await repo.listLifeCounts(tx, [...byGroup.keys()], grain))
    addLife(byGroup.get(group_id)!.cell, {
      entry,
      lower,
      upper: upper === repo.noUpper ? null : upper,
      cause: cause === '' ? null : (cause as Cause),
      count
    })
  return cells
}

async function cellsOf<T>(tx: Tx, { scopeIds, revisionId, filters }: CountsAsked, none: () => T) {
  const cells: CountCells<T> = new Map()
  const groups = await repo.listGroups(tx, { scopeIds, revisionId, slices: slicesFor(filters) })
  const byGroup = new Map<number, { group: (typeof groups)[number]; cell: T }>()
  for (const group of groups) {
    let byRevision = cells.get(group.scope_id)
    if (byRevision === undefined) cells.set(group.scope_id, (byRevision = new Map()))
    let cell = byRevision.get(group.console_revision_id)
    if (cell === undefined) byRevision.set(group.console_revision_id, (cell = none()))
    byGroup.set(group.id, { group, cell })
  }
  return { cells, byGroup }
}

function addTotals(totals: GroupTotals, json: string): void {
  const stored = JSON.parse(json) as Partial<GroupTotals>
  for (const key of totalKeys) totals[key] += stored[key] ?? 0
}
