import { limitsOfProbability, zOf, type Bound, type LimitOptions } from './confidence-limits'
import type { Tally } from './tally'

/**
 * Cumulative incidences as columns, one row for each distinct time with a failure or a censoring. `incidence[k]` is the probability of having
 * failed by `causes[k]` by then, `standardError[k]` its standard error; `eventFree` is the probability of no failure at all. They add up to 1.
 */
export type CumulativeIncidence = {
  causes: string[]
  time: Float64Array
  atRisk: Float64Array
  eventFree: Float64Array
  incidence: Float64Array[]
  standardError: Float64Array[]
}

/**
 * The Aalen-Johansen estimator for competing causes: the incidence of cause k grows by S(t-) d_k/n at each failure time, with S the Kaplan-Meier
 * curve of failures by any cause. Delayed entry as there.
 *
 * Variance by the delta method, carried forward from one failure time to the next with multinomial failures; it equals the Greenwood-type formula and
 * the infinitesimal jackknife. What is carried is the triangular root of the covariance of S and F_k (as in G. J. Bierman, Factorization Methods for
 * Discrete Sequential Estimation, 1977), all sums of squares, so that a variance of 0 comes out as 0 and not as rounding.
 *
 * Source: O. O. Aalen and S. Johansen, Scandinavian Journal of Statistics 5:141-150 (1978); E. Marubini and M. G. Valsecchi, Analysing Survival
 * Data from Clinical Trials and Observational Studies (Wiley 1995), chapter 10.
 *
 * @throws RangeError when the tally names no causes
 */
export function aalenJohansen(tally: Tally): CumulativeIncidence {
  const k = tally.causes.length
  if (k === 0) throw new RangeError('aalenJohansen: failures have no causes')
  const rows = tally.time.reduce((count, _, j) => count + (tally.failed[j]! + tally.censored[j]! > 0 ? 1 : 0), 0)
  const column = () => new Float64Array(rows)
  const result = {
    causes: tally.causes,
    time: column(),
    atRisk: column(),
    eventFree: column(),
    incidence: tally.causes.map(column),
    standardError: tally.causes.map(column)
  }
  const f = new Float64Array(k)
  // S has the error rootS, F_k the part slope_k in common with S and the part rest_k of its own.
  const slope = new Float64Array(k)
  const rest = new Float64Array(k)
  let s = 1
  let rootS = 0
  let n = 0
  let row = 0
  for (let j = 0; j < tally.time.length; j++) {
    const isOrigin = tally.time[j] === 0
    if (isOrigin) n += tally.entered[j]!
    const d = tally.failed[j]!
    const leaving = d + tally.censored[j]!
    if (leaving > 0) {
      if (d > 0) {
        const left = (n - d) / n
        const carried = left * rootS
        const fresh = (s * Math.sqrt(d * left)) / n
        const next = norm(carried, fresh)
        for (let c = 0; c < k; c++) {
          const by = tally.failedBy[c]![j]!
          const h = by / n
          const before = h * rootS + slope[c]!
          const shared = -s * h * Math.sqrt(left / d)
          const own = (s * Math.sqrt((by * (d - by)) / d)) / n
          slope[c] = next > 0 ? (carried * before + fresh * shared) / next : 0
          const across = next > 0 ? (carried * shared - fresh * before) / next : norm(before, shared)
          rest[c] = norm(norm(rest[c]!, own), across)
          f[c]! += s * h
        }
        rootS = next
        s *= left
      }
      result.time[row] = tally.time[j]!
      result.atRisk[row] = n
      result.eventFree[row] = s
      for (let c = 0; c < k; c++) {
        result.incidence[c]![row] = f[c]!
        result.standardError[c]![row] = norm(slope[c]!, rest[c]!)
      }
      row++
      n -= leaving
    }
    if (!isOrigin) n += tally.entered[j]!
  }
  return result
}

const norm = (a: number, b: number) => Math.sqrt(a * a + b * b)

export type IncidenceLimits = { lower: number | null; upper: number | null; bound: Bound | null }

/**
 * Pointwise limits of a cumulative incidence F, by the transformations of `confidenceLimits`. While no failure by that cause was seen, the upper
 * limit is the exact one-sided bound 1 - alpha^(1/n) of the n units at risk; none where nobody is at risk then.
 */
export function incidenceLimits(
  at: { estimate: number; standardError: number; atRisk: number },
  options: LimitOptions
): IncidenceLimits {
  const z = zOf(options.confidence)
  if (at.estimate > 0) {
    if (at.estimate >= 1) return { lower: null, upper: null, bound: null }
    return { ...limitsOfProbability(at.estimate, at.standardError / at.estimate, z, options.interval), bound: null }
  }
  if (at.atRisk <= 0) return { lower: null, upper: null, bound: null }
  return { lower: 0, upper: 1 - Math.pow(1 - options.confidence, 1 / at.atRisk), bound: 'exact-one-sided' }
}
