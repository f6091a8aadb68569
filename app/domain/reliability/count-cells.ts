import { observationOf, type LifeHistory } from '../reports/observations'
import type { BatchCounts } from './batch-figures'
import { coarseLife, countOutcome } from './count-life'
import { addLife, noCounts, type LifeCounts } from './group-counts'
import type { Cell } from './reliability-figures'
import { observationFilters, type ReliabilityFilters } from './reliability-filters'
import { countSilent, noSilent } from './silent-figures'

/** Takes life histories one by one, of the releases and console revisions counted, whatever their batch; `cells` is what they came to. */
export type CellCounter = { add: (life: LifeHistory) => void; cells: () => Cell[] }

/**
 * Counts life histories into cells of one release on one console revision, and into those of their batches.
 *
 * @param batchId only this batch's units go into the cells; null for all
 * @param batches whose units are counted, in place
 */
export function cellCounter(filters: ReliabilityFilters, batchId: string | null, batches: readonly BatchCounts[]): CellCounter {
  const kept = observationFilters(filters)
  const cells = new Map<string, Cell>()
  const byId = new Map(batches.map((batch) => [batch.id, batch]))
  const add = (life: LifeHistory) => {
    const outcome = observationOf(life, filters.asOf, kept)
    const batch = life.batchId === null ? undefined : byId.get(life.batchId)
    if (batch) countOutcome(batch.counts, life, outcome, 1)
    if (batchId !== null && life.batchId !== batchId) return
    const { releaseId, revisionId } = life
    const key = `${releaseId} ${revisionId}`
    let cell = cells.get(key)
    if (cell === undefined)
      cells.set(
        key,
        (cell = { releaseId, revisionId, counts: noCounts(), silent: filters.silent === 'bounds' ? noSilent() : null })
      )
    countOutcome(cell.counts, life, outcome, 1)
    if (cell.silent !== null) countSilent(cell.silent, life, outcome, filters.asOf)
  }
  return { add, cells: () => [...cells.values()] }
}

/** The cells of life histories at hand; see `cellCounter`. */
export function countCells(lives: Iterable<LifeHistory>, ...rest: Parameters<typeof cellCounter>): Cell[] {
  const counter = cellCounter(...rest)
  for (const life of lives) counter.add(life)
  return counter.cells()
}

/** Joint observations on the coarse grid. */
export function coarseLives(lives: LifeCounts): LifeCounts {
  const coarse: LifeCounts = new Map()
  for (const life of lives.values()) {
    const rounded = coarseLife(life)
    if (rounded !== null) addLife(coarse, rounded)
  }
  return coarse
}
