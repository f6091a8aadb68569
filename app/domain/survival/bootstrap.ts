import { massesOf, type TurnbullFit } from './turnbull'
import { maximise } from './turnbull-maximise'
import { loadOf } from './turnbull-problem'

/** Pointwise limits and standard errors of S at the right end of each cell with mass. */
export type BootstrapLimits = {
  time: Float64Array
  survival: Float64Array
  lower: Float64Array
  upper: Float64Array
  standardError: Float64Array
  resamples: number
}

/**
 * Percentile limits of a Turnbull estimate by resampling units with replacement, as many as there are, each refitted on the cells of the estimate
 * (they hold every place where a resample can put mass). A cell that ends at Infinity has no row: S is unknown there.
 *
 * Approximate, and rough with few units: no closed form is valid for interval-censored data.
 *
 * Source: B. Efron and R. J. Tibshirani, An Introduction to the Bootstrap (Chapman and Hall 1993), section 13.3.
 *
 * @param random uniform numbers in [0, 1), such as `seededRandom(seed)`
 * @param resamples at least 20
 */
export function bootstrapTurnbull(fit: TurnbullFit, random: () => number, confidence = 0.95, resamples = 200): BootstrapLimits {
  const { cells, problem, falls, spans } = fit.parts
  const rows = limitRows(fit, confidence, resamples)
  const ends = cumulative(spans.weight)
  const values = rows.map(() => new Float64Array(resamples))
  for (let b = 0; b < resamples; b++) {
    const weight = new Float64Array(spans.weight.length)
    for (let u = 0; u < fit.units; u++) weight[drawn(ends, random() * fit.units)]! += 1
    const { survivalAfter } = massesOf(maximise(problem, loadOf(problem, cells, weight), 1e-9, falls).falls)
    rows.forEach((k, r) => (values[r]![b] = survivalAfter[k]!))
  }
  return limitsOfResamples(fit, rows, values, confidence)
}

/**
 * The cells of an estimate that have limits: those with mass that end.
 *
 * @throws RangeError for a confidence that is none, and fewer than 20 resamples
 */
export function limitRows(fit: TurnbullFit, confidence: number, resamples: number): number[] {
  if (!(confidence > 0 && confidence < 1))
    throw new RangeError(`bootstrap: the confidence must lie between 0 and 1 (${confidence})`)
  if (!(resamples >= 20)) throw new RangeError(`bootstrap: too few resamples (${resamples})`)
  return [...fit.mass.keys()].filter((k) => fit.mass[k]! > 0 && fit.right[k] !== Infinity)
}

/**
 * Percentile limits from resampled values of S.
 *
 * @param values for each of `rows`, S after it in every resample; sorted in place
 */
export function limitsOfResamples(
  fit: TurnbullFit,
  rows: readonly number[],
  values: Float64Array[],
  confidence: number
): BootstrapLimits {
  const tail = (1 - confidence) / 2
  for (const row of values) row.sort()
  return {
    time: Float64Array.from(rows, (k) => fit.right[k]!),
    survival: Float64Array.from(rows, (k) => fit.survivalAfter[k]!),
    lower: Float64Array.from(values, (row) => sampleQuantile(row, tail)),
    upper: Float64Array.from(values, (row) => sampleQuantile(row, 1 - tail)),
    standardError: Float64Array.from(values, deviation),
    resamples: values[0]?.length ?? 0
  }
}

function cumulative(weight: Float64Array): Float64Array {
  let sum = 0
  return weight.map((w) => (sum += w))
}

/** The row whose share of the units holds the point. */
function drawn(ends: Float64Array, point: number): number {
  let low = 0
  let high = ends.length - 1
  while (low < high) {
    const middle = (low + high) >>> 1
    if (ends[middle]! > point) high = middle
    else low = middle + 1
  }
  return low
}

/** Quantile of sorted values with linear interpolation between their ranks. */
function sampleQuantile(sorted: Float64Array, p: number): number {
  const position = p * (sorted.length - 1)
  const below = Math.floor(position)
  const above = Math.min(below + 1, sorted.length - 1)
  return sorted[below]! + (position - below) * (sorted[above]! - sorted[below]!)
}

function deviation(values: Float64Array): number {
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length
  return Math.sqrt(values.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (values.length - 1))
}
