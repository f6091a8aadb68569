import type { TimedObservation } from './observation'
import { daysBetween, type Day } from '~/lib/dates'

/** Days of grace after a check-in was due before its unit is called silent. */
export const silentAfterDays = 30

/** Whether a unit without a failure is silent: no statement since, and its next check-in was due more than 30 days before the as-of date. */
export const isSilent = (nextDueOn: Day, asOfOn: Day): boolean => daysBetween(nextDueOn, asOfOn) > silentAfterDays

/** A unit's observation, whether it is silent, and the as-of date on its own clock. */
export type SilentUnit = { observation: TimedObservation; isSilent: boolean; toClose: number }

/**
 * What the silent units could hide: in `worst` each of them failed `delay` after its last statement (the day after), in `best` each still ran at the
 * as-of date. Units that failed, or that are not silent, are the same in both. `cause` names the supposed failures where the others name theirs.
 *
 * A `delay` of 0 ties the supposed failures with that day's events; a delay shorter than any two times lie apart puts them just after.
 *
 * @throws RangeError when a silent unit has failed or was heard of after the as-of date
 */
export function silentBounds(
  units: readonly SilentUnit[],
  cause: number | string = 1,
  delay = 1
): { worst: TimedObservation[]; best: TimedObservation[] } {
  const check = ({ observation, isSilent, toClose }: SilentUnit, i: number) => {
    if (isSilent && observation.event !== 0) throw new RangeError(`silentBounds: unit ${i} has failed and cannot be silent`)
    if (observation.time > toClose) throw new RangeError(`silentBounds: unit ${i} was heard of after the as-of date`)
  }
  units.forEach(check)
  return {
    worst: units.map(({ observation, isSilent }) =>
      isSilent ? { ...observation, time: observation.time + delay, event: cause } : observation
    ),
    best: units.map(({ observation, isSilent, toClose }) => (isSilent ? { ...observation, time: toClose } : observation))
  }
}
