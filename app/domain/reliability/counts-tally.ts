import { causes, type Cause } from '../reports/report-words'
import type { Tally } from '../survival/tally'
import type { Counter, DayCounts } from './group-counts'

/**
 * The counts of a curve on whole days: failures of the counted causes on the day they were found, those of any other cause leaving on the last
 * day on which their unit is known to have run. Linear in the days.
 */
export function tallyOfCounts(days: DayCounts, counted: readonly Cause[]): Tally {
  const others = causes.filter((cause) => !counted.includes(cause))
  return tallyFrom(
    days,
    counted.map((cause): Counter => `failed:${cause}`),
    ['left', ...others.map((cause): Counter => `ran:${cause}`)]
  )
}

/** The counts of all causes together, split by those that occur, for incidences. */
export function competingTally(days: DayCounts): Tally {
  const occurring = causes.filter((cause) => (days.get(`failed:${cause}`)?.size ?? 0) > 0)
  const tally = tallyOfCounts(days, causes)
  const failedBy = occurring.map((cause) => columnOf(tally.time, [days.get(`failed:${cause}`)]))
  return { ...tally, causes: occurring, failedBy }
}

type ByDay = ReadonlyMap<number, number> | undefined

function tallyFrom(days: DayCounts, failing: readonly Counter[], leaving: readonly Counter[]): Tally {
  const entered = days.get('entered')
  const [failed, censored] = [failing, leaving].map((counters) => counters.map((counter) => days.get(counter)))
  const distinct = new Set<number>()
  for (const byDay of [entered, ...failed!, ...censored!]) for (const day of byDay?.keys() ?? []) distinct.add(day)
  const time = Float64Array.from(distinct).sort()
  return {
    time,
    entered: columnOf(time, [entered]),
    failed: columnOf(time, failed!),
    censored: columnOf(time, censored!),
    causes: [],
    failedBy: []
  }
}

const columnOf = (time: Float64Array, counts: readonly ByDay[]): Float64Array =>
  time.map((day) => counts.reduce((sum, byDay) => sum + (byDay?.get(day) ?? 0), 0))
