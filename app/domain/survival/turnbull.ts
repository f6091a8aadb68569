import type { Spans } from './spans'
import { cellsOf, type Cells } from './turnbull-cells'
import { certain, maximise } from './turnbull-maximise'
import { loadOf, problemOf, type Problem } from './turnbull-problem'

/**
 * A nonparametric estimate from interval-censored data. Mass lies somewhere in (left, right] of each cell (at the point where both are equal; `right` may
 * be Infinity); `survivalAfter[k]` is S from `right[k]` up to the next cell with mass. Cells without mass are kept with mass 0.
 * `gap` is the largest gain of log-likelihood a unit of mass moved anywhere could promise (Kuhn-Tucker): the log-likelihood is at most that far
 * from its maximum.
 */
export type TurnbullFit = {
  left: Float64Array
  right: Float64Array
  mass: Float64Array
  survivalAfter: Float64Array
  logLikelihood: number
  gap: number
  /** Whether the maximisation ended by its own criterion. */
  isConverged: boolean
  units: number
  failures: number
  /** What a resample needs to be fitted on the same cells, see `bootstrapTurnbull`. */
  parts: { cells: Cells; problem: Problem; falls: Float64Array; spans: Spans }
}

/**
 * Turnbull's nonparametric maximum likelihood estimate with right, left and interval censoring and left truncation by conditioning: unit i counts
 * with P(lower < T <= upper) / P(T > entry). Once 0, S stays 0.
 * S is not determined inside a cell with mass, nor is the place of the mass there.
 *
 * Source: B. W. Turnbull, JRSS B 38:290-295 (1976); Kuhn-Tucker conditions: R. Gentleman and C. J. Geyer, Biometrika 81:618-623 (1994).
 */
export function turnbull(spans: Spans): TurnbullFit {
  const cells = cellsOf(spans)
  const problem = problemOf(cells, spans)
  const load = loadOf(problem, cells, spans.weight)
  const { falls, logLikelihood, isConverged } = maximise(problem, load)
  // Mass beyond the last observation belongs to nobody in particular: S is unknown there, and the cell takes what is left.
  const endless = cells.right.findIndex((right) => right === Infinity)
  if (endless >= 0) falls[endless] = certain
  const { mass, survivalAfter } = massesOf(falls)
  let units = 0
  let failures = 0
  for (let i = 0; i < spans.weight.length; i++) {
    units += spans.weight[i]!
    if (spans.upper[i] !== Infinity) failures += spans.weight[i]!
  }
  return {
    left: cells.left,
    right: cells.right,
    mass,
    survivalAfter,
    logLikelihood,
    gap: kuhnTuckerGap(cells, falls, spans),
    isConverged,
    units,
    failures,
    parts: { cells, problem, falls, spans }
  }
}

/** S after each cell and the mass in it, from the falls of ln S. */
export function massesOf(falls: Float64Array): { mass: Float64Array; survivalAfter: Float64Array } {
  const mass = new Float64Array(falls.length)
  const survivalAfter = new Float64Array(falls.length)
  let s = 1
  for (let j = 0; j < falls.length; j++) {
    const isCertain = falls[j]! >= certain
    mass[j] = isCertain ? s : s * -Math.expm1(-falls[j]!)
    s = isCertain ? 0 : s * Math.exp(-falls[j]!)
    survivalAfter[j] = s
  }
  return { mass, survivalAfter }
}

/**
 * S at t: null inside a cell with mass, where it is not determined, and past the last observation while S is above 0.
 */
export function turnbullAt(fit: TurnbullFit, t: number): number | null {
  let s = 1
  for (let k = 0; k < fit.left.length; k++) {
    if (fit.mass[k] === 0) continue
    const isPoint = fit.left[k] === fit.right[k]
    if (isPoint ? t < fit.left[k]! : t <= fit.left[k]!) return s
    if (t < fit.right[k]!) return null
    s = fit.survivalAfter[k]!
  }
  return s
}

/** max over cells j of sum over rows of w (1[row may have failed in j]/P(row) - 1[j lies after its entry]/P(T > entry)). */
function kuhnTuckerGap(cells: Cells, falls: Float64Array, { weight }: Spans): number {
  const before = new Float64Array(falls.length + 1)
  const total = new Float64Array(falls.length + 1)
  const certainBefore = new Int32Array(falls.length + 1)
  for (let j = 0; j < falls.length; j++) {
    const isCertain = falls[j]! >= certain
    before[j + 1] = isCertain ? Infinity : before[j]! + falls[j]!
    total[j + 1] = total[j]! + (isCertain ? 0 : falls[j]!)
    certainBefore[j + 1] = certainBefore[j]! + (isCertain ? 1 : 0)
  }
  const change = new Float64Array(falls.length + 1)
  for (let i = 0; i < weight.length; i++) {
    const first = cells.first[i]!
    const last = cells.last[i]!
    const entered = cells.entered[i]!
    // Units that entered after S had reached 0 say nothing about the mass before.
    if (before[entered] === Infinity) continue
    // P(row) / P(T > entry); a difference of running totals would lose the digits of a short row.
    let fall = 0
    if (certainBefore[last + 1]! > certainBefore[first]!) fall = Infinity
    else if (last - first < 16) for (let j = first; j <= last; j++) fall += falls[j]!
    else fall = total[last + 1]! - total[first]!
    const share = Math.exp(before[entered]! - before[first]!) * -Math.expm1(-fall)
    const atEntry = Math.exp(-before[entered]!)
    change[first]! += weight[i]! / (share * atEntry)
    change[last + 1]! -= weight[i]! / (share * atEntry)
    change[entered]! -= weight[i]! / atEntry
  }
  let gap = 0
  let sum = 0
  for (let j = 0; j < falls.length; j++) {
    sum += change[j]!
    gap = Math.max(gap, sum)
  }
  return gap
}
