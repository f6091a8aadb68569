import type { Path } from './geometry'
import type { Stroke } from './gerber-canvas'

/** Ends nearer than this in mm are one corner. */
const corner = 0.03

/** Past this number of points an outline that does not join simply is no outline. */
const mostPoints = 50_000

type Corner = { x: number; y: number; next: Set<number> }

/**
 * The outer boundary of strokes that meet at corners of more than two (edges drawn twice, corners drawn inside and outside): loose ends
 * are cut back, then the boundary is walked by always turning as far outwards as possible. Of several that do not touch, the one with the
 * largest extents; null when nothing closes.
 */
export function walkOutline(strokes: readonly Stroke[]): Path | null {
  let points = 0
  for (const stroke of strokes) points += stroke.points.length / 2
  if (points > mostPoints) return null
  const corners = joinCorners(strokes)
  cutLooseEnds(corners)
  const seen = new Set<number>()
  let best: Path | null = null
  let largest = 0
  for (let index = 0; index < corners.length; index++) {
    if (seen.has(index) || corners[index]!.next.size === 0) continue
    const path = walk(corners, lowestOf(corners, index, seen))
    const [xs, ys] = [path.filter((_, i) => i % 2 === 0), path.filter((_, i) => i % 2 === 1)]
    const extent = (values: number[]) => values.reduce((a, b) => Math.max(a, b)) - values.reduce((a, b) => Math.min(a, b))
    const area = extent(xs) * extent(ys)
    if (area > largest) [best, largest] = [path, area]
  }
  return best
}

function joinCorners(strokes: readonly Stroke[]): Corner[] {
  const corners: Corner[] = []
  const cells = new Map<string, number[]>()
  const at = (x: number, y: number): number => {
    const [cx, cy] = [Math.round(x / corner), Math.round(y / corner)]
    for (let dx = -1; dx <= 1; dx++) {
      for (let dy = -1; dy <= 1; dy++) {
        const near = cells.get(`${cx + dx},${cy + dy}`)?.find((i) => Math.hypot(corners[i]!.x - x, corners[i]!.y - y) <= corner)
        if (near !== undefined) return near
      }
    }
    const key = `${cx},${cy}`
    cells.set(key, [...(cells.get(key) ?? []), corners.length])
    return corners.push({ x, y, next: new Set() }) - 1
  }
  for (const { points } of strokes) {
    let last = at(points[0]!, points[1]!)
    for (let i = 2; i < points.length; i += 2) {
      const here = at(points[i]!, points[i + 1]!)
      if (here === last) continue
      corners[last]!.next.add(here)
      corners[here]!.next.add(last)
      last = here
    }
  }
  return corners
}

function cutLooseEnds(corners: Corner[]): void {
  const loose = corners.map((_, index) => index).filter((index) => corners[index]!.next.size === 1)
  for (let index = loose.pop(); index !== undefined; index = loose.pop()) {
    for (const other of corners[index]!.next) {
      corners[other]!.next.delete(index)
      if (corners[other]!.next.size === 1) loose.push(other)
    }
    corners[index]!.next.clear()
  }
}

/** The lowest corner of those that hang together with one; all of them are marked as seen. */
function lowestOf(corners: Corner[], from: number, seen: Set<number>): number {
  const open = [from]
  let lowest = from
  seen.add(from)
  for (let index = open.pop(); index !== undefined; index = open.pop()) {
    const [a, b] = [corners[index]!, corners[lowest]!]
    if (a.y < b.y || (a.y === b.y && a.x < b.x)) lowest = index
    for (const next of a.next) {
      if (seen.has(next)) continue
      seen.add(next)
      open.push(next)
    }
  }
  return lowest
}

function walk(corners: Corner[], start: number): Path {
  const path: Path = [corners[start]!.x, corners[start]!.y]
  let [here, back] = [start, Math.PI]
  const first = outermost(corners, here, back)
  let next = first
  for (let steps = 0; steps < mostPoints; steps++) {
    path.push(corners[next]!.x, corners[next]!.y)
    back = Math.atan2(corners[here]!.y - corners[next]!.y, corners[here]!.x - corners[next]!.x)
    here = next
    next = outermost(corners, here, back)
    if (here === start && next === first) break
  }
  return path
}

/** The way on that is met first when turning counter-clockwise from the way back; the way back itself comes last. */
function outermost(corners: Corner[], here: number, back: number): number {
  let best = here
  let least = Infinity
  for (const next of corners[here]!.next) {
    const angle = Math.atan2(corners[next]!.y - corners[here]!.y, corners[next]!.x - corners[here]!.x) - back
    const turn = angle <= 1e-9 ? angle + 2 * Math.PI : angle
    const forward = turn <= 1e-9 ? 2 * Math.PI : turn
    if (forward < least) [best, least] = [next, forward]
  }
  return best
}
