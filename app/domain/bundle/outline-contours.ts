import { boxArea, boxOf, distanceToEdge, isInside, type Box, type Path } from './geometry'
import type { Stroke } from './gerber-canvas'
import { walkOutline } from './outline-walk'

export type Outline = {
  /** The largest closed contour, as a closed polygon; null when none closes. */
  contour: Path | null
  box: Box | null
  /** The other closed contours: cut-outs, and whatever else the layer carries. */
  others: Path[]
  /** Set where the board's edge is open: the widest gap between two ends that belong together, in mm, or null when they cannot be told. */
  open: { gap: number | null; x: number; y: number } | null
}

/** Tolerances in mm by which ends are joined, one after the other: tools round differently, and gaps of 0.3 mm do occur in boards that were made. */
const tolerances = [0.01, 0.03, 0.1, 0.3]
/**
 * One gap from this width in mm on, in a contour whose other joints are all at most a tenth of it, is a stroke that is missing: where ends
 * are joined loosely, several are loose. Narrower ones are a step of a coarse grid (1/1000 in).
 */
const oddGap = 0.04
/** An open line inside the board counts as an opening of it up to this gap, as a share of its own length; a long rectangle without a long side has 0.8. */
const mostOpen = 0.9

type Gap = { width: number; x: number; y: number }
/** Strokes joined end to end: how many joints there are, the widest, and how wide the second widest is. */
type Chain = { points: Path; isClosed: boolean; isUsed: boolean; pen: number; joints: number; widest: Gap; next: number }

const ends = (points: Path) => [points[0]!, points[1]!, points[points.length - 2]!, points[points.length - 1]!] as const

/**
 * Joins an outline layer's strokes into closed contours with a growing tolerance.
 *
 * The board's edge is the closed contour with the largest extents. It counts as open when no contour closes, when an open chain spans
 * more than the largest closed one (then that one is a hole or a cut-out), when one joint of it is wide while the others are exact, and
 * when a single opening inside it does not close.
 */
export function findOutline(strokes: readonly Stroke[], regions: readonly Path[]): Outline {
  const simple = joinOutline(strokes, regions)
  if (simple.box && !isThin(simple.box)) return simple
  // Edges that meet in threes, or are drawn twice, do not join one after the other.
  const walked = walkOutline(strokes)
  const box = walked && boxOf(walked)
  const least = Math.max(0, ...strokes.map(({ points }) => boxArea(boxOf(points))))
  const isEdge = box && !isThin(box) && boxArea(box) >= least && (!simple.open || spans(box, simple.open))
  return isEdge ? { contour: walked, box, others: simple.others, open: null } : simple
}

/** Whether an opening is large enough to be milled, as letters mostly are not (common practice, no source). */
const isMilled = (box: Box): boolean => !isThin(box) && Math.max(box.maxX - box.minX, box.maxY - box.minY) >= 0.8

const isThin = (box: Box): boolean => Math.min(box.maxX - box.minX, box.maxY - box.minY) < 0.5

/** Whether the open end lies within a box: a closed contour elsewhere is no answer to an edge that is open here. */
const spans = (box: Box, { x, y }: { x: number; y: number }): boolean =>
  x >= box.minX - 0.1 && x <= box.maxX + 0.1 && y >= box.minY - 0.1 && y <= box.maxY + 0.1

function joinOutline(strokes: readonly Stroke[], regions: readonly Path[]): Outline {
  const chains: Chain[] = []
  for (const { points, aperture } of strokes) {
    const last = chains.at(-1)
    const [x0, y0, x1, y1] = ends(points)
    if (points.length === 4 && x0 === x1 && y0 === y1) continue
    // Most strokes go on where the last one ended: joined at once, which keeps the number of chains small.
    if (last && !last.isClosed && last.points.at(-2) === x0 && last.points.at(-1) === y0) {
      for (let i = 2; i < points.length; i++) last.points.push(points[i]!)
      last.joints++
    } else chains.push(chainOf(points, aperture))
    const chain = chains.at(-1)!
    const [a, b, c, d] = ends(chain.points)
    if (chain.points.length > 6 && a === c && b === d) chain.isClosed = true
  }
  for (const tolerance of tolerances) joinChains(chains, tolerance)
  const live = chains.filter((chain) => !chain.isUsed)
  const joined = live.filter((chain) => chain.isClosed)
  const closed = [...joined.map((chain) => ({ path: chain.points, chain })), ...regions.map((path) => ({ path, chain: null }))]
  const bySize = closed.map((one) => ({ ...one, box: boxOf(one.path) })).sort((a, b) => boxArea(b.box) - boxArea(a.box))
  const largest = bySize[0] ?? null
  const openChain = live
    .filter((chain) => !chain.isClosed)
    .map((chain) => ({ chain, area: boxArea(boxOf(chain.points)) }))
    .sort((a, b) => b.area - a.area)[0]
  const others = bySize.slice(1).map(({ path }) => path)
  if (openChain && openChain.area > (largest ? boxArea(largest.box) : 0)) {
    const [x0, y0, x1, y1] = ends(openChain.chain.points)
    return { contour: null, box: null, others, open: { gap: Math.hypot(x1 - x0, y1 - y0), x: x1, y: y1 } }
  }
  if (!largest) {
    const at = openChain ? ends(openChain.chain.points) : null
    return { contour: null, box: null, others: [], open: { gap: null, x: at?.[0] ?? 0, y: at?.[1] ?? 0 } }
  }
  const odd = largest.chain && oddJoint(largest.chain)
  if (odd) return { contour: null, box: null, others, open: { gap: odd.width, x: odd.x, y: odd.y } }
  return { contour: largest.path, box: largest.box, others, open: openingLeft(live, largest.path) }
}

const chainOf = (points: Path, aperture: Stroke['aperture']): Chain => ({
  points: [...points],
  isClosed: false,
  isUsed: false,
  pen: aperture.diameter ?? 0,
  joints: 0,
  widest: { width: 0, x: 0, y: 0 },
  next: 0
})

function addJoint(chain: Chain, width: number, x: number, y: number): void {
  chain.joints++
  if (width > chain.widest.width) {
    chain.next = chain.widest.width
    chain.widest = { width, x, y }
  } else chain.next = Math.max(chain.next, width)
}

function addJointsOf(chain: Chain, other: Chain): void {
  const { joints } = chain
  addJoint(chain, other.widest.width, other.widest.x, other.widest.y)
  chain.next = Math.max(chain.next, other.next)
  chain.joints = joints + other.joints
}

/** The one joint of a contour that is wide while the others are exact. */
const oddJoint = ({ joints, widest, next }: Chain): Gap | null =>
  joints >= 3 && widest.width > oddGap && next * 10 <= widest.width ? widest : null

/**
 * An opening inside the board that does not close: one of its joints is wide while the others are exact, or it is the only open line of the
 * layer, comes nearly back to where it began, is drawn with the pen of a closed contour and keeps clear of the board's edge.
 */
function openingLeft(live: readonly Chain[], contour: Path): Outline['open'] {
  const isInBoard = ([x, y]: Path) => isInside(contour, x!, y!) && distanceToEdge(contour, x!, y!) > 0.5
  for (const chain of live) {
    const odd = chain.isClosed && chain.points !== contour ? oddJoint(chain) : null
    if (odd && !isThin(boxOf(chain.points)) && isInBoard([odd.x, odd.y])) return { gap: odd.width, x: odd.x, y: odd.y }
  }
  const open = live.filter((chain) => !chain.isClosed)
  const [chain] = open
  if (!chain || open.length > 1 || chain.points.length < 6 || !isMilled(boxOf(chain.points))) return null
  if (!live.some((other) => other.isClosed && other.pen === chain.pen)) return null
  const [x0, y0, x1, y1] = ends(chain.points)
  const gap = Math.hypot(x1 - x0, y1 - y0)
  let length = 0
  for (let i = 2; i < chain.points.length; i += 2)
    length += Math.hypot(chain.points[i]! - chain.points[i - 2]!, chain.points[i + 1]! - chain.points[i - 1]!)
  if (gap > mostOpen * length || !isInBoard([x0, y0]) || !isInBoard([x1, y1])) return null
  return { gap, x: x1, y: y1 }
}

/** Joins open chains whose ends lie within the tolerance, the nearest first in each cell, and closes those that meet themselves. */
function joinChains(chains: Chain[], tolerance: number): void {
  const cell = (value: number) => Math.round(value / (tolerance * 2))
  const grid = new Map<string, { chain: number; atEnd: boolean }[]>()
  const put = (index: number) => {
    const [x0, y0, x1, y1] = ends(chains[index]!.points)
    for (const [x, y, atEnd] of [
      [x0, y0, false],
      [x1, y1, true]
    ] as const) {
      const key = `${cell(x)},${cell(y)}`
      const list = grid.get(key)
      if (list) list.push({ chain: index, atEnd })
      else grid.set(key, [{ chain: index, atEnd }])
    }
  }
  chains.forEach((chain, index) => {
    if (!chain.isClosed && !chain.isUsed) put(index)
  })
  const nearest = (index: number, x: number, y: number, own: boolean) => {
    let best: { chain: number; atEnd: boolean; distance: number } | null = null
    for (let dx = -1; dx <= 1; dx++) {
      for (let dy = -1; dy <= 1; dy++) {
        // Hundreds of ends on one spot are no outline; looking at all of them each time would take for ever.
        for (const entry of (grid.get(`${cell(x) + dx},${cell(y) + dy}`) ?? []).slice(0, 100)) {
          const other = chains[entry.chain]!
          if (other.isUsed || other.isClosed || (entry.chain === index) !== own) continue
          const [x0, y0, x1, y1] = ends(other.points)
          const distance = entry.atEnd ? Math.hypot(x - x1, y - y1) : Math.hypot(x - x0, y - y0)
          if (distance <= tolerance && (!best || distance < best.distance)) best = { ...entry, distance }
        }
      }
    }
    return best
  }
  for (let index = 0; index < chains.length; index++) {
    const chain = chains[index]!
    if (chain.isUsed || chain.isClosed) continue
    let isTurned = false
    // Each round takes in another chain, or turns this one to go on at its start, once: so this ends.
    for (let hasGrown = true; hasGrown;) {
      hasGrown = false
      const [x0, y0, x1, y1] = ends(chain.points)
      const gap = Math.hypot(x1 - x0, y1 - y0)
      if (chain.points.length > 4 && gap <= tolerance) {
        addJoint(chain, gap, x1, y1)
        chain.isClosed = true
        break
      }
      const next = nearest(index, x1, y1, false)
      if (!next && !isTurned) {
        chain.points = reversed(chain.points)
        isTurned = true
        hasGrown = true
      }
      if (!next) continue
      const other = chains[next.chain]!
      const points = next.atEnd ? reversed(other.points) : other.points
      for (let i = 2; i < points.length; i++) chain.points.push(points[i]!)
      addJoint(chain, next.distance, x1, y1)
      addJointsOf(chain, other)
      other.isUsed = true
      hasGrown = true
    }
    if (!chain.isClosed) put(index)
  }
}

function reversed(points: Path): Path {
  const result: Path = []
  for (let i = points.length - 2; i >= 0; i -= 2) result.push(points[i]!, points[i + 1]!)
  return result
}
