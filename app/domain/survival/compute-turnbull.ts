import { bootstrapTurnbull } from './bootstrap'
import type { SurvivalRequest } from './compute-survival.schema'
import { firstCrossing } from './quantile'
import { seededRandom } from './special/seeded-random'
import type { Spans } from './spans'
import type { AnswerRow, GroupAnswer, WeibullAnswer } from './survival-answer'
import { turnbull } from './turnbull'

const resamples = 200
/** Past this many units or rows the limits would take minutes; they are null. */
const maxResampledUnits = 200_000
const maxResampledRows = 20_000

/**
 * The answer for one group of interval-censored data. The curve has a row at the right end of each cell with mass, where S is known again; the median
 * is the first such time at which S has fallen to 1/2; the restricted mean is null, since the area inside the cells is not determined.
 */
export function computeTurnbullGroup(
  group: string | null,
  spans: Spans,
  request: SurvivalRequest,
  weibull: WeibullAnswer | null
): GroupAnswer {
  const fit = turnbull(spans)
  const rows = [...fit.mass.keys()].filter((k) => fit.mass[k]! > 0 && fit.right[k] !== Infinity)
  const canResample = fit.units <= maxResampledUnits && spans.weight.length <= maxResampledRows && rows.length > 0
  const limits = canResample ? bootstrapTurnbull(fit, seededRandom(request.seed), request.confidence, resamples) : null
  const time = Float64Array.from(rows, (k) => fit.right[k]!)
  const survival = Float64Array.from(rows, (k) => fit.survivalAfter[k]!)
  const atRisk = possiblyAtRisk(spans, time)
  let cumulative = 0
  const crossing = (values: Float64Array | undefined) => (values === undefined ? null : firstCrossing(time, values, 0.5))
  return {
    group,
    n: fit.units,
    events: fit.failures,
    curve: rows.map((_, r): AnswerRow => ({
      time: time[r]!,
      atRisk: atRisk[r]!,
      events: null,
      censored: null,
      survival: survival[r]!,
      standardError: limits && limits.standardError[r]!,
      lower: limits && limits.lower[r]!,
      upper: limits && limits.upper[r]!,
      bound: null
    })),
    median: { estimate: crossing(survival), lower: crossing(limits?.lower), upper: crossing(limits?.upper) },
    rmst: request.tau === null ? null : { tau: request.tau, estimate: null, standardError: null },
    hazard: rows.map((k, r) => ({
      time: time[r]!,
      cumulative: (cumulative += fit.mass[k]! / (fit.mass[k]! + fit.survivalAfter[k]!))
    })),
    weibull,
    support: Array.from(fit.left, (lower, k) => ({
      lower,
      upper: fit.right[k] === Infinity ? null : fit.right[k]!,
      mass: fit.mass[k]!
    }))
  }
}

/** Units that entered before t and may still have been at risk at t: neither last seen working before it nor known to have failed before it. */
function possiblyAtRisk({ entry, lower, upper, weight }: Spans, times: Float64Array): number[] {
  const order = [...entry.keys()]
  const exit = (i: number) => (upper[i] === Infinity ? lower[i]! : upper[i]!)
  const byEntry = [...order].sort((a, b) => entry[a]! - entry[b]!)
  const byExit = order.sort((a, b) => exit(a) - exit(b))
  let n = 0
  let nextEntry = 0
  let nextExit = 0
  return Array.from(times, (t) => {
    for (; nextEntry < byEntry.length && isIn(entry[byEntry[nextEntry]!]!, t); nextEntry++) n += weight[byEntry[nextEntry]!]!
    for (; nextExit < byExit.length && exit(byExit[nextExit]!) < t; nextExit++) n -= weight[byExit[nextExit]!]!
    return n
  })
}

const isIn = (entry: number, t: number) => entry < t || entry === 0
