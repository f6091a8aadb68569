import { confidenceLimits, defaultLimits, type LimitOptions, type Limits } from './confidence-limits'
import { lastAtOrBefore } from './columns'
import type { SurvivalCurve } from './kaplan-meier'
import { timeTolerance } from './observation'
import { atRiskAt } from './tally'

export type SurvivalAt = Limits & { time: number; survival: number | null; standardError: number | null; atRisk: number }

/**
 * S, its limits and the number at risk at a given time, also between rows. Beyond the last row S is unknown (null) unless it has
 * reached 0. The number at risk counts units with entry < t <= exit.
 */
export function survivalAt(curve: SurvivalCurve, time: number, options: LimitOptions = defaultLimits): SurvivalAt {
  const last = curve.time.length - 1
  const row = lastAtOrBefore(curve.time, time + timeTolerance)
  const survival = row < 0 ? 1 : curve.survival[row]!
  const greenwood = row < 0 ? 0 : curve.greenwood[row]!
  const isPastEnd = last < 0 || (row === last && time > curve.time[last]! + timeTolerance)
  if (isPastEnd && survival > 0)
    return { time, survival: null, standardError: null, atRisk: 0, lower: null, upper: null, bound: null }
  const isAtRow = row >= 0 && Math.abs(curve.time[row]! - time) <= timeTolerance
  const atRisk = isAtRow ? curve.atRisk[row]! : atRiskAt(curve.tally, time)
  const standardError = survival > 0 ? survival * Math.sqrt(greenwood) : null
  return { time, survival, standardError, atRisk, ...confidenceLimits({ survival, greenwood, atRisk }, options) }
}
