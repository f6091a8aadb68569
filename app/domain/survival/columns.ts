import { timeTolerance, type TimedObservation } from './observation'

/**
 * Right-censored observations as columns of equal length n, for speed. `event` is 0 for censored, else 1 + the index into `causes`;
 * `causes` is empty when failures carry no cause (then `event` is 0 or 1). `entry` and `weight` are null when all are 0 and 1.
 */
export type Columns = {
  time: Float64Array
  event: Uint16Array
  entry: Float64Array | null
  weight: Float64Array | null
  causes: string[]
}

/**
 * Turns checked observations into columns; near-equal times (see `mergeNearTimes`) become one.
 *
 * @param observations as `checkObservations` accepts them
 * @param causes the causes' names and order; those found in the data, sorted, when left out
 * @throws RangeError for a cause that is not among `causes`
 */
export function columnsOf(observations: readonly TimedObservation[], causes = causesOf(observations)): Columns {
  const n = observations.length
  const time = new Float64Array(n)
  const event = new Uint16Array(n)
  const entry = new Float64Array(n)
  const weight = new Float64Array(n).fill(1)
  const numberOf = new Map(causes.map((cause, k) => [cause, k + 1]))
  let isDelayed = false
  let isWeighted = false
  for (let i = 0; i < n; i++) {
    const row = observations[i]!
    time[i] = row.time
    if (typeof row.event === 'number') event[i] = row.event
    else {
      const k = numberOf.get(row.event)
      if (k === undefined) throw new RangeError(`unknown cause ${row.event}`)
      event[i] = k
    }
    if (row.entry) {
      entry[i] = row.entry
      isDelayed = true
    }
    if (row.weight !== undefined && row.weight !== 1) {
      weight[i] = row.weight
      isWeighted = true
    }
  }
  return mergeNearTimes({ time, event, entry: isDelayed ? entry : null, weight: isWeighted ? weight : null, causes })
}

/** The causes' names that occur, sorted by code unit. */
export function causesOf(observations: readonly { event?: number | string }[]): string[] {
  const names = new Set<string>()
  for (const { event } of observations) if (typeof event === 'string') names.add(event)
  return [...names].sort()
}

/** Makes times and entries one that differ by rounding only, see `nearTimes`. */
export function mergeNearTimes(columns: Columns): Columns {
  const { time, entry } = columns
  const snap = nearTimes(entry === null ? [time] : [time, entry])
  if (snap === null) return columns
  return { ...columns, time: time.map(snap), entry: entry === null ? null : entry.map(snap) }
}

/**
 * How to make times one that differ by rounding only: of the sorted distinct finite values, neighbours nearer than 1.49e-8, absolutely or
 * relative to the mean distinct value, take the smallest value of their run. Null when nothing has to be merged (whole numbers never do).
 * Source: the "timefix" rule of R's survival package (vignette "Tied times").
 */
export function nearTimes(columns: readonly Float64Array[]): ((value: number) => number) | null {
  if (columns.every(areWhole)) return null
  const all = new Float64Array(columns.reduce((sum, { length }) => sum + length, 0))
  let n = 0
  for (const column of columns) for (let i = 0; i < column.length; i++) if (Number.isFinite(column[i]!)) all[n++] = column[i]!
  const distinct = distinctSorted(all.subarray(0, n))
  let mean = 0
  for (let i = 0; i < distinct.length; i++) mean += Math.abs(distinct[i]!) / distinct.length
  const near = timeTolerance * Math.max(1, mean)
  const starts = distinct.filter((value, i) => i === 0 || value - distinct[i - 1]! > near)
  if (starts.length === distinct.length) return null
  return (value) => (Number.isFinite(value) ? starts[lastAtOrBefore(starts, value)]! : value)
}

/** The distinct values of an array in ascending order; sorts the array itself. */
export function distinctSorted(values: Float64Array): Float64Array {
  values.sort()
  let size = 0
  for (let i = 0; i < values.length; i++) if (i === 0 || values[i] !== values[size - 1]) values[size++] = values[i]!
  return values.subarray(0, size)
}

/** The rows of each group, in their order. `group[i]` is the index of row i's group, below `count`. */
export function splitColumns(columns: Columns, group: ArrayLike<number>, count: number): Columns[] {
  const sizes = new Uint32Array(count)
  for (let i = 0; i < group.length; i++) sizes[group[i]!]!++
  const parts = Array.from(sizes, (size): Columns => ({
    time: new Float64Array(size),
    event: new Uint16Array(size),
    entry: columns.entry && new Float64Array(size),
    weight: columns.weight && new Float64Array(size),
    causes: columns.causes
  }))
  const next = new Uint32Array(count)
  for (let i = 0; i < group.length; i++) {
    const part = parts[group[i]!]!
    const at = next[group[i]!]!++
    part.time[at] = columns.time[i]!
    part.event[at] = columns.event[i]!
    if (part.entry) part.entry[at] = columns.entry![i]!
    if (part.weight) part.weight[at] = columns.weight![i]!
  }
  return parts
}

/** Index of the last element of an ascending array that is <= value; -1 when there is none. */
export function lastAtOrBefore(sorted: ArrayLike<number>, value: number): number {
  let low = 0
  let high = sorted.length
  while (low < high) {
    const middle = (low + high) >>> 1
    if (sorted[middle]! <= value) low = middle + 1
    else high = middle
  }
  return low - 1
}

// Above this bound whole numbers could fall within the relative tolerance of each other.
function areWhole(values: Float64Array): boolean {
  for (let i = 0; i < values.length; i++) {
    const value = values[i]!
    if (value !== Infinity && (!(value < 5e7) || Math.floor(value) !== value)) return false
  }
  return true
}
