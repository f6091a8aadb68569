import { observationOf, type LifeHistory } from '../reports/observations'
import type { BatchCounts } from './batch-figures'
import { coarseLife, countOutcome } from './count-life'
import { addLife, noCounts, type LifeCounts } from './group-counts'
import type { Cell } from './reliability-figures'
import { observationFilters, type ReliabilityFilters } from './reliability-filters'
import { countSilent, noSilent } from './silent-figures'

/**
 * Counts life histories into cells of one release on one console revision, and into those of their batches.
 *
 * @param lives of the releases and console revisions counted, whatever their batch
 * @param batchId only this batch's units go into the cells; null for all
 * @param batches whose units are counted, in place
 */
export function countCells(
  lives: Iterable<LifeHistory>,
  filters: ReliabilityFilters,
  batchId: string | null,
  batches: readonly BatchCounts[]
): Cell[] {
  const kept = observationFilters(filters)
  const cells = new Map<string, Cell>()
  const byId = new Map(batches.map((batch) => [batch.id, batch]))
  for (const life of lives) {
    const outcome = observationOf(life, filters.asOf, kept)
    const batch = life.batchId === null ? undefined : byId.get(life.batchId)
    if (batch) countOutcome(batch.counts, life, outcome, 1)
    if (batchId !== null && life.batchId !== batchId) continue
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
  return [...cells.values()]
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
