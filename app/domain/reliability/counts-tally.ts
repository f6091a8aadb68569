import { causes, type Cause } from '../reports/report-words'
import type { Tally } from '../survival/tally'
import type { Counter, DayCounts } from './group-counts'

/**
 * Day counts as columns over ascending days, one for each counter that has any. Of groups that are summed and compared all columns are over the same
 * days, so that thousands of days cost a few additions each.
 */
export type CountColumns = { time: Float64Array; columns: ReadonlyMap<Counter, Float64Array> }

/** The day counts of several groups as columns over the days of all of them. */
export function columnsOfCounts(groups: readonly DayCounts[]): CountColumns[] {
  const { time, indexOf } = gridOf(groups)
  return groups.map((days) => {
    const columns = new Map<Counter, Float64Array>()
    for (const [counter, byDay] of days) {
      if (byDay.size === 0) continue
      const column = new Float64Array(time.length)
      for (const [day, count] of byDay) column[indexOf(day)] = count
      columns.set(counter, column)
    }
    return { time, columns }
  })
}

/** The sum of groups over the same days. */
export function sumOfColumns(groups: readonly CountColumns[]): CountColumns {
  const columns = new Map<Counter, Float64Array>()
  for (const group of groups)
    for (const [counter, column] of group.columns) {
      const sum = columns.get(counter)
      if (sum === undefined) columns.set(counter, column.slice())
      else for (let j = 0; j < sum.length; j++) sum[j]! += column[j]!
    }
  return { time: groups[0]?.time ?? new Float64Array(), columns }
}

/** Counts of a group less those of a part of it, over the same days. */
export function withoutPart(group: CountColumns, part: CountColumns): CountColumns {
  const less = ([counter, column]: [Counter, Float64Array]): [Counter, Float64Array] => {
    const own = part.columns.get(counter)
    return [counter, own === undefined ? column : column.map((count, j) => count - own[j]!)]
  }
  return { time: group.time, columns: new Map([...group.columns].map(less)) }
}

/**
 * The counts of a curve on whole days: failures of the counted causes on the day they were found, those of any other cause leaving on the last
 * day on which their unit is known to have run.
 */
export function tallyOfCounts(counts: CountColumns, counted: readonly Cause[]): Tally {
  const others = causes.filter((cause) => !counted.includes(cause))
  return {
    time: counts.time,
    entered: total(counts, ['entered']),
    failed: total(
      counts,
      counted.map((cause): Counter => `failed:${cause}`)
    ),
    censored: total(counts, ['left', ...others.map((cause): Counter => `ran:${cause}`)]),
    causes: [],
    failedBy: []
  }
}

/** The counts of all causes together, split by those that occur, for incidences. */
export function competingTally(counts: CountColumns): Tally {
  const occurring = causes.filter((cause) => counts.columns.get(`failed:${cause}`)?.some((n) => n > 0))
  const failedBy = occurring.map((cause) => counts.columns.get(`failed:${cause}`)!)
  return { ...tallyOfCounts(counts, causes), causes: occurring, failedBy }
}

function total({ time, columns }: CountColumns, counters: readonly Counter[]): Float64Array {
  const sum = new Float64Array(time.length)
  for (const counter of counters) {
    const column = columns.get(counter)
    if (column !== undefined) for (let j = 0; j < sum.length; j++) sum[j]! += column[j]!
  }
  return sum
}

/** The days on which anything is counted, ascending, and the place of each. */
function gridOf(groups: readonly DayCounts[]): { time: Float64Array; indexOf: (day: number) => number } {
  let [first, last] = [Infinity, -Infinity]
  const eachDay = (tell: (day: number) => void) => {
    for (const days of groups) for (const byDay of days.values()) for (const day of byDay.keys()) tell(day)
  }
  eachDay((day) => {
    if (day < first) first = day
    if (day > last) last = day
  })
  if (last < first) return { time: new Float64Array(), indexOf: () => -1 }
  const place = new Int32Array(last - first + 1)
  eachDay((day) => (place[day - first] = 1))
  const time: number[] = []
  place.forEach((isIn, i) => {
    if (isIn === 1) place[i] = time.push(first + i) - 1
  })
  return { time: Float64Array.from(time), indexOf: (day) => place[day - first]! }
}
