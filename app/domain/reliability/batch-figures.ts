import { causes } from '../reports/report-words'
import { countsAgainstBoard } from '../reports/observations'
import { batchWatchOfCounts } from '../survival/batch-watch'
import { kaplanMeier } from '../survival/kaplan-meier'
import { nelsonAalen } from '../survival/nelson-aalen'
import { failuresIn } from '../survival/tally'
import { columnsOfCounts, sumOfColumns, tallyOfCounts, withoutPart, type CountColumns } from './counts-tally'
import type { BatchFigures } from './figures.types'
import type { GroupCounts } from './group-counts'
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
  const columns = columnsOfCounts(batches.map(({ counts }) => counts.days))
  const together = new Map<string, CountColumns>()
  for (const { releaseId } of batches)
    if (!together.has(releaseId))
      together.set(releaseId, sumOfColumns(columns.filter((_, i) => batches[i]!.releaseId === releaseId)))
  const units = new Map<string, number>()
  for (const { releaseId, counts } of batches) units.set(releaseId, (units.get(releaseId) ?? 0) + counts.totals.inCurve)
  const rows = [...batches.entries()]
    .filter(([, batch]) => isShown(batch))
    .map(([i, batch]) => {
      const others = withoutPart(together.get(batch.releaseId)!, columns[i]!)
      const hazard = nelsonAalen(kaplanMeier(tallyOfCounts(others, boardCauses)))
      const tally = tallyOfCounts(columns[i]!, boardCauses)
      const watch = batchWatchOfCounts(tally, hazard)
      return {
        batch: batchName(batch),
        version: batch.version,
        code: batch.code,
        madeOn: batch.madeOn,
        quantity: batch.quantity,
        n: batch.counts.totals.inCurve,
        others: units.get(batch.releaseId)! - batch.counts.totals.inCurve,
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
