import { lastAtOrBefore } from './columns'
import { garwood, type RatioLimits } from './garwood'
import type { CumulativeHazard } from './nelson-aalen'
import type { Tally } from './tally'

/** One unit of the batch; `isFailed` when its board failed at `time`. */
export type BatchUnit = { entry?: number; time: number; isFailed: boolean; weight?: number }

export type BatchWatch = RatioLimits & {
  /** The batch has more board failures than its release's others: the lower limit of the ratio is above 1. */
  isFlagged: boolean
  /** Up to this time the other batches were followed; nothing later is compared. */
  comparedTo: number
  /** Failures of the batch after that time, left out. */
  laterFailures: number
}

/**
 * Board failures of a batch over the number expected from the release's other batches: the other batches' Nelson-Aalen hazard H summed over this
 * batch's units, H(time) - H(entry), with Garwood's limits. Both are counted only as far as the other batches were followed, since there is
 * no hazard to expect from afterwards.
 *
 * Null when nothing can be expected: no other batch, or none of theirs has failed by then.
 *
 * Source: N. E. Breslow and N. E. Day, Statistical Methods in Cancer Research II (IARC 1987), section 2.2 (observed over expected).
 *
 * @param others hazard of the release's other batches, failures by the board only
 */
export function batchWatch(batch: readonly BatchUnit[], others: CumulativeHazard, confidence = 0.95): BatchWatch | null {
  const comparedTo = others.time.at(-1)
  if (comparedTo === undefined) return null
  const hazard = (t: number) => others.cumulative[lastAtOrBefore(others.time, t)] ?? 0
  let observed = 0
  let expected = 0
  let laterFailures = 0
  for (const { entry = 0, time, isFailed, weight = 1 } of batch) {
    // A unit watched from its origin is at risk on day 0 too.
    expected += weight * (hazard(time) - (entry > 0 ? hazard(entry) : 0))
    if (!isFailed) continue
    if (time <= comparedTo) observed += weight
    else laterFailures += weight
  }
  return watchOf({ observed, expected, comparedTo, laterFailures }, confidence)
}

/**
 * `batchWatch` from counts of the batch: the same sum by days instead of units, each step of the others' hazard times the units of the batch at risk
 * then.
 *
 * @param batch counts of the batch's units, failures by the board only
 */
export function batchWatchOfCounts(batch: Tally, others: CumulativeHazard, confidence = 0.95): BatchWatch | null {
  const comparedTo = others.time.at(-1)
  if (comparedTo === undefined) return null
  let expected = 0
  let atRisk = batch.time[0] === 0 ? batch.entered[0]! : 0
  let next = 0
  others.time.forEach((time, i) => {
    for (; next < batch.time.length && batch.time[next]! < time; next++)
      atRisk += (batch.time[next] === 0 ? 0 : batch.entered[next]!) - batch.failed[next]! - batch.censored[next]!
    expected += atRisk * (others.cumulative[i]! - (others.cumulative[i - 1] ?? 0))
  })
  const failedIn = (isIn: (time: number) => boolean) =>
    batch.failed.reduce((sum, failed, j) => sum + (isIn(batch.time[j]!) ? failed : 0), 0)
  const observed = failedIn((time) => time <= comparedTo)
  const laterFailures = failedIn((time) => time > comparedTo)
  return watchOf({ observed, expected, comparedTo, laterFailures }, confidence)
}

type Counted = { observed: number; expected: number; comparedTo: number; laterFailures: number }

function watchOf({ observed, expected, comparedTo, laterFailures }: Counted, confidence: number): BatchWatch | null {
  const ratio = garwood(observed, expected, confidence)
  return ratio && { ...ratio, isFlagged: ratio.lower > 1, comparedTo, laterFailures }
}
