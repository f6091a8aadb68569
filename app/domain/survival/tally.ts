import { distinctSorted, lastAtOrBefore, type Columns } from './columns'

/**
 * Counts on an ascending grid of distinct times, all a risk set needs: at `time[j]`, `failed[j]` units failed, `censored[j]` were last seen
 * working, and `entered[j]` came under observation (at risk after `time[j]`; those of time 0 are at risk at 0 too).
 * `failedBy[k]` splits `failed` by `causes[k]`; empty without causes. Day counts kept in a table are this very shape.
 */
export type Tally = {
  time: Float64Array
  entered: Float64Array
  failed: Float64Array
  censored: Float64Array
  causes: string[]
  failedBy: Float64Array[]
}

/** Counts columns. One sort of the distinct times, or none at all when they are whole numbers of moderate size. */
export function tallyOf(columns: Columns): Tally {
  const { time, event, entry, weight, causes } = columns
  const { grid, indexOf } = gridOf(time, entry)
  const entered = new Float64Array(grid.length)
  const failed = new Float64Array(grid.length)
  const censored = new Float64Array(grid.length)
  const failedBy = causes.map(() => new Float64Array(grid.length))
  for (let i = 0; i < time.length; i++) {
    const w = weight === null ? 1 : weight[i]!
    const j = indexOf(time[i]!)
    const kind = event[i]!
    entered[entry === null ? 0 : indexOf(entry[i]!)]! += w
    if (kind === 0) censored[j]! += w
    else {
      failed[j]! += w
      if (causes.length > 0) failedBy[kind - 1]![j]! += w
    }
  }
  return { time: grid, entered, failed, censored, causes, failedBy }
}

/** The tally in which only failures by one cause are failures and those by any other leave as censored (cause-specific). */
export function tallyForCause(tally: Tally, cause: string): Tally {
  const k = tally.causes.indexOf(cause)
  const failed = k < 0 ? new Float64Array(tally.time.length) : tally.failedBy[k]!
  const censored = tally.censored.map((c, j) => c + tally.failed[j]! - failed[j]!)
  return { ...tally, failed, censored, causes: [], failedBy: [] }
}

/** How many units are at risk at t: entered before t (or at 0) and neither failed nor left before t. */
export function atRiskAt(tally: Tally, t: number): number {
  let n = 0
  for (let j = 0; j < tally.time.length; j++) {
    if (tally.time[j]! < t) n += tally.entered[j]! - tally.failed[j]! - tally.censored[j]!
    else {
      if (tally.time[j] === 0) n += tally.entered[j]!
      break
    }
  }
  return n
}

/** Units that entered, over all times. */
export const unitsIn = (tally: Tally): number => tally.entered.reduce((sum, n) => sum + n, 0)

/** Failures over all times. */
export const failuresIn = (tally: Tally): number => tally.failed.reduce((sum, n) => sum + n, 0)

type Grid = { grid: Float64Array; indexOf: (value: number) => number }

function gridOf(time: Float64Array, entry: Float64Array | null): Grid {
  return wholeGrid(time, entry) ?? sortedGrid(time, entry)
}

/** Whole numbers no larger than a few times the row count are ranked through a table: linear in the rows. */
function wholeGrid(time: Float64Array, entry: Float64Array | null): Grid | null {
  const bound = 4 * time.length + 65_536
  let max = 0
  for (const values of entry === null ? [time] : [time, entry])
    for (let i = 0; i < values.length; i++) {
      const value = values[i]!
      if (!(value < bound) || Math.floor(value) !== value) return null
      if (value > max) max = value
    }
  const rank = new Int32Array(max + 1)
  if (entry === null) rank[0] = 1
  else for (let i = 0; i < entry.length; i++) rank[entry[i]!] = 1
  for (let i = 0; i < time.length; i++) rank[time[i]!] = 1
  let m = 0
  for (let v = 0; v <= max; v++) m += rank[v]!
  const grid = new Float64Array(m)
  let j = 0
  for (let v = 0; v <= max; v++)
    if (rank[v] === 1) {
      grid[j] = v
      rank[v] = j++
    }
  return { grid, indexOf: (value) => rank[value]! }
}

function sortedGrid(time: Float64Array, entry: Float64Array | null): Grid {
  const all = new Float64Array(time.length + (entry === null ? 1 : entry.length))
  all.set(time)
  if (entry !== null) all.set(entry, time.length)
  const grid = distinctSorted(all)
  return { grid, indexOf: lookUp(grid) }
}

/** Position of a value of an ascending grid: a table over equal stretches of its range leaves few elements to search. */
function lookUp(grid: Float64Array): (value: number) => number {
  const size = grid.length
  const low = grid[0] ?? 0
  const perStretch = size / ((grid[size - 1] ?? 0) - low)
  if (size < 64 || !Number.isFinite(perStretch)) return (value) => lastAtOrBefore(grid, value)
  const stretchOf = (value: number) => Math.min(size - 1, Math.floor((value - low) * perStretch))
  const first = new Int32Array(size + 1).fill(size)
  for (let j = size - 1; j >= 0; j--) first[stretchOf(grid[j]!)] = j
  for (let b = size - 1; b >= 0; b--) first[b] = Math.min(first[b]!, first[b + 1]!)
  return (value) => {
    const stretch = stretchOf(value)
    let from = first[stretch]!
    let to = first[stretch + 1]!
    while (to - from > 1) {
      const middle = (from + to) >>> 1
      if (grid[middle]! <= value) from = middle
      else to = middle
    }
    return from
  }
}
