import { bootstrapTurnbull, type BootstrapLimits } from './bootstrap'
import { bootstrapOneStep } from './bootstrap-one-step'
import { possiblyAtRisk } from './possibly-at-risk'
import { firstCrossing } from './quantile'
import { seededRandom } from './special/seeded-random'
import type { Spans } from './spans'
import type { AnswerRow, GroupAnswer, WeibullAnswer } from './survival-answer'
import { turnbull, type TurnbullFit } from './turnbull'

/**
 * How limits are told: up to `refittedUnits` by refitting every resample, above by one Newton step each, for which `stepCells` cells with mass are at most
 * looked at; past both there are none.
 */
export type ResamplingLimits = { refittedUnits: number; stepCells: number }

export type TurnbullOptions = ResamplingLimits & { confidence: number; seed: number; tau: number | null }

const resamples = 200

/**
 * What a request of so many units and groups can be given within some five seconds (two cores, 200 resamples): refits of 3,000 units in all, or of 100
 * groups of 150; steps on 3,000 cells at once, their cost growing with the square of the cells.
 */
export const resamplingLimits = (units: number, groups: number): ResamplingLimits => ({
  refittedUnits: units <= 3_000 ? 1_000 : 150,
  stepCells: 3_000 / Math.sqrt(groups)
})

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
  const limits = limitsOf(fit, rows.length, options)
  const time = Float64Array.from(rows, (k) => fit.right[k]!)
  const survival = Float64Array.from(rows, (k) => fit.survivalAfter[k]!)
  const atRisk = possiblyAtRisk(spans, time)
  let cumulative = 0
  // Where S is 0 there are no limits, as for Kaplan-Meier: resamples of those who failed can only say 0 again.
  const isUntold = Uint8Array.from(survival, (s) => (s > 0 ? 0 : 1))
  const told = (values: Float64Array | undefined, r: number) => (values === undefined || isUntold[r] === 1 ? null : values[r]!)
  const crossing = (values: Float64Array | undefined) =>
    values === undefined ? null : firstCrossing(time, values, 0.5, isUntold)
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
      standardError: told(limits?.standardError, r),
      lower: told(limits?.lower, r),
      upper: told(limits?.upper, r),
      bound: null
    })),
    median: { estimate: firstCrossing(time, survival, 0.5), lower: crossing(limits?.lower), upper: crossing(limits?.upper) },
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

/** Null where there is nothing to tell, or where it would take too long. */
function limitsOf(fit: TurnbullFit, rows: number, options: TurnbullOptions): BootstrapLimits | null {
  const { confidence, seed, refittedUnits, stepCells } = options
  if (rows === 0) return null
  if (fit.units <= refittedUnits) return bootstrapTurnbull(fit, seededRandom(seed), confidence, resamples)
  return rows <= stepCells ? bootstrapOneStep(fit, seededRandom(seed), confidence, resamples) : null
}
