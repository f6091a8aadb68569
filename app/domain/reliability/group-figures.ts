import { dayNumber, type Day } from '~/lib/dates'
import { causes, type Cause } from '../reports/report-words'
import { aalenJohansen, incidenceLimits } from '../survival/aalen-johansen'
import { clopperPearson } from '../survival/clopper-pearson'
import { curveLimits, defaultLimits } from '../survival/confidence-limits'
import { curveRows } from '../survival/curve-rows'
import { kaplanMeier, type SurvivalCurve } from '../survival/kaplan-meier'
import { nelsonAalen } from '../survival/nelson-aalen'
import { quantile } from '../survival/quantile'
import { restrictedMean } from '../survival/restricted-mean'
import type { Spans } from '../survival/spans'
import { survivalAt } from '../survival/survival-at'
import { fitWeibull, weibullLimits } from '../survival/weibull'
import { weibullQuantile } from '../survival/weibull-quantities'
import { outlastingSpans, spansOfLives, spansOfTally } from './counts-spans'
import { competingTally, tallyOfCounts, type CountColumns } from './counts-tally'
import type { GroupFigures, IncidenceCurve, ShapeFigures, SilentFigures } from './figures.types'
import type { GroupTotals, LifeCounts } from './group-counts'
import { turnbullFigures, type TurnbullFigures } from './turnbull-figures'

/** The day at which shares are read, and up to which mean days are counted. */
export const oneYear = 365

/** A group's counts, summed: as `GroupCounts`, with the days as columns and the joint observations of each part. */
export type SummedCounts = { columns: CountColumns; totals: GroupTotals; lives: readonly LifeCounts[] | null }

/** How much is wanted of a group: all there is, all but the hazard, or neither hazard nor incidences. */
export type Detail = 'whole' | 'all-but-hazard' | 'brief'

/** What a curve counts: `counted` are the causes whose failures it falls at; `isOneCause` when the filters chose among them. */
export type Counting = { counted: readonly Cause[]; isOneCause: boolean; asOf: Day }

/** Counted failures known less closely than to 14 days. */
export const wideOf = (totals: GroupTotals, counted: readonly Cause[]): number =>
  counted.reduce((sum, cause) => sum + totals[`wide:${cause}`], 0)

/**
 * Everything said of one group: Kaplan-Meier where every counted failure is known to within 14 days, else Turnbull. Mean days, hazard
 * and incidences take failures on the day they were found. Pure; linear in the days, apart from Turnbull's maximisation.
 *
 * @param silent what the silent could hide, computed beside it; null where nobody asked
 * @param detail what is not wanted is empty
 * @throws RangeError when there are wide failures but no joint observations
 */
export function groupFigures(
  group: string,
  { columns, totals, lives }: SummedCounts,
  { counted, isOneCause, asOf }: Counting,
  silent: SilentFigures | null,
  detail: Detail = 'whole'
): GroupFigures {
  const tally = tallyOfCounts(columns, counted)
  const curve = kaplanMeier(tally)
  const failuresByCause = Object.fromEntries(
    causes.map((cause) => [cause, sum(columns.columns.get(`failed:${cause}`))])
  ) as Record<Cause, number>
  const failuresWithinInterval = wideOf(totals, counted)
  let joint: Spans | null = null
  if (failuresWithinInterval > 0) {
    if (lives === null) throw new RangeError(`groupFigures: ${group} has wide failures and no joint observations`)
    joint = spansOfLives(lives, counted)
  }
  const firstPower = clopperPearson(totals.worked, totals.promptly)
  return {
    group,
    fitted: totals.fitted,
    n: totals.inCurve,
    events: curve.failures,
    failuresByCause,
    commonestCause: commonest(failuresByCause),
    enteredLate: totals.enteredLate,
    failedBeforeRegistration: causes.reduce((n, cause) => n + totals[`apart:${cause}`], 0),
    notFollowed: totals.notFollowed,
    failuresWithinInterval,
    estimator: joint === null ? 'kaplan-meier' : 'turnbull',
    firstPower: firstPower && { ...firstPower, n: totals.promptly, works: totals.worked },
    ...(joint === null ? kaplanMeierFigures(curve) : turnbullFigures(joint, oneYear)),
    meanInYear: meanInYear(curve),
    hazard: detail === 'whole' ? hazardRows(curve) : [],
    incidence: isOneCause || detail === 'brief' ? [] : incidenceCurves(columns),
    shape: shapeFigures(joint === null ? spansOfTally(tally) : outlastingSpans(joint)),
    followUp: followUp(totals, asOf),
    silent
  }
}

function kaplanMeierFigures(curve: SurvivalCurve): TurnbullFigures {
  const limits = curveLimits(curve)
  return {
    atOneYear: { ...survivalAt(curve, oneYear), open: null },
    median: quantile(curve, limits, 0.5),
    curve: curveRows(curve, limits),
    support: null
  }
}

/** Greenwood's spread of a mean is 0 where nothing failed, or all at once: nothing to take limits from. */
function meanInYear(curve: SurvivalCurve): GroupFigures['meanInYear'] {
  const mean = restrictedMean(curve, oneYear)
  if (mean.standardError !== 0) return { ...mean, bound: null }
  // S never rises, so the area up to a year is at least that of a rectangle as high as S then.
  const { lower, bound } = survivalAt(curve, oneYear)
  if (bound === null) return { ...mean, lower: null, upper: null, bound }
  return { ...mean, lower: oneYear * lower!, upper: oneYear, bound }
}

function hazardRows(curve: SurvivalCurve): GroupFigures['hazard'] {
  const { time, cumulative } = nelsonAalen(curve)
  return Array.from(time, (at, i) => ({ time: at, cumulative: cumulative[i]! }))
}

const sum = (column: Float64Array | undefined) => column?.reduce((a, b) => a + b, 0) ?? 0

function commonest(failures: Record<Cause, number>): Cause | null {
  const most = Math.max(...Object.values(failures))
  const first = causes.filter((cause) => failures[cause] === most)
  return most > 0 && first.length === 1 ? first[0]! : null
}

/** Rows where the cause's share grows, and the last day anybody was heard of. */
function incidenceCurves(columns: CountColumns): IncidenceCurve[] {
  const tally = competingTally(columns)
  if (tally.causes.length === 0) return []
  const { time, atRisk, incidence, standardError } = aalenJohansen(tally)
  const curves = tally.causes.map((name, k): IncidenceCurve => {
    const shares = incidence[k]!
    const isShown = (i: number) => i === time.length - 1 || shares[i] !== (shares[i - 1] ?? 0)
    return {
      cause: name as Cause,
      failures: tally.failedBy[k]!.reduce((a, b) => a + b, 0),
      curve: [...time.keys()].filter(isShown).map((i) => {
        const at = { estimate: shares[i]!, standardError: standardError[k]![i]!, atRisk: atRisk[i]! }
        return { time: time[i]!, ...at, ...incidenceLimits(at, defaultLimits) }
      })
    }
  })
  return curves.sort((a, b) => b.failures - a.failures)
}

function shapeFigures(spans: Spans): ShapeFigures | null {
  const fit = fitWeibull(spans)
  if (fit === null) return null
  const [shape, scale] = [weibullLimits(fit, 'shape'), weibullLimits(fit, 'scale')]
  const [b10, median] = [weibullQuantile(fit, 0.1), weibullQuantile(fit, 0.5)]
  const numbers = [shape, scale, b10, median].flatMap((estimate) => Object.values(estimate))
  // A shape so small that a life overflows says nothing that could be sent.
  if (![...numbers, fit.shapeStandardError, fit.scaleStandardError].every(Number.isFinite)) return null
  return {
    ...shape,
    standardError: fit.shapeStandardError,
    scale: scale.estimate,
    scaleLower: scale.lower,
    scaleUpper: scale.upper,
    scaleStandardError: fit.scaleStandardError,
    logLikelihood: fit.logLikelihood,
    failures: spans.weight.reduce((n, weight, i) => n + (spans.upper[i] === Infinity ? 0 : weight), 0),
    b10,
    median
  }
}

/**
 * Completeness of follow-up from sums, as `completeness` has it of single units. A day that somebody stated may lie one ahead of the as-of day: the
 * possible days are never fewer than the observed.
 */
function followUp({ watchedDays, watchedDaysOfFailed, unfailed, watchBegan }: GroupTotals, asOf: Day): GroupFigures['followUp'] {
  const possible = watchedDaysOfFailed + unfailed * dayNumber(asOf) - watchBegan
  const potentialDays = Math.max(watchedDays, possible)
  return potentialDays > 0 ? { observedDays: watchedDays, potentialDays, ratio: watchedDays / potentialDays } : null
}
