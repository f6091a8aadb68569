import type { FieldError } from '~/lib/domain-error'

/**
 * One unit's follow-up. Times count from the unit's origin (its installation) in one unit of time, >= 0.
 *
 * `entry` is the time from which it was watched (delayed entry; 0 = from the start): it is at risk at t when entry < t <= time.
 * `event` is 0 when it was last seen working at `time` (right-censored), 1 for a failure, or the failure's cause by name.
 * `weight` is a whole number of units that share the row.
 */
export type TimedObservation = { entry?: number; time: number; event: number | string; weight?: number }

/** A failure somewhere in (lower, upper]; `upper` null: not failed by `lower` (right-censored); both equal: exactly then. */
export type IntervalObservation = { entry?: number; lower: number; upper: number | null; weight?: number }

export type Observation = TimedObservation | IntervalObservation

/** Times nearer than this, absolutely or relative to the mean distinct time, are one: the square root of the double precision. */
export const timeTolerance = 1.490116119384766e-8

export const isInterval = (observation: Observation): observation is IntervalObservation => 'lower' in observation

/**
 * What is wrong with observations, in the order of their index, at most `limit` messages; empty when they can be used.
 * Paths are `observations.<index>.<field>`. Refused: times that are no finite number or negative, an exit that does not lie after the
 * entry (time 0 without delayed entry is allowed: failed or lost on day 0), an interval that ends before it begins, weights that are no positive whole number,
 * causes that are empty or read like the numbers 0 and 1, and a mixture of 1 and causes by name.
 */
export function checkObservations(observations: readonly Observation[], limit = 100): FieldError[] {
  const errors: FieldError[] = []
  let style: 'number' | 'name' | null = null
  for (let i = 0; i < observations.length && errors.length < limit; i++) {
    const row = observations[i]!
    const say = (field: string, message: string) => void errors.push({ path: `observations.${i}.${field}`, message })
    const entry = row.entry ?? 0
    if (!isTime(entry)) say('entry', 'The entry must be a number, 0 or above.')
    if (row.weight !== undefined && !(Number.isSafeInteger(row.weight) && row.weight > 0))
      say('weight', 'The weight must be a whole number above 0.')
    if (isInterval(row)) {
      if (!isTime(row.lower)) say('lower', 'The lower end must be a number, 0 or above.')
      else if (row.upper !== null && !isTime(row.upper))
        say('upper', 'The upper end must be a number, 0 or above, or null when no failure was seen.')
      else if (row.upper !== null && row.upper < row.lower) say('upper', 'The upper end lies before the lower end.')
      else if (isTime(entry) && entry > 0 && !isAfter(row.upper ?? row.lower, entry))
        say(row.upper === null ? 'lower' : 'upper', afterEntry(entry))
      continue
    }
    if (!isTime(row.time)) say('time', 'The time must be a number, 0 or above.')
    else if (isTime(entry) && entry > 0 && !isAfter(row.time, entry)) say('time', afterEntry(entry))
    if (typeof row.event === 'string') {
      if (row.event.trim() === '') say('event', 'The cause has no name; write 0 for a unit that was still working.')
      else if (row.event === '0' || row.event === '1') say('event', `Write ${row.event} as a number, or name the cause in words.`)
      else if (style === 'number')
        say('event', 'Earlier rows have 1 for a failure: use 1 throughout or name the cause throughout.')
      else style = 'name'
    } else if (row.event === 1) {
      if (style === 'name') say('event', 'Earlier rows name the cause: name it here too, or use 1 throughout.')
      else style = 'number'
    } else if (row.event !== 0) say('event', 'The event must be 0 (still working), 1 (failed) or the name of a cause.')
  }
  return errors
}

const isTime = (value: unknown): value is number => typeof value === 'number' && Number.isFinite(value) && value >= 0
const isAfter = (time: number, entry: number) => time - entry > timeTolerance
const afterEntry = (entry: number) =>
  `This must lie after the entry (${entry}): a unit that enters and leaves at the same time was never at risk.`
