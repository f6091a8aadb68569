import { bootstrapTurnbull } from './bootstrap'
import { possiblyAtRisk } from './possibly-at-risk'
import { firstCrossing } from './quantile'
import { seededRandom } from './special/seeded-random'
import type { Spans } from './spans'
import type { AnswerRow, GroupAnswer, WeibullAnswer } from './survival-answer'
import { turnbull } from './turnbull'

/** `resamples` of the bootstrap; with 0 there are no limits. */
export type TurnbullOptions = { confidence: number; seed: number; tau: number | null; resamples: number }

/**
 * The answer for one group of interval-censored data. The curve has a row at the right end of each cell with mass, where S is known again; the median
 * is the first such time at which S has fallen to 1/2; the restricted mean is null, since the area inside the cells is not determined.
 */
export function computeTurnbullGroup(
  group: string | null,
  spans: Spans,
  options: TurnbullOptions,
  weibull: WeibullAnswer | null
): GroupAnswer {
  const fit = turnbull(spans)
  const rows = [...fit.mass.keys()].filter((k) => fit.mass[k]! > 0 && fit.right[k] !== Infinity)
  const limits =
    options.resamples > 0 && rows.length > 0
      ? bootstrapTurnbull(fit, seededRandom(options.seed), options.confidence, options.resamples)
      : null
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
    rmst: options.tau === null ? null : { tau: options.tau, estimate: null, standardError: null },
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
