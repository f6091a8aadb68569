import { failuresIn, unitsIn, type Tally } from './tally'

/**
 * A Kaplan-Meier curve as columns, one row for each distinct time with a failure or a censoring, ascending.
 * `survival` is S just after the row's time; `greenwood` is sum d/(n(n - d)), the variance of ln S, Infinity once S is 0.
 */
export type SurvivalCurve = {
  time: Float64Array
  atRisk: Float64Array
  events: Float64Array
  censored: Float64Array
  survival: Float64Array
  greenwood: Float64Array
  /** Units and failures in all. */
  units: number
  failures: number
  /** The counts it was computed from. */
  tally: Tally
}

/**
 * The product-limit estimator S(t) = prod over failure times t_j <= t of (n_j - d_j)/n_j with delayed entry, right-continuous.
 * At one time failures come before censorings, and those before entries; failures at time 0 are allowed; once 0, S stays 0.
 * Linear in the grid of the tally; no I/O, no error cases (an empty tally gives no rows).
 *
 * Source: E. L. Kaplan and P. Meier, JASA 53:457-481 (1958); variance: M. Greenwood (1926).
 */
export function kaplanMeier(tally: Tally): SurvivalCurve {
  const size = tally.time.length
  const time = new Float64Array(size)
  const atRisk = new Float64Array(size)
  const events = new Float64Array(size)
  const censored = new Float64Array(size)
  const survival = new Float64Array(size)
  const greenwood = new Float64Array(size)
  let n = 0
  let s = 1
  let sum = 0
  let rows = 0
  for (let j = 0; j < size; j++) {
    const entered = tally.entered[j]!
    const isOrigin = tally.time[j] === 0
    if (isOrigin) n += entered
    const d = tally.failed[j]!
    const c = tally.censored[j]!
    if (d + c > 0) {
      if (d > 0) {
        s *= (n - d) / n
        sum += d / (n * (n - d))
      }
      time[rows] = tally.time[j]!
      atRisk[rows] = n
      events[rows] = d
      censored[rows] = c
      survival[rows] = s
      greenwood[rows] = sum
      rows++
      n -= d + c
    }
    if (!isOrigin) n += entered
  }
  return {
    time: time.subarray(0, rows),
    atRisk: atRisk.subarray(0, rows),
    events: events.subarray(0, rows),
    censored: censored.subarray(0, rows),
    survival: survival.subarray(0, rows),
    greenwood: greenwood.subarray(0, rows),
    units: unitsIn(tally),
    failures: failuresIn(tally),
    tally
  }
}
