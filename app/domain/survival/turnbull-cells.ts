import { distinctSorted, lastAtOrBefore } from './columns'
import type { Spans } from './spans'

/**
 * The only places where the estimate can put mass, ascending: (left, right], or the single point where both are equal; `right` of the last may be Infinity.
 * Row i of the spans can have failed in the cells `first[i]` … `last[i]` and is watched after the first `entered[i]` cells.
 */
export type Cells = {
  left: Float64Array
  right: Float64Array
  first: Int32Array
  last: Int32Array
  entered: Int32Array
}

// At one value an exact time begins first, then intervals end, then those that exclude the value begin: (0, 5] and (5, 7] do not meet, nor do
// an exact 5 and a unit still working at 5.
const exactLeft = 0
const rightEnd = 1
const openLeft = 2

/**
 * Innermost intervals: a left end followed by a right end with no other end between. Entries are right ends too, since mass before an entry does not
 * count against the units that entered later.
 *
 * Source: B. W. Turnbull, JRSS B 38:290-295 (1976); with truncation H. Frydman, JRSS B 56:71-74 (1994).
 */
export function cellsOf({ entry, lower, upper }: Spans): Cells {
  const n = lower.length
  const all = new Float64Array(3 * n)
  all.set(entry)
  all.set(lower, n)
  for (let i = 0; i < n; i++) all[2 * n + i] = upper[i] === Infinity ? lower[i]! : upper[i]!
  const values = distinctSorted(all)
  const rank = (value: number) => (value === Infinity ? values.length : lastAtOrBefore(values, value))
  const leftAt = new Int32Array(n)
  const rightAt = new Int32Array(n)
  const isEnd = new Uint8Array(3 * (values.length + 1))
  for (let i = 0; i < n; i++) {
    leftAt[i] = 3 * rank(lower[i]!) + (lower[i] === upper[i] ? exactLeft : openLeft)
    rightAt[i] = 3 * rank(upper[i]!) + rightEnd
    isEnd[leftAt[i]!] = 1
    isEnd[rightAt[i]!] = 1
    if (entry[i]! > 0) isEnd[3 * rank(entry[i]!) + rightEnd] = 1
  }
  const starts: number[] = []
  const ends: number[] = []
  let open = -1
  for (let position = 0; position < isEnd.length; position++) {
    if (isEnd[position] === 0) continue
    if (position % 3 !== rightEnd) open = position
    else if (open >= 0) {
      starts.push(open)
      ends.push(position)
      open = -1
    }
  }
  const valueAt = (position: number) => values[Math.floor(position / 3)] ?? Infinity
  return {
    left: Float64Array.from(starts, valueAt),
    right: Float64Array.from(ends, valueAt),
    first: leftAt.map((position) => lastAtOrBefore(starts, position - 1) + 1),
    last: rightAt.map((position) => lastAtOrBefore(ends, position)),
    entered: Int32Array.from(entry, (value) => (value > 0 ? lastAtOrBefore(ends, 3 * rank(value) + rightEnd) + 1 : 0))
  }
}
