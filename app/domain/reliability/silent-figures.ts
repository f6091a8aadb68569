import { daysBetween, type Day } from '~/lib/dates'
import { partedOn, type LifeHistory, type LifeOutcome } from '../reports/observations'
import type { Cause } from '../reports/report-words'
import { kaplanMeier } from '../survival/kaplan-meier'
import { silentAfterDays } from '../survival/silent-bounds'
import { survivalAt } from '../survival/survival-at'
import { columnsOfCounts, tallyOfCounts } from './counts-tally'
import type { SilentFigures } from './figures.types'
import type { Counter, DayCounts, GroupTotals } from './group-counts'

/** A check-in is due so many days after installing, and from then on once a year. */
export const dueDays = [30, 90, 180, 365] as const

/** The day after installing on which the next check-in is due when the last word came on day `last`. */
export function nextDueDay(last: number): number {
  return dueDays.find((day) => day > last) ?? 365 * (Math.floor(last / 365) + 1)
}

/** Silent units of a group: the days of their last words, and the as-of day on the clock of each. */
export type SilentCounts = { lastWords: Map<number, number>; toClose: Map<number, number> }
export const noSilent = (): SilentCounts => ({ lastWords: new Map(), toClose: new Map() })

const add = (byDay: Map<number, number>, day: number, count: number) => void byDay.set(day, (byDay.get(day) ?? 0) + count)

/**
 * Counts a unit when it is silent: in the curve, without a failure, not parted with, and its next check-in was due more than 30 days before the
 * as-of day.
 *
 * @param outcome what `observationOf` makes of `life`
 */
export function countSilent(counts: SilentCounts, life: LifeHistory, outcome: LifeOutcome, asOf: Day): void {
  if (outcome.kind !== 'observed' || outcome.cause !== null || partedOn(life, asOf) !== null) return
  const toClose = daysBetween(life.installedOn, asOf)
  if (toClose - nextDueDay(outcome.time) <= silentAfterDays) return
  add(counts.lastWords, outcome.time, 1)
  add(counts.toClose, toClose, 1)
}

export function addSilent(counts: SilentCounts, more: SilentCounts): void {
  for (const [day, count] of more.lastWords) add(counts.lastWords, day, count)
  for (const [day, count] of more.toClose) add(counts.toClose, day, count)
}

/**
 * The curves there would be had each silent unit failed the day after its last word, by a cause that counts, or still run on the as-of day. Failures
 * on the day they were found.
 */
export function silentFigures(
  days: DayCounts,
  totals: GroupTotals,
  { lastWords, toClose }: SilentCounts,
  counted: readonly Cause[],
  year: number
): SilentFigures {
  const silent = [...lastWords.values()].reduce((a, b) => a + b, 0)
  const gone = moved(days, 'left', lastWords, -1)
  const failing = new Map([...lastWords].map(([day, count]) => [day + 1, count]))
  const curveOf = (counts: DayCounts) => kaplanMeier(tallyOfCounts(columnsOfCounts([counts])[0]!, counted))
  const worst = curveOf(moved(gone, `failed:${counted[0]!}`, failing, 1))
  const best = curveOf(moved(gone, 'left', toClose, 1))
  const reported = curveOf(days)
  const steps = ({ time, survival, events }: typeof worst) =>
    Array.from(time, (day, i) => ({ time: day, survival: survival[i]! })).filter(
      (_, i) => events[i]! > 0 || i === time.length - 1
    )
  return {
    silent,
    heardOf: totals.unfailed - silent,
    atOneYear: {
      worst: survivalAt(worst, year).survival,
      reported: survivalAt(reported, year).survival,
      best: survivalAt(best, year).survival
    },
    worst: steps(worst),
    best: steps(best)
  }
}

/** Day counts with some added to, or taken from, one counter; the others are shared. */
function moved(days: DayCounts, counter: Counter, by: ReadonlyMap<number, number>, sign: 1 | -1): DayCounts {
  const changed = new Map(days.get(counter))
  for (const [day, count] of by) add(changed, day, sign * count)
  return new Map(days).set(counter, changed)
}
