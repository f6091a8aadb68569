/** Calendar days are ISO 8601 strings (`2026-12-01`) without a zone; instants are UTC ISO 8601 strings. */
export type Day = string
export type Instant = string

const dayPattern = /^\d{4}-\d{2}-\d{2}$/
const msPerDay = 86_400_000

/** Whether the text is a day that exists in the Gregorian calendar (2023-02-29 is none). */
export function isDay(text: string): text is Day {
  if (!dayPattern.test(text)) return false
  const at = Date.parse(`${text}T00:00:00Z`)
  return !Number.isNaN(at) && new Date(at).toISOString().slice(0, 10) === text
}

/** Whole days since 1970-01-01. */
export const dayNumber = (day: Day): number => Date.parse(`${day}T00:00:00Z`) / msPerDay

/** The day with the given number, the inverse of `dayNumber`. */
export const dayFromNumber = (n: number): Day => new Date(n * msPerDay).toISOString().slice(0, 10)

/** Whole days from `from` to `to`; negative when `to` is earlier. */
export const daysBetween = (from: Day, to: Day): number => dayNumber(to) - dayNumber(from)

export const addDays = (day: Day, n: number): Day => dayFromNumber(dayNumber(day) + n)

/** The UTC day of an instant. */
export const dayOf = (at: Instant | Date): Day => (typeof at === 'string' ? at : at.toISOString()).slice(0, 10)
