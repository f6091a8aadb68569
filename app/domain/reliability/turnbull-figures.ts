import { bootstrapTurnbull, type BootstrapLimits } from '../survival/bootstrap'
import { bootstrapOneStep } from '../survival/bootstrap-one-step'
import { confidenceLimits, type Limits } from '../survival/confidence-limits'
import { possiblyAtRisk } from '../survival/possibly-at-risk'
import { firstCrossing, type Quantile } from '../survival/quantile'
import { seededRandom } from '../survival/special/seeded-random'
import type { Spans } from '../survival/spans'
import type { AnswerRow } from '../survival/survival-answer'
import { turnbull, type TurnbullFit } from '../survival/turnbull'
import type { FigureAt, GroupFigures } from './figures.types'

/** Always the same numbers, so that a figure can be had again. */
const seed = 1976
const resamples = 200
/** Of more units the limits lie so close that fewer resamples tell them as well as a page can show. */
const manyUnits = 20_000
const resamplesOfMany = 50
/** Up to so many units each resample is refitted in full; above, it moves by one step, which is near enough and fast. */
const maxRefittedUnits = 500
/** Less mass than this is rounding, no place where a failure may lie. */
const someMass = 1e-7

export type TurnbullFigures = Pick<GroupFigures, 'curve' | 'support' | 'median' | 'atOneYear'>

/**
 * Turnbull's curve of one group with limits. It has a row at each end of the stretches where S is known (at the right end of each cell with mass, where S
 * is known again, and at its left end, up to which it was; between the two S is not determined) and, within them, on each day on which a unit was
 * last heard of, so that the number at risk can be read. The median is the first such day at which S has fallen to a half.
 *
 * Limits are the percentiles of a seeded bootstrap, widened to at least those which Greenwood's variance would give had every failure a
 * known day (log-log; with d/n the fall of S over a cell and n all that may have been at risk at its end): not knowing the day cannot make S
 * better known, while few failures can make resamples agree by accident. While S is 1 the lower limit is the exact one-sided bound of the
 * units surely still running then; where S is 0 there are none.
 *
 * @param spans days; at least one failure
 */
export function turnbullFigures(spans: Spans, year: number): TurnbullFigures {
  const fit = turnbull(spans)
  const cells = [...fit.mass.keys()].filter((k) => fit.mass[k]! > someMass)
  const known = knownStretches(fit, cells)
  const leaving = leavingDays(spans)
  const days = [...known.flatMap(({ from, to }) => [from, to]), ...leaving, year]
  const atRisk = atRiskAt(spans, days)
  const running = atRiskAt({ ...spans, upper: new Float64Array(spans.upper.length).fill(Infinity) }, days)
  const limits = limitsOf(fit, cells, atRisk)
  const rowOf: RowOf = (day, { from, survival }) => {
    const row = { time: day, events: null, censored: null, survival }
    if (survival === 1) return { ...row, standardError: 0, ...boundAt(running.get(day)!) }
    return { ...row, atRisk: atRisk.get(day)!, ...(limits.get(from) ?? noLimits), bound: null }
  }
  const curve: AnswerRow[] = []
  known.forEach((stretch, i) => {
    const { from, to, isEndKnown } = stretch
    if (i > 0) curve.push(rowOf(from, stretch))
    const isInside = (day: number) => (day > from || (i === 0 && day === from)) && day < to
    for (const day of leaving) if (isInside(day)) curve.push(rowOf(day, stretch))
    if (isEndKnown && to > from) curve.push(rowOf(to, stretch))
  })
  const falling = curve.filter((row) => row.bound === null)
  const column = (value: (row: AnswerRow) => number | null) => Float64Array.from(falling, (row) => value(row) ?? NaN)
  const crossing = (values: Float64Array) =>
    firstCrossing(
      column((row) => row.time),
      values,
      0.5
    )
  const median: Quantile = {
    estimate: crossing(column((row) => row.survival)),
    lower: crossing(column((row) => row.lower)),
    upper: crossing(column((row) => row.upper))
  }
  return {
    curve,
    median,
    atOneYear: figureAt(year, known, rowOf, atRisk.get(year)!),
    support: Array.from(cells, (k) => ({
      lower: fit.left[k]!,
      upper: fit.right[k] === Infinity ? null : fit.right[k]!,
      mass: fit.mass[k]!
    }))
  }
}

type RowLimits = { lower: number | null; upper: number | null; standardError: number | null }
const noLimits: RowLimits = { lower: null, upper: null, standardError: null }

type RowOf = (day: number, stretch: Stretch) => AnswerRow

/** The distinct days of the last words of units that are not known to have failed, ascending. */
function leavingDays({ lower, upper }: Spans): number[] {
  const days = new Set<number>()
  for (let i = 0; i < lower.length; i++) if (upper[i] === Infinity) days.add(lower[i]!)
  return [...days].sort((a, b) => a - b)
}

/** Those possibly at risk on some days. */
function atRiskAt(spans: Spans, days: readonly number[]): Map<number, number> {
  const times = Float64Array.from(new Set(days)).sort()
  return new Map(possiblyAtRisk(spans, times).map((n, i) => [times[i]!, n]))
}

/** S is known from day `from` up to day `to` (Infinity once it is 0), on which it still stands where `isEndKnown` and has just fallen where not. */
type Stretch = { from: number; to: number; isEndKnown: boolean; survival: number }

function knownStretches({ left, right, survivalAfter }: TurnbullFit, cells: readonly number[]): Stretch[] {
  const known: Stretch[] = []
  let current: Stretch = { from: 0, to: Infinity, isEndKnown: false, survival: 1 }
  for (const k of cells) {
    known.push({ ...current, to: left[k]!, isEndKnown: left[k]! < right[k]! })
    if (right[k] === Infinity) return known
    // Masses that are rounding have been left out, so the last S may be off 0 by as much.
    current = { ...current, from: right[k]!, survival: survivalAfter[k]! < someMass ? 0 : survivalAfter[k]! }
  }
  known.push(current)
  return known
}

function limitsOf(fit: TurnbullFit, cells: readonly number[], atRisk: ReadonlyMap<number, number>): Map<number, RowLimits> {
  const limits = new Map<number, RowLimits>()
  const ending = cells.filter((k) => fit.right[k] !== Infinity)
  if (ending.length === 0) return limits
  const resampled = resampledLimits(fit)
  const rowAt = new Map(Array.from(resampled.time, (time, r) => [time, r]))
  let greenwood = 0
  for (const k of ending) {
    const end = fit.right[k]!
    const n = atRisk.get(end)!
    const after = fit.survivalAfter[k]!
    if (after < someMass) {
      limits.set(end, noLimits)
      continue
    }
    const share = fit.mass[k]! / (fit.mass[k]! + after)
    greenwood += share / ((1 - share) * n)
    const exact = confidenceLimits({ survival: after, greenwood, atRisk: n })
    const r = rowAt.get(end)!
    limits.set(end, {
      lower: Math.min(exact.lower!, resampled.lower[r]!),
      upper: Math.max(exact.upper!, resampled.upper[r]!),
      standardError: Math.max(after * Math.sqrt(greenwood), resampled.standardError[r]!)
    })
  }
  return limits
}

const resampledLimits = (fit: TurnbullFit): BootstrapLimits => {
  const bootstrap = fit.units <= maxRefittedUnits ? bootstrapTurnbull : bootstrapOneStep
  return bootstrap(fit, seededRandom(seed), 0.95, fit.units > manyUnits ? resamplesOfMany : resamples)
}

/** The exact bound of so many units surely running, and their number. */
const boundAt = (running: number): Limits & { atRisk: number } => ({
  atRisk: running,
  ...confidenceLimits({ survival: 1, greenwood: 0, atRisk: running })
})

/**
 * S at a day. Between two known stretches it lies between the S of both: the lower is given, with limits that hold both, and the smaller number at
 * risk; nothing where the lower is 0.
 */
function figureAt(time: number, known: readonly Stretch[], rowOf: RowOf, atRiskThen: number): FigureAt {
  const at = known.findLastIndex((stretch) => stretch.from <= time)
  const stretch = known[at]!
  const figure = ({ survival, standardError, atRisk, lower, upper, bound }: AnswerRow) => ({
    time,
    survival,
    standardError,
    atRisk,
    lower,
    upper,
    bound
  })
  if (time <= stretch.to) return { ...figure(rowOf(time, stretch)), open: null }
  const next = known[at + 1]
  const unknown = { time, survival: null, standardError: null, lower: null, upper: null, bound: null }
  if (next === undefined) return { ...unknown, atRisk: 0, open: null }
  const [before, after] = [rowOf(stretch.to, stretch), rowOf(next.from, next)]
  const atRisk = Math.min(after.atRisk, atRiskThen)
  const open = { from: stretch.to, to: next.from, before: stretch.survival }
  if (after.survival === 0) return { ...unknown, atRisk, open }
  return { ...figure(after), atRisk, upper: before.upper ?? 1, open }
}
