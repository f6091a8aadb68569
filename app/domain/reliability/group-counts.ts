import type { Cause, ExclusionKind } from '../reports/report-words'

/** Failures of one day by cause, or entries, or last words: how many units on each day since their installation. */
export type CountedDay = { day: number; count: number }

/**
 * What a Kaplan-Meier curve, incidences by cause and a log-rank test need of a group: how many units entered, failed and were last heard of on
 * each day since installation, ascending, days without any left out. A failure known only within an interval counts on the day it was found.
 */
export type DayCounts = {
  entered: CountedDay[]
  /** Last heard of working, or parted. */
  left: CountedDay[]
  failed: Partial<Record<Cause, CountedDay[]>>
}

/**
 * Units with the same observation, counted: watched from `entry` on, failed in (lower, upper] by `cause`, exactly at `lower` where both are equal;
 * `upper` and `cause` are null for a unit last heard of on day `lower`. Failures known to within 14 days count as exact at the upper end.
 */
export type LifeCount = { entry: number; lower: number; upper: number | null; cause: Cause | null; count: number }

/** What is counted beside the curve. */
export type GroupTotals = {
  /** Reports that count, whether or not they are in the curve. */
  fitted: number
  inCurve: number
  enteredLate: number
  notFollowed: number
  failedBeforeRegistration: Partial<Record<Cause, number>>
  /** Failures in the curve known less closely than to 14 days. */
  wide: number
  /** Of the reports filed in time: how many, and how many worked at first power. */
  promptly: number
  worked: number
  excluded: Partial<Record<ExclusionKind, number>>
  /** Unit-days watched, those of units with a failure among them. */
  watchedDays: number
  watchedDaysOfFailed: number
  /** Units without a failure, and the sum of the day numbers (see `lib/dates`) on which their watch began: gives the days there could have been. */
  unfailed: number
  watchBegan: number
}

/** Everything that a group's figures are computed from. `lives` is null where only Kaplan-Meier is asked for. */
export type GroupCounts = { days: DayCounts; totals: GroupTotals; lives: LifeCount[] | null }
