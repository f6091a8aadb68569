import type { AnswerRow } from '../survival/survival-answer'
import type { Bound } from '../survival/confidence-limits'
import type { MeanDifference, RestrictedMean } from '../survival/restricted-mean'
import type { ProportionLimits } from '../survival/clopper-pearson'
import type { Quantile } from '../survival/quantile'
import type { Cause, ExclusionKind } from '../reports/report-words'
import type { ReliabilityFilters } from './reliability-filters'

/**
 * S at a day. Where Turnbull leaves it open between two days, `survival` is that of the later one, so that it claims no more than is known, the limits hold
 * both, and the number at risk is the smaller; null where it has fallen to 0 by then.
 */
export type FigureAt = {
  time: number
  survival: number | null
  standardError: number | null
  atRisk: number
  lower: number | null
  upper: number | null
  bound: Bound | null
  /** The days between which S is not determined and `time` lies, and S `before` them; null where it is known. */
  open: { from: number; to: number; before: number } | null
}

/** The share failed by one cause by each day, all causes competing; `at` the end of the row's day. Limits as of the curve; see `incidenceLimits`. */
export type IncidenceCurve = {
  cause: Cause
  failures: number
  curve: {
    time: number
    atRisk: number
    estimate: number
    standardError: number
    lower: number | null
    upper: number | null
    bound: Bound | null
  }[]
}

/** Weibull's shape among units that outlasted the day of fitting; limits normal for its logarithm. */
export type ShapeFigures = {
  estimate: number
  lower: number
  upper: number
  standardError: number
  scale: number
  scaleLower: number
  scaleUpper: number
  scaleStandardError: number
  logLikelihood: number
  failures: number
  /** B10 life and median, days. */
  b10: { estimate: number; lower: number; upper: number }
  median: { estimate: number; lower: number; upper: number }
}

/** One curve with everything said beside it. Times are whole days after fitting. Figures of the filter's cause alone, where one is chosen. */
export type GroupFigures = {
  /** `all`, a console revision's code, a version. */
  group: string
  /** Reports that count, whether or not they are in the curve. */
  fitted: number
  /** Units in the curve, and failures (of the counted causes) in it. */
  n: number
  events: number
  /** All failures in the curve, whatever the filter's cause. */
  failuresByCause: Record<Cause, number>
  /** The cause with the most failures; null without a failure, or where two are alike. */
  commonestCause: Cause | null
  enteredLate: number
  /** Out of the curve: failed before its late report; filed late and not heard of since. */
  failedBeforeRegistration: number
  notFollowed: number
  /** Counted failures known less closely than to 14 days: with any, the estimator is Turnbull's. */
  failuresWithinInterval: number
  estimator: 'kaplan-meier' | 'turnbull'
  firstPower: (ProportionLimits & { n: number; works: number }) | null
  atOneYear: FigureAt
  median: Quantile
  /**
   * Mean days without failure within the first year, failures taken on the day they were found. Without any by then `lower` is the exact one-sided bound, a
   * year times that of S; no limits where all failed on one day, as their spread cannot be told.
   */
  meanInYear: RestrictedMean & { bound: Bound | null }
  curve: AnswerRow[]
  /** Turnbull's masses; null for Kaplan-Meier. */
  support: { lower: number; upper: number | null; mass: number }[] | null
  /** Nelson-Aalen; empty in the detail of a page. */
  hazard: { time: number; cumulative: number }[]
  /**
   * Causes with failures, by their number; empty where one cause is chosen, and for groups in the detail of a page. Interval-censored failures on the
   * day they were found.
   */
  incidence: IncidenceCurve[]
  shape: ShapeFigures | null
  /** Completeness of follow-up (Clark, Altman and De Stavola 2002): observed unit-days over those there could have been; null without any. */
  followUp: { observedDays: number; potentialDays: number; ratio: number } | null
  /** Only where the filters ask for bounds. */
  silent: SilentFigures | null
}

/** What silent units could hide: a unit is silent when its next check-in was due more than 30 days ago. Failures on the day they were found. */
export type SilentFigures = {
  silent: number
  /** In the curve, without a failure and not silent. */
  heardOf: number
  /** S after one year: all silent units failed the day after their last word; as reported; all still run. Null where unknown. */
  atOneYear: { worst: number | null; reported: number | null; best: number | null }
  /** The steps of both, from the first failure on. */
  worst: { time: number; survival: number }[]
  best: { time: number; survival: number }[]
}

/** Two groups beside each other; failures on the day they were found. */
export type PairFigures = {
  first: string
  second: string
  logRank: { chiSquare: number; degreesOfFreedom: number; p: number; adjustedP: number } | null
  /** Second minus first: mean days without failure up to `tau`. Null where one of them tells no spread: none failed by then, or all at once. */
  meanDifference: (MeanDifference & { tau: number }) | null
}

export type Comparison = {
  by: 'revision' | 'release'
  groups: string[]
  logRank: { chiSquare: number; degreesOfFreedom: number; p: number } | null
  /** Every pair of groups, as they are ordered; p adjusted by Holm over all of them. */
  pairs: PairFigures[]
  /** Groups of which never five units at once were followed on a day of the first year, day 0 aside: not compared. */
  leftOut: string[]
  /** Beyond the twelve groups with the most units: not compared. */
  tooMany: string[]
}

/** `observed` and `expected` up to day `comparedTo`, as far as the other batches were followed; see `batchWatch`. */
export type BatchWatchFigures = {
  observed: number
  expected: number
  ratio: number
  lower: number
  upper: number
  isFlagged: boolean
  comparedTo: number
}

/** A batch's board failures against those of its release's other batches. */
export type BatchFigures = {
  /** `1.1.1/2024-09`, its release and its code. */
  batch: string
  version: string
  code: string
  madeOn: string
  quantity: number
  /** Units in the curve, and board failures among them. */
  n: number
  observed: number
  /** Units in the curve of the release's other batches. */
  others: number
  /** Null where nothing can be expected: no other batch, or none of theirs failed. */
  watch: BatchWatchFigures | null
}

export type ReliabilityFigures = {
  filters: ReliabilityFilters
  /** Days between the lines on which joint observations were counted: 1, or 14 for Turnbull's estimate of very many units. */
  grain: 1 | 14
  all: GroupFigures
  byRevision: GroupFigures[]
  byRelease: GroupFigures[]
  revisions: Comparison | null
  releases: Comparison | null
  excluded: { kind: ExclusionKind; count: number }[]
  /** The newest batches of the releases counted, flagged ones first; at most 100 of `total`. */
  batches: { rows: BatchFigures[]; total: number }
}
