import type { CurveLimits } from './confidence-limits'
import type { SurvivalCurve } from './kaplan-meier'
import { timeTolerance } from './observation'

export type Quantile = { estimate: number | null; lower: number | null; upper: number | null }

/**
 * The time by which a fraction p has failed, by the first-crossing rule: the smallest t with S(t) <= 1 - p; where S equals 1 - p
 * (within 1.5e-8) on a stretch that ends in a fall, the middle of that stretch. Limits are read off the limits of S in the same way.
 * Null where it is not reached. Exact one-sided bounds (S still 1) are no part of the limits' curves.
 *
 * Source: R. Brookmeyer and J. Crowley, Biometrics 38:29-41 (1982).
 *
 * @param p 0 < p < 1; 0.5 is the median, 0.1 the B10 life
 * @throws RangeError for another p
 */
export function quantile(curve: SurvivalCurve, limits: CurveLimits, p: number): Quantile {
  if (!(p > 0 && p < 1)) throw new RangeError(`quantile: p must lie between 0 and 1 (${p})`)
  return {
    estimate: firstCrossing(curve.time, curve.survival, 1 - p, null),
    lower: firstCrossing(curve.time, limits.lower, 1 - p, limits.exact),
    upper: firstCrossing(curve.time, limits.upper, 1 - p, limits.exact)
  }
}

/** First time a step curve is at or below `level`; NaN and skipped rows are no part of the curve. Null when it never is. */
export function firstCrossing(
  time: Float64Array,
  value: Float64Array,
  level: number,
  skip: Uint8Array | null = null
): number | null {
  for (let i = 0; i < time.length; i++) {
    if (skip?.[i] === 1 || !(value[i]! <= level + timeTolerance)) continue
    if (value[i]! < level - timeTolerance) return time[i]!
    for (let j = i + 1; j < time.length; j++) if (value[j]! < level - timeTolerance) return (time[i]! + time[j]!) / 2
    return time[i]!
  }
  return null
}
