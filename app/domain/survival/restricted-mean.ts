import { zOf } from './confidence-limits'
import type { SurvivalCurve } from './kaplan-meier'
import { normalUpperTail } from './special/normal'

/** Mean time without failure up to `tau`; what the follow-up does not tell is null. */
export type RestrictedMean = {
  tau: number
  estimate: number | null
  standardError: number | null
  lower: number | null
  upper: number | null
}

/**
 * Area under S from 0 to tau, with variance sum over failure times t_j <= tau of (area from t_j to tau)^2 d_j/(n_j(n_j - d_j)), where the term of a
 * time at which all at risk fail is 0, and normal limits.
 * Null where tau lies past the last observed time while S is above 0: the rest of the area is unknown.
 *
 * Source: P. Royston and M. K. B. Parmar, BMC Medical Research Methodology 13:152 (2013).
 *
 * @throws RangeError unless tau > 0 and finite
 */
export function restrictedMean(curve: SurvivalCurve, tau: number, confidence = 0.95): RestrictedMean {
  if (!(tau > 0 && Number.isFinite(tau))) throw new RangeError(`restrictedMean: tau must be above 0 (${tau})`)
  const last = curve.time.length - 1
  if (last < 0 || (tau > curve.time[last]! && curve.survival[last]! > 0))
    return { tau, estimate: null, standardError: null, lower: null, upper: null }
  let area = 0
  let variance = 0
  let end = tau
  for (let i = last; i >= 0; i--) {
    const t = curve.time[i]!
    if (t > tau) continue
    area += curve.survival[i]! * (end - t)
    end = t
    const n = curve.atRisk[i]!
    const d = curve.events[i]!
    if (d > 0 && n > d) variance += (area * area * d) / (n * (n - d))
  }
  const estimate = area + end
  const standardError = Math.sqrt(variance)
  const z = zOf(confidence)
  return { tau, estimate, standardError, lower: estimate - z * standardError, upper: estimate + z * standardError }
}

export type MeanDifference = {
  estimate: number
  standardError: number
  lower: number
  upper: number
  z: number | null
  p: number | null
}

/** Second restricted mean minus the first, of independent groups at the same tau, with normal limits and test. Null when either is unknown. */
export function restrictedMeanDifference(
  first: RestrictedMean,
  second: RestrictedMean,
  confidence = 0.95
): MeanDifference | null {
  if (first.tau !== second.tau) throw new RangeError(`restrictedMeanDifference: different tau (${first.tau} and ${second.tau})`)
  if (first.estimate === null || second.estimate === null) return null
  const estimate = second.estimate - first.estimate
  const standardError = Math.hypot(first.standardError!, second.standardError!)
  const width = zOf(confidence) * standardError
  const z = standardError > 0 ? estimate / standardError : null
  return {
    estimate,
    standardError,
    lower: estimate - width,
    upper: estimate + width,
    z,
    p: z === null ? null : 2 * normalUpperTail(Math.abs(z))
  }
}
