import type { FieldError } from '~/lib/domain-error'

/**
 * One unit's follow-up. Times count from the unit's origin (its installation) in one unit of time, >= 0.
 *
 * `entry` is the time from which it was watched (delayed entry; 0 = from the start): it is at risk at t when entry < t <= time.
 * `event` is 0 when it was last seen working at `time` (right-censored), 1 for a failure, or the failure's cause by name.
 * `weight` is a whole number of units that share the row.
 */
export type TimedObservation = { entry?: number; time: number; event: number | string; weight?: number }

/**
 * A failure somewhere in (lower, upper]; `upper` null: not failed by `lower` (right-censored); both equal: exactly then. `event` may name the
 * failure's cause (1 when left out).
 */
export type IntervalObservation = {
  entry?: number
  lower: number
  upper: number | null
  event?: number | string
  weight?: number
}

export type Observation = TimedObservation | IntervalObservation

/** Times nearer than this, absolutely or relative to the mean distinct time, are one: the square root of the double precision. */
export const timeTolerance = 1.490116119384766e-8

export const isInterval = (observation: Observation): observation is IntervalObservation => 'lower' in observation

/** `invalid`: a value that is wrong by itself; `impossible`: values that cannot be true together. */
export type ObservationError = FieldError & { kind: 'invalid' | 'impossible' }

/**
 * What is wrong with observations, in the order of their index, at most about `limit` messages; empty when they can be used.
 * Paths are `observations.<index>.<field>`. Refused: times that are no finite number or negative, an exit that does not lie after the
 * entry (time 0 without delayed entry is allowed: failed or lost on day 0), an interval that ends before it begins, weights that are no positive whole number,
 * causes that are empty or read like the numbers 0 and 1, and a mixture of 1 and causes by name.
 */
export function checkObservations(observations: readonly Observation[], limit = 100): ObservationError[] {
  const errors: ObservationError[] = []
  let style: 'number' | 'name' | null = null
  for (let i = 0; i < observations.length && errors.length < limit; i++) {
    const row = observations[i]!
    const say = (field: string, message: string, kind: ObservationError['kind'] = 'invalid') =>
      void errors.push({ path: `observations.${i}.${field}`, message, kind })
    const entry = row.entry ?? 0
    if (!isTime(entry)) say('entry', 'The entry must be a number, 0 or above.')
    if (row.weight !== undefined && !(Number.isSafeInteger(row.weight) && row.weight > 0))
      say('weight', 'The weight must be a whole number above 0.')
    const exit = isInterval(row) ? checkInterval(row, say) : checkTime(row.time, say)
    if (exit !== null && isTime(entry) && entry > 0 && !(exit.value - entry > timeTolerance))
      say(
        exit.field,
        `This must lie after the entry (${entry}): a unit that enters and leaves at the same time was never at risk.`,
        'impossible'
      )
    const event = isInterval(row) ? (row.event ?? 1) : row.event
    if (typeof event === 'string') {
      if (event.trim() === '') say('event', 'The cause has no name; write 0 for a unit that was still working.')
      else if (event === '0' || event === '1') say('event', `Write ${event} as a number, or name the cause in words.`)
      else if (style === 'number')
        say('event', 'Earlier rows have 1 for a failure: use 1 throughout or name the cause throughout.')
      else style = 'name'
    } else if (event === 1) {
      if (isInterval(row) && row.event === undefined) continue
      if (style === 'name') say('event', 'Earlier rows name the cause: name it here too, or use 1 throughout.')
      else style = 'number'
    } else if (event !== 0) say('event', 'The event must be 0 (still working), 1 (failed) or the name of a cause.')
    else if (isInterval(row)) say('event', 'An interval holds a failure: leave the event out or name its cause.', 'impossible')
  }
  return errors
}

type Say = (field: string, message: string, kind?: ObservationError['kind']) => void
type Exit = { field: string; value: number } | null

const isTime = (value: unknown): value is number => typeof value === 'number' && Number.isFinite(value) && value >= 0

function checkTime(time: unknown, say: Say): Exit {
  if (isTime(time)) return { field: 'time', value: time }
  say('time', 'The time must be a number, 0 or above.')
  return null
}

function checkInterval({ lower, upper }: IntervalObservation, say: Say): Exit {
  if (!isTime(lower)) say('lower', 'The lower end must be a number, 0 or above.')
  else if (upper === null) return { field: 'lower', value: lower }
  else if (!isTime(upper)) say('upper', 'The upper end must be a number, 0 or above, or null when no failure was seen.')
  else if (upper < lower) say('upper', 'The upper end lies before the lower end.', 'impossible')
  else return { field: 'upper', value: upper }
  return null
}
