import { causes, exclusionKinds, type Cause, type ExclusionKind } from '../reports/report-words'

/** What is counted by day since installation; see `DayCounts`. */
export type Counter = 'entered' | 'left' | `failed:${Cause}` | `ran:${Cause}`

/** In the order in which a stored block has them: it may only grow at its end. */
export const counters: readonly Counter[] = [
  'entered',
  'left',
  ...causes.map((cause): Counter => `failed:${cause}`),
  ...causes.map((cause): Counter => `ran:${cause}`)
]

/**
 * What a Kaplan-Meier curve, incidences by cause and a log-rank test need of a group: on each day since installation how many units
 * `entered` (in-time ones on day 0), `left` (last heard of running, or parted), or `failed` by a cause, on the day it was found at the latest. `ran`
 * counts every failure once more on the last day on which its unit is known to have run (the day it was found, where it is known to within 14 days): there
 * the unit leaves a curve of another cause. Days and counters without any are absent.
 */
export type DayCounts = Map<Counter, Map<number, number>>

/**
 * Units with the same observation, counted: watched from `entry` on, failed by `cause` in (lower, upper], exactly at `lower` where both are equal;
 * `upper` and `cause` are null for a unit last heard of on day `lower`. Failures known to within 14 days are exact, at the upper end; `lower` is
 * never before `entry`.
 */
export type LifeCount = { entry: number; lower: number; upper: number | null; cause: Cause | null; count: number }

export const lifeKey = ({ entry, lower, upper, cause }: Omit<LifeCount, 'count'>): string =>
  `${entry},${lower},${upper ?? ''},${cause ?? ''}`

/** Joint observations by `lifeKey`. */
export type LifeCounts = Map<string, LifeCount>

/**
 * What is counted beside the curve. `fitted`: reports that count, whether or not they are in the curve; of these `inCurve`, `notFollowed` and
 * `apart` by cause (failed before their late report). `wide`: failures in the curve known less closely than to 14 days. `promptly`: filed in time; of
 * these `worked` at first power. `watchedDays`: unit-days in the curve, of which `watchedDaysOfFailed` are those of units with a failure;
 * `unfailed`: units in the curve without a failure, and `watchBegan` the sum of the day numbers (`lib/dates`) on which their watch began: with the as-of day it
 * gives the days there could have been.
 */
export type TotalKey =
  | 'fitted'
  | 'inCurve'
  | 'enteredLate'
  | 'notFollowed'
  | 'promptly'
  | 'worked'
  | 'watchedDays'
  | 'watchedDaysOfFailed'
  | 'unfailed'
  | 'watchBegan'
  | `apart:${Cause}`
  | `wide:${Cause}`
  | `excluded:${ExclusionKind}`

export const totalKeys: readonly TotalKey[] = [
  'fitted',
  'inCurve',
  'enteredLate',
  'notFollowed',
  'promptly',
  'worked',
  'watchedDays',
  'watchedDaysOfFailed',
  'unfailed',
  'watchBegan',
  ...causes.map((cause): TotalKey => `apart:${cause}`),
  ...causes.map((cause): TotalKey => `wide:${cause}`),
  ...exclusionKinds.map((kind): TotalKey => `excluded:${kind}`)
]

export type GroupTotals = Record<TotalKey, number>

/** Everything that a group's figures are computed from. `lives` is null where nothing needs joint observations. */
export type GroupCounts = { days: DayCounts; totals: GroupTotals; lives: LifeCounts | null }

export const noTotals = (): GroupTotals => Object.fromEntries(totalKeys.map((key) => [key, 0])) as GroupTotals

export const noCounts = (): GroupCounts => ({ days: new Map(), totals: noTotals(), lives: new Map() })

/** Adds `count` units to a counter's day; a day that comes to 0 is taken out. */
export function addDay(days: DayCounts, counter: Counter, day: number, count: number): void {
  let byDay = days.get(counter)
  if (byDay === undefined) days.set(counter, (byDay = new Map()))
  const sum = (byDay.get(day) ?? 0) + count
  if (sum === 0) byDay.delete(day)
  else byDay.set(day, sum)
}

/** Adds the counts of many days to a counter, as `addDay` does of one. */
function addDays(days: DayCounts, counter: Counter, more: ReadonlyMap<number, number>): void {
  const byDay = days.get(counter)
  if (byDay === undefined) {
    days.set(counter, new Map(more))
    return
  }
  for (const [day, count] of more) {
    const sum = (byDay.get(day) ?? 0) + count
    if (sum === 0) byDay.delete(day)
    else byDay.set(day, sum)
  }
}

/** Adds units with one observation; an observation that comes to 0 is taken out. */
export function addLife(lives: LifeCounts, life: LifeCount): void {
  const key = lifeKey(life)
  const count = (lives.get(key)?.count ?? 0) + life.count
  if (count === 0) lives.delete(key)
  else lives.set(key, { ...life, count })
}

/** Adds all of `more` to `counts`, in place. The sum has lives only where both have. */
export function addCounts(counts: GroupCounts, more: GroupCounts): void {
  for (const [counter, byDay] of more.days) addDays(counts.days, counter, byDay)
  for (const key of totalKeys) counts.totals[key] += more.totals[key]
  if (counts.lives === null || more.lives === null) counts.lives = null
  else for (const life of more.lives.values()) addLife(counts.lives, life)
}
