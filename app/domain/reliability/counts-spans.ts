import type { Cause } from '../reports/report-words'
import type { Spans } from '../survival/spans'
import type { Tally } from '../survival/tally'
import type { LifeCounts } from './group-counts'

type Row = [entry: number, lower: number, upper: number, weight: number]

/**
 * Joint observations as intervals of days, for Turnbull's estimate: failures of the counted causes in (lower, upper], those of any other cause
 * censored at `lower`, the last day their unit is known to have run. A unit that leaves on the day it enters tells nothing and is left
 * out. Rows that have become alike are one, in a fixed order, so that a seeded resampling gives the same however the counts were gathered.
 */
export function spansOfLives(parts: readonly LifeCounts[], counted: readonly Cause[]): Spans {
  const rows = new Map<string, Row>()
  for (const lives of parts)
    for (const { entry, lower, upper, cause, count } of lives.values()) {
      const isCounted = cause !== null && counted.includes(cause)
      const end = isCounted ? upper! : Infinity
      if (entry > 0 && lower <= entry && end === Infinity) continue
      const key = `${entry},${lower},${end}`
      const row = rows.get(key)
      if (row === undefined) rows.set(key, [entry, lower, end, count])
      else row[3] += count
    }
  return spansFrom([...rows.values()].sort(([a, b, c], [d, e, f]) => a - d || b - e || (c === f ? 0 : c - f)))
}

/** Without failures on day 0 itself: the spans of what outlasted the day of fitting. */
export function outlastingSpans({ entry, lower, upper, weight }: Spans): Spans {
  const isKept = (_: number, i: number) => upper[i] !== 0
  return {
    entry: entry.filter(isKept),
    lower: lower.filter(isKept),
    upper: upper.filter(isKept),
    weight: weight.filter(isKept)
  }
}

/**
 * The counts of a curve as spans for a parametric likelihood, without failures on day 0. Which unit entered when is not known of counts, nor does it
 * matter: ln S(entry) is taken off the log-likelihood of each late unit, which is what a row censored at its entry with a negative weight does.
 */
export function spansOfTally({ time, entered, failed, censored }: Tally): Spans {
  const most = 2 * time.length
  const [lower, upper, weight] = [new Float64Array(most), new Float64Array(most), new Float64Array(most)]
  let rows = 0
  const add = (day: number, end: number, count: number) => {
    if (count === 0) return
    lower[rows] = day
    upper[rows] = end
    weight[rows++] = count
  }
  for (let j = 0; j < time.length; j++) {
    const day = time[j]!
    if (day === 0) continue
    add(day, day, failed[j]!)
    add(day, Infinity, censored[j]! - entered[j]!)
  }
  return {
    entry: new Float64Array(rows),
    lower: lower.subarray(0, rows),
    upper: upper.subarray(0, rows),
    weight: weight.subarray(0, rows)
  }
}

const spansFrom = (rows: readonly Row[]): Spans => ({
  entry: Float64Array.from(rows, ([entry]) => entry),
  lower: Float64Array.from(rows, ([, lower]) => lower),
  upper: Float64Array.from(rows, ([, , upper]) => upper),
  weight: Float64Array.from(rows, ([, , , weight]) => weight)
})
