import { boxArea, boxOf, type Box, type Path } from './geometry'
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

type Chain = { points: Path; isClosed: boolean; isUsed: boolean }

const ends = (points: Path) => [points[0]!, points[1]!, points[points.length - 2]!, points[points.length - 1]!] as const

/**
 * Joins an outline layer's strokes into closed contours with a growing tolerance.
 *
 * The board's edge is the closed contour with the largest extents. It counts as open when no contour closes, or when an open chain spans
 * more than the largest closed one (then that one is a hole or a cut-out).
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

const isThin = (box: Box): boolean => Math.min(box.maxX - box.minX, box.maxY - box.minY) < 0.5

/** Whether the open end lies within a box: a closed contour elsewhere is no answer to an edge that is open here. */
const spans = (box: Box, { x, y }: { x: number; y: number }): boolean =>
  x >= box.minX - 0.1 && x <= box.maxX + 0.1 && y >= box.minY - 0.1 && y <= box.maxY + 0.1

function joinOutline(strokes: readonly Stroke[], regions: readonly Path[]): Outline {
  const chains: Chain[] = []
  for (const { points } of strokes) {
    const last = chains.at(-1)
    const [x0, y0, x1, y1] = ends(points)
    if (points.length === 4 && x0 === x1 && y0 === y1) continue
    // Most strokes go on where the last one ended: joined at once, which keeps the number of chains small.
    if (last && !last.isClosed && last.points.at(-2) === x0 && last.points.at(-1) === y0) {
      for (let i = 2; i < points.length; i++) last.points.push(points[i]!)
    } else chains.push({ points: [...points], isClosed: false, isUsed: false })
    const chain = chains.at(-1)!
    const [a, b, c, d] = ends(chain.points)
    if (chain.points.length > 6 && a === c && b === d) chain.isClosed = true
  }
  for (const tolerance of tolerances) joinChains(chains, tolerance)
  const live = chains.filter((chain) => !chain.isUsed)
  const closed = [...live.filter((chain) => chain.isClosed).map((chain) => chain.points), ...regions]
  const bySize = closed.map((path) => ({ path, box: boxOf(path) })).sort((a, b) => boxArea(b.box) - boxArea(a.box))
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
  return { contour: largest.path, box: largest.box, others, open: null }
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
    // Each round takes in another chain, so this ends.
    for (let hasGrown = true; hasGrown;) {
      hasGrown = false
      const [x0, y0, x1, y1] = ends(chain.points)
      if (chain.points.length > 4 && Math.hypot(x1 - x0, y1 - y0) <= tolerance) {
        chain.isClosed = true
        break
      }
      const next = nearest(index, x1, y1, false)
      if (!next) continue
      const other = chains[next.chain]!
      const points = next.atEnd ? reversed(other.points) : other.points
      for (let i = 2; i < points.length; i++) chain.points.push(points[i]!)
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
