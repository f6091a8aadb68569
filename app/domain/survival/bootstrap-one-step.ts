import { limitRows, limitsOfResamples, type BootstrapLimits } from './bootstrap'
import { choleskyFactor, choleskySolve } from './special/cholesky'
import { isotonic } from './special/isotonic'
import { poissonSampler } from './special/poisson-sampler'
import { massesOf, type TurnbullFit } from './turnbull'
import { curvatureMatrix, termsWithin } from './turnbull-curvature'
import { certain } from './turnbull-maximise'
import { loadOf, type Load } from './turnbull-problem'

/**
 * Percentile limits of a Turnbull estimate for large groups, in a time that depends on its rows and cells but not on how many units share a row. Each
 * resample gives every row a Poisson weight with the row's weight as its mean, and moves the falls of ln S by one Newton step from the estimate with
 * the estimate's own curvature over the cells that carry mass, and to the nearest curve that never rises. A cell that nobody in a resample
 * survived falls to 0 there; a cell without mass in the estimate gets none.
 *
 * Near `bootstrapTurnbull` from some hundreds of units on (its errors of S to a few percent); with fewer, use that.
 *
 * Source: D. W. K. Andrews, Econometrica 70:119-162 (2002), the k-step bootstrap; J. Praestgaard and J. A. Wellner, Annals of Probability
 * 21:2053-2086 (1993), weights in place of resampling; G. Jongbloed, Journal of Computational and Graphical Statistics 7:310-321 (1998), a step
 * of Newton's kept monotone by weighted least squares.
 *
 * @param random uniform numbers in [0, 1), such as `seededRandom(seed)`
 * @param resamples at least 20
 * @throws RangeError for a confidence that is none, and fewer resamples
 */
export function bootstrapOneStep(fit: TurnbullFit, random: () => number, confidence = 0.95, resamples = 200): BootstrapLimits {
  const { cells, problem, spans } = fit.parts
  const rows = limitRows(fit, confidence, resamples)
  const values = rows.map(() => new Float64Array(resamples))
  const samplers = Array.from(spans.weight, (mean) => poissonSampler(mean, random))
  const fallsFor = newtonStep(fit)
  const weight = new Float64Array(samplers.length)
  for (let b = 0; b < resamples; b++) {
    for (let i = 0; i < weight.length; i++) weight[i] = samplers[i]!()
    const { survivalAfter } = massesOf(fallsFor(loadOf(problem, cells, weight)))
    rows.forEach((k, r) => (values[r]![b] = survivalAfter[k]!))
  }
  return limitsOfResamples(fit, rows, values, confidence)
}

/** The falls that one Newton step reaches from the estimate under other counts; what the counts do not change is computed once. */
function newtonStep({ parts: { cells, problem, falls, spans } }: TurnbullFit): (load: Load) => Float64Array {
  const { first, last } = problem
  const estimate = loadOf(problem, cells, spans.weight)
  const open = [...falls.keys()].filter((j) => falls[j]! > 0 && falls[j]! < certain)
  const odds = Float64Array.from(first, (from, t) => 1 / Math.expm1(sum(falls, from, last[t]!)))
  const bend = odds.map((o, t) => estimate.weight[t]! * o * (1 + o))
  const { from, to } = termsWithin(problem, open)
  const size = problem.size
  const k = open.length
  const curvature = curvatureMatrix(k, from, to, bend)
  const factor = choleskyFactor(curvature, k)
  // Curvature in the sum of the falls up to each cell: raising it lowers the next cell's fall.
  const at = (i: number, j: number) => (j < k ? curvature[i * k + j]! : 0)
  const precision = Float64Array.from(open, (_, i) =>
    Math.max(at(i, i) - 2 * at(i, i + 1) + (i + 1 < k ? at(i + 1, i + 1) : 0), 1e-13 * at(i, i), 1e-300)
  )
  return ({ survived, weight }) => {
    const rise = new Float64Array(size + 1)
    const failed = new Float64Array(size + 1)
    for (let t = 0; t < first.length; t++) {
      const w = weight[t]!
      const begin = first[t]!
      const end = last[t]! + 1
      rise[begin]! += w * odds[t]!
      rise[end]! -= w * odds[t]!
      failed[begin]! += w
      failed[end]! -= w
    }
    for (let j = 1; j < size; j++) {
      rise[j]! += rise[j - 1]!
      failed[j]! += failed[j - 1]!
    }
    const move = choleskySolve(
      factor,
      open.map((j) => rise[j]! - survived[j]!)
    )
    let total = 0
    const cumulative = move.map((step, i) => (total += falls[open[i]!]! + step))
    const kept = isotonic(cumulative, precision, 0)
    const moved = new Float64Array(size)
    open.forEach((j, i) => (moved[j] = Math.min(certain, kept[i]! - (i === 0 ? 0 : kept[i - 1]!))))
    for (let j = 0; j < size; j++) if (survived[j] === 0 && failed[j]! > 0) moved[j] = certain
    return moved
  }
}

function sum(values: Float64Array, from: number, to: number): number {
  let total = 0
  for (let j = from; j <= to; j++) total += values[j]!
  return total
}
