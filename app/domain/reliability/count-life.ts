import { dayNumber } from '~/lib/dates'
import { observationOf, type LifeHistory, type LifeOutcome, type ObservationFilters } from '../reports/observations'
import { addDay, addLife, noCounts, type GroupCounts, type LifeCount } from './group-counts'

/** Days of one cell of the coarse grid on which the joint observations of large groups are kept: what METHODS lets count as exact. */
export const coarseGrain = 14

/**
 * Adds one unit's part to a group's counts, or takes it out again.
 *
 * @param outcome what `observationOf` makes of `life`
 * @param times 1 to add, -1 to take out
 */
export function countOutcome(counts: GroupCounts, life: LifeHistory, outcome: LifeOutcome, times: 1 | -1): void {
  const { totals } = counts
  if (outcome.kind === 'not-yet' || outcome.kind === 'filtered') return
  if (outcome.kind === 'excluded') {
    totals[`excluded:${outcome.exclusion}`] += times
    return
  }
  totals.fitted += times
  if (outcome.kind === 'not-followed') {
    totals.notFollowed += times
    return
  }
  if (outcome.kind === 'failed-before-registration') {
    totals[`apart:${outcome.cause}`] += times
    return
  }
  const { entry, time, cause, interval } = outcome
  totals.inCurve += times
  totals.watchedDays += times * (time - entry)
  if (entry > 0) totals.enteredLate += times
  if (outcome.isFirstPowerCounted) totals.promptly += times
  if (outcome.isFirstPowerCounted && outcome.worksAtFirstPower) totals.worked += times
  addDay(counts.days, 'entered', entry, times)
  if (cause === null) {
    totals.unfailed += times
    totals.watchBegan += times * (dayNumber(life.installedOn) + entry)
    addDay(counts.days, 'left', time, times)
    if (counts.lives) addLife(counts.lives, { entry, lower: time, upper: null, cause, count: times })
    return
  }
  const lower = interval === null ? time : Math.max(interval.lower, entry)
  totals.watchedDaysOfFailed += times * (time - entry)
  if (interval !== null) totals[`wide:${cause}`] += times
  addDay(counts.days, `failed:${cause}`, time, times)
  addDay(counts.days, `ran:${cause}`, lower, times)
  if (counts.lives) addLife(counts.lives, { entry, lower, upper: time, cause, count: times })
}

/** The counts of a group from its life histories, as known on a day. */
export function countLives(lives: Iterable<LifeHistory>, asOf: string, filters: ObservationFilters): GroupCounts {
  const counts = noCounts()
  for (const life of lives) countOutcome(counts, life, observationOf(life, asOf, filters), 1)
  return counts
}

/**
 * A joint observation on the coarse grid, rounded so that nothing is claimed that was not seen: a unit enters at the next line, leaves at the
 * line before, and a failure lies at the next line or between the lines around its interval. Null when that leaves it no time at risk.
 */
export function coarseLife(life: LifeCount): LifeCount | null {
  const up = (day: number) => Math.ceil(day / coarseGrain) * coarseGrain
  const down = (day: number) => Math.floor(day / coarseGrain) * coarseGrain
  const entry = up(life.entry)
  if (life.upper === null) {
    const lower = down(life.lower)
    return entry > 0 && lower <= entry ? null : { ...life, entry, lower }
  }
  const upper = up(life.upper)
  if (entry > 0 && upper <= entry) return null
  const lower = life.lower === life.upper ? upper : Math.max(entry, down(life.lower))
  return { ...life, entry, lower, upper }
}
