import { causes } from '../reports/report-words'
import { countsAgainstBoard } from '../reports/observations'
import { batchWatchOfCounts } from '../survival/batch-watch'
import { kaplanMeier } from '../survival/kaplan-meier'
import { nelsonAalen } from '../survival/nelson-aalen'
import { failuresIn } from '../survival/tally'
import { tallyOfCounts } from './counts-tally'
import type { BatchFigures } from './figures.types'
import { addDay, type DayCounts, type GroupCounts } from './group-counts'
import { batchName } from './reliability-filters'

/** A batch and the counts of its units. */
export type BatchCounts = {
  id: string
  releaseId: string
  version: string
  code: string
  madeOn: string
  quantity: number
  counts: GroupCounts
}

export const maxBatchRows = 100

const boardCauses = causes.filter(countsAgainstBoard)

/**
 * The batch watch over all batches given: the board failures of each, unknown causes with them, on the day they were found, against the number
 * expected from its release's other batches. Units failing by another cause leave on the last day they are known to have run. Linear in the batches
 * times the days.
 *
 * @param batches all of their releases, in the order in which they are to be shown
 * @param isShown which of them get a row
 * @returns flagged ones first, each in the order given
 */
export function batchFigures(
  batches: readonly BatchCounts[],
  isShown: (batch: BatchCounts) => boolean = () => true
): { rows: BatchFigures[]; total: number } {
  const together = new Map<string, DayCounts>()
  for (const { releaseId, counts } of batches) {
    const days = together.get(releaseId) ?? new Map()
    together.set(releaseId, days)
    addAll(days, counts.days, 1)
  }
  const rows = batches.filter(isShown).map((batch) => {
    const others = together.get(batch.releaseId)!
    addAll(others, batch.counts.days, -1)
    const hazard = nelsonAalen(kaplanMeier(tallyOfCounts(others, boardCauses)))
    addAll(others, batch.counts.days, 1)
    const tally = tallyOfCounts(batch.counts.days, boardCauses)
    const watch = batchWatchOfCounts(tally, hazard)
    return {
      batch: batchName(batch),
      version: batch.version,
      code: batch.code,
      madeOn: batch.madeOn,
      quantity: batch.quantity,
      n: batch.counts.totals.inCurve,
      observed: failuresIn(tally),
      watch: watch && {
        observed: watch.observed,
        expected: watch.expected,
        ratio: watch.ratio,
        lower: watch.lower,
        upper: watch.upper,
        isFlagged: watch.isFlagged,
        comparedTo: watch.comparedTo
      }
    }
  })
  const isFlagged = (row: BatchFigures) => row.watch?.isFlagged === true
  const ordered = [...rows.filter(isFlagged), ...rows.filter((row) => !isFlagged(row))]
  return { rows: ordered.slice(0, maxBatchRows), total: rows.length }
}

function addAll(days: DayCounts, more: DayCounts, sign: 1 | -1): void {
  for (const [counter, byDay] of more) for (const [day, count] of byDay) addDay(days, counter, day, sign * count)
}
