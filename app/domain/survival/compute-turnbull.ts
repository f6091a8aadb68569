import { bootstrapTurnbull, type BootstrapLimits } from './bootstrap'
import { bootstrapOneStep } from './bootstrap-one-step'
import { possiblyAtRisk } from './possibly-at-risk'
import { firstCrossing } from './quantile'
import { seededRandom } from './special/seeded-random'
import type { Spans } from './spans'
import type { AnswerRow, GroupAnswer, WeibullAnswer } from './survival-answer'
import { turnbull, type TurnbullFit } from './turnbull'

/** `isLarge`: the request as a whole has so many units that only its small groups are refitted in every resample. */
export type TurnbullOptions = { confidence: number; seed: number; tau: number | null; isLarge: boolean }

const resamples = 200
// Units up to which each resample is refitted whole; above, it is one Newton step.
const refitted = { alone: 3_000, inLarge: 300 }
// The step takes the inverse of a square matrix of the cells with mass: past this many it would take more than some seconds.
const maxStepCells = 1_500

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

/** Null where there is nothing to tell, or where it would take too long. */
function limitsOf(fit: TurnbullFit, rows: number, { confidence, seed, isLarge }: TurnbullOptions): BootstrapLimits | null {
  if (rows === 0) return null
  if (fit.units <= (isLarge ? refitted.inLarge : refitted.alone))
    return bootstrapTurnbull(fit, seededRandom(seed), confidence, resamples)
  return rows <= maxStepCells ? bootstrapOneStep(fit, seededRandom(seed), confidence, resamples) : null
}
