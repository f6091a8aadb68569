import type { SurvivalCurve } from './kaplan-meier'
import { normalQuantile } from './special/normal'

export type IntervalKind = 'log-log' | 'log' | 'plain'
export type LimitOptions = { confidence: number; interval: IntervalKind }
export type Bound = 'exact-one-sided'
export type Limits = { lower: number | null; upper: number | null; bound: Bound | null }

export const defaultLimits: LimitOptions = { confidence: 0.95, interval: 'log-log' }

/** Limits of every row of a curve; NaN where none exists. `exact[i]` is 1 where `lower[i]` is the exact one-sided bound. */
export type CurveLimits = LimitOptions & { lower: Float64Array; upper: Float64Array; exact: Uint8Array }

/**
 * Pointwise confidence limits of a survival probability S whose ln has the variance `greenwood`:
 * `plain` S -/+ z se, `log` exp(ln S -/+ z se_ln), `log-log` exp(-exp(ln(-ln S) +/- z se_ln / ln S)), all within [0, 1].
 *
 * While S is 1 these formulas claim certainty or nothing; the lower limit is then the exact one-sided bound alpha^(1/n) of n units
 * followed without a failure (Clopper and Pearson, Biometrika 26:404, 1934), the upper 1, marked `exact-one-sided`. Where S is 0, and
 * where nobody is at risk while S is 1, there are no limits.
 *
 * Source: J. P. Klein and M. L. Moeschberger, Survival Analysis (Springer 1997), section 4.3.
 *
 * @throws RangeError when the confidence does not lie strictly between 0 and 1
 */
export function confidenceLimits(
  at: { survival: number; greenwood: number; atRisk: number },
  options: LimitOptions = defaultLimits
): Limits {
  return limitsWith(at.survival, at.greenwood, at.atRisk, zOf(options.confidence), options)
}

/** `confidenceLimits` of every row. */
export function curveLimits(curve: SurvivalCurve, options: LimitOptions = defaultLimits): CurveLimits {
  const size = curve.time.length
  const z = zOf(options.confidence)
  const lower = new Float64Array(size).fill(NaN)
  const upper = new Float64Array(size).fill(NaN)
  const exact = new Uint8Array(size)
  for (let i = 0; i < size; i++) {
    // S and its variance stand still between failures; only the exact bound moves with the number at risk.
    if (i > 0 && curve.events[i] === 0 && curve.survival[i] !== 1) {
      lower[i] = lower[i - 1]!
      upper[i] = upper[i - 1]!
      continue
    }
    const s = curve.survival[i]!
    if (s > 0 && s < 1) {
      const limits = limitsOfProbability(s, Math.sqrt(curve.greenwood[i]!), z, options.interval)
      lower[i] = limits.lower
      upper[i] = limits.upper
      continue
    }
    const limits = limitsWith(s, curve.greenwood[i]!, curve.atRisk[i]!, z, options)
    if (limits.lower !== null) lower[i] = limits.lower
    if (limits.upper !== null) upper[i] = limits.upper
    if (limits.bound !== null) exact[i] = 1
  }
  return { ...options, lower, upper, exact }
}

/** Two-sided standard normal quantile of a confidence. */
export function zOf(confidence: number): number {
  if (!(confidence > 0 && confidence < 1)) throw new RangeError(`the confidence must lie between 0 and 1 (${confidence})`)
  if (confidence !== last.confidence) last = { confidence, z: normalQuantile((1 + confidence) / 2) }
  return last.z
}
// Limits are asked for row by row, thousands of times at one confidence.
let last = { confidence: NaN, z: NaN }

function limitsWith(s: number, greenwood: number, atRisk: number, z: number, { confidence, interval }: LimitOptions): Limits {
  if (!(s > 0)) return { lower: null, upper: null, bound: null }
  if (s === 1) {
    if (atRisk <= 0) return { lower: null, upper: null, bound: null }
    return { lower: Math.pow(1 - confidence, 1 / atRisk), upper: 1, bound: 'exact-one-sided' }
  }
  return { ...limitsOfProbability(s, Math.sqrt(greenwood), z, interval), bound: null }
}

/** Transformed normal limits of a probability strictly between 0 and 1 from the standard error of its logarithm. */
export function limitsOfProbability(p: number, se: number, z: number, interval: IntervalKind): { lower: number; upper: number } {
  if (interval === 'plain') return { lower: Math.max(0, p - z * p * se), upper: Math.min(1, p + z * p * se) }
  const ln = Math.log(p)
  if (interval === 'log') return { lower: Math.exp(ln - z * se), upper: Math.min(1, Math.exp(ln + z * se)) }
  const width = (z * se) / ln
  return { lower: Math.exp(ln * Math.exp(-width)), upper: Math.exp(ln * Math.exp(width)) }
}
