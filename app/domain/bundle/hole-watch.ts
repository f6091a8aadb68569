import type { BoardArea } from './board-area'
import { boxOf, emptyBox, growBox, type Box, type Path } from './geometry'
import { place, type Aperture, type Placing } from './gerber-apertures'
import type { DrawingWatch } from './gerber-canvas'

/** A hole to look at: its middle, its radius in mm, its file, and the copper layers it runs between (null for all). */
export type ProbedHole = { x: number; y: number; radius: number; path: string; isPlated: boolean; span: [number, number] | null }

const mostHoles = 300
/** Points of a hole's rim, and how far inside its wall they lie in mm: where a pad is no larger than its hole, rounding decides. */
const rim = 8
const rimIn = 0.03
/** The same rims once more beside their holes, in mm: what a layer shows there that knows nothing of the holes. */
const asides = [
  [0.93, 0.41],
  [-0.67, 1.13],
  [1.71, -0.59],
  [-1.37, -1.93]
] as const
const places = asides.length + 1
const cellSize = 0.5
/** Work for one layer, in points looked at; past it the layer is not judged by its rims. */
const mostWork = 40_000_000

/** The rims of a sample of a board's holes, and of as many circles beside them, sorted into a grid. */
export class HoleRims {
  readonly x: Float64Array
  readonly y: Float64Array
  /** For each sorted point: (hole * places + place) * rim + point. */
  readonly id: Int32Array
  readonly box: Box
  readonly columns: number
  readonly rows: number
  readonly starts: Int32Array

  static of(holes: readonly ProbedHole[], area: BoardArea | null): HoleRims | null {
    if (holes.length === 0) return null
    const step = Math.max(1, holes.length / mostHoles)
    const sample = Array.from({ length: Math.min(mostHoles, holes.length) }, (_, i) => holes[Math.floor(i * step)]!)
    return new HoleRims(sample, area)
  }

  private constructor(
    readonly holes: ProbedHole[],
    area: BoardArea | null
  ) {
    const points: { x: number; y: number; id: number }[] = []
    this.box = emptyBox()
    holes.forEach((hole, index) => {
      const radius = Math.max(hole.radius / 2, hole.radius - rimIn)
      for (let at = 0; at < places; at++) {
        const [dx, dy] = at === 0 ? [0, 0] : asides[at - 1]!
        if (at > 0 && area && !area.contains(hole.x + dx, hole.y + dy)) continue
        for (let i = 0; i < rim; i++) {
          const angle = ((i + 0.5) / rim) * 2 * Math.PI
          const x = hole.x + dx + radius * Math.cos(angle)
          const y = hole.y + dy + radius * Math.sin(angle)
          points.push({ x, y, id: (index * places + at) * rim + i })
          growBox(this.box, x, y)
        }
      }
    })
    // Holes strewn over metres are no board; the grid stays bounded all the same.
    this.columns = Math.min(2000, Math.floor((this.box.maxX - this.box.minX) / cellSize) + 1)
    this.rows = Math.min(2000, Math.floor((this.box.maxY - this.box.minY) / cellSize) + 1)
    const cellOf = (p: { x: number; y: number }) => this.row(p.y) * this.columns + this.column(p.x)
    points.sort((a, b) => cellOf(a) - cellOf(b))
    this.x = Float64Array.from(points, (p) => p.x)
    this.y = Float64Array.from(points, (p) => p.y)
    this.id = Int32Array.from(points, (p) => p.id)
    this.starts = new Int32Array(this.columns * this.rows + 1)
    for (const point of points) this.starts[cellOf(point) + 1]!++
    for (let i = 0; i < this.columns * this.rows; i++) this.starts[i + 1]! += this.starts[i]!
  }

  readonly column = (x: number) => Math.min(this.columns - 1, Math.max(0, Math.floor((x - this.box.minX) / cellSize)))
  readonly row = (y: number) => Math.min(this.rows - 1, Math.max(0, Math.floor((y - this.box.minY) / cellSize)))
}

/** How many rims lie wholly in copper, wholly out of it, or partly. */
export type RimCount = { full: number; none: number; mixed: number }

/** What a layer shows at the holes' rims, and beside them; `first` is the first hole that lies partly in copper. */
export type RimCounts = { at: RimCount; beside: RimCount; first: ProbedHole | null }

/**
 * Whether a layer does not belong to the holes: their walls run half in copper, half out of it, though not all as often as where there
 * are no holes. In a layer that fits, a hole lies in its pad, in a plane it connects to, or in a clearance: on 17 real boards none did not.
 * What shows the same wherever one looks (nothing, or all copper) tells nothing.
 */
export function isMisfit({ at, beside }: RimCounts): boolean {
  const count = at.full + at.none + at.mixed
  const all = beside.full + beside.none + beside.mixed
  if (at.mixed < 2) return false
  if (count < 10) return at.mixed * 2 >= count
  return at.mixed >= 3 && at.mixed / count >= Math.max(0.06, (0.3 * beside.mixed) / Math.max(1, all))
}

/** Looks on while a copper layer is drawn: which points of the holes' rims lie in copper at the end, clear objects taken away. */
export class HoleWatch implements DrawingWatch {
  private readonly covered: Uint8Array
  private readonly parity: Uint8Array
  private work = 0

  constructor(private readonly rims: HoleRims) {
    this.covered = new Uint8Array(rims.x.length)
    this.parity = new Uint8Array(rims.x.length)
  }

  stroke(points: Path, aperture: Aperture, isDark: boolean): void {
    const { minX, maxX, minY, maxY } = aperture.box
    const half = (aperture.diameter ?? Math.min(maxX - minX, maxY - minY)) / 2
    for (let i = 2; i < points.length; i += 2)
      this.capsule(points[i - 2]!, points[i - 1]!, points[i]!, points[i + 1]!, half, isDark)
  }

  region(points: Path, isDark: boolean): void {
    const box = boxOf(points)
    const { rims, parity } = this
    if (!this.isNear(box)) return
    const n = points.length
    for (let i = 0; i < n; i += 2) {
      const j = i === 0 ? n - 2 : i - 2
      const [px, py, qx, qy] = [points[j]!, points[j + 1]!, points[i]!, points[i + 1]!]
      if (py === qy) continue
      const [low, high] = py < qy ? [py, qy] : [qy, py]
      if (high < rims.box.minY || low > rims.box.maxY) continue
      const slope = (qx - px) / (qy - py)
      const last = rims.column(Math.max(px, qx))
      const first = rims.column(box.minX)
      for (let row = rims.row(low); row <= rims.row(high); row++) {
        const [from, to] = this.range(row, first, last)
        for (let k = from; k < to; k++) {
          const y = rims.y[k]!
          if (y >= low && y < high && rims.x[k]! < px + (y - py) * slope) parity[k]! ^= 1
        }
      }
    }
    for (let row = rims.row(box.minY); row <= rims.row(box.maxY); row++) {
      const [from, to] = this.range(row, rims.column(box.minX), rims.column(box.maxX))
      for (let k = from; k < to; k++) {
        if (parity[k] === 1) this.covered[k] = isDark ? 1 : 0
        parity[k] = 0
      }
    }
  }

  flash(x: number, y: number, aperture: Aperture, placing: Placing, isDark: boolean): void {
    const { box } = aperture
    if (aperture.shape === 'circle' || aperture.shape === 'obround' || aperture.shape === 'polygon') {
      const radius = Math.min(box.maxX, box.maxY)
      const [ex, ey] = place(placing, box.maxX - radius, box.maxY - radius)
      return this.capsule(x - ex, y - ey, x + ex, y + ey, radius * placing.scale, isDark)
    }
    const corners: Path = []
    const hull = aperture.shape === 'macro' ? hullOf(aperture) : cornersOf(box)
    for (let i = 0; i < hull.length; i += 2) {
      const [cx, cy] = place(placing, hull[i]!, hull[i + 1]!)
      corners.push(x + cx, y + cy)
    }
    if (corners.length >= 6) this.region(corners, isDark)
  }

  /** What was found at the holes that are asked for and run through a layer; null where the work was used up. */
  counts(layer: number | null, isAsked: (hole: ProbedHole) => boolean): RimCounts | null {
    if (this.work > mostWork) return null
    const { rims } = this
    const hits = new Int8Array(rims.holes.length * places).fill(-1)
    for (let k = 0; k < rims.id.length; k++) {
      const at = Math.floor(rims.id[k]! / rim)
      hits[at] = Math.max(0, hits[at]!) + this.covered[k]!
    }
    const counts: RimCounts = { at: { full: 0, none: 0, mixed: 0 }, beside: { full: 0, none: 0, mixed: 0 }, first: null }
    hits.forEach((hit, index) => {
      const hole = rims.holes[Math.floor(index / places)]!
      const { span } = hole
      if (hit < 0 || (span && layer !== null && (layer < span[0] || layer > span[1])) || !isAsked(hole)) return
      const isAt = index % places === 0
      const state = hit === 0 ? 'none' : hit === rim ? 'full' : 'mixed'
      counts[isAt ? 'at' : 'beside'][state]++
      if (isAt && state === 'mixed') counts.first ??= hole
    })
    return counts
  }

  private isNear(box: Box): boolean {
    const own = this.rims.box
    return this.work <= mostWork && box.minX <= own.maxX && box.maxX >= own.minX && box.minY <= own.maxY && box.maxY >= own.minY
  }

  private range(row: number, first: number, last: number): [number, number] {
    const { starts, columns } = this.rims
    const [from, to] = [starts[row * columns + first]!, starts[row * columns + last + 1]!]
    this.work += to - from + 1
    return [from, to]
  }

  private capsule(x0: number, y0: number, x1: number, y1: number, half: number, isDark: boolean): void {
    const { rims } = this
    const box = boxOf([x0 - half, y0 - half, x0 + half, y0 + half, x1 - half, y1 - half, x1 + half, y1 + half])
    if (!this.isNear(box)) return
    const [dx, dy] = [x1 - x0, y1 - y0]
    const squared = dx * dx + dy * dy
    for (let row = rims.row(box.minY); row <= rims.row(box.maxY); row++) {
      let [left, right] = [box.minX, box.maxX]
      if (Math.abs(dy) > cellSize && row > 0 && row < rims.rows - 1) {
        const low = rims.box.minY + row * cellSize - half
        const at = (y: number) => x0 + Math.min(1, Math.max(0, (y - y0) / dy)) * dx
        const [a, b] = [at(low), at(low + cellSize + 2 * half)]
        left = Math.min(a, b) - half
        right = Math.max(a, b) + half
      }
      const [from, to] = this.range(row, rims.column(left), rims.column(right))
      for (let k = from; k < to; k++) {
        const [x, y] = [rims.x[k]! - x0, rims.y[k]! - y0]
        const along = squared === 0 ? 0 : Math.min(1, Math.max(0, (x * dx + y * dy) / squared))
        const [ox, oy] = [x - along * dx, y - along * dy]
        if (ox * ox + oy * oy <= half * half) this.covered[k] = isDark ? 1 : 0
      }
    }
  }
}

const cornersOf = ({ minX, minY, maxX, maxY }: Box): Path => [minX, minY, maxX, minY, maxX, maxY, minX, maxY]

const hulls = new WeakMap<Aperture, Path>()

/** The convex hull of a macro's corners and rounds, around its origin. */
function hullOf(aperture: Aperture): Path {
  const known = hulls.get(aperture)
  if (known) return known
  const points: [number, number][] = []
  const dots = aperture.dots ?? []
  for (let i = 0; i < dots.length; i += 3) {
    const [x, y, radius] = [dots[i]!, dots[i + 1]!, dots[i + 2]!]
    if (radius <= 0) points.push([x, y])
    else
      for (let k = 0; k < 16; k++)
        points.push([x + radius * Math.cos((k * Math.PI) / 8), y + radius * Math.sin((k * Math.PI) / 8)])
  }
  const hull = convexHull(points)
  hulls.set(aperture, hull)
  return hull
}

/** The convex hull of points, counter-clockwise (Andrew's monotone chain). */
function convexHull(points: [number, number][]): Path {
  points.sort((a, b) => a[0] - b[0] || a[1] - b[1])
  const half = (ordered: [number, number][]) => {
    const chain: [number, number][] = []
    for (const p of ordered) {
      for (let n = chain.length; n >= 2; n = chain.length) {
        const [a, b] = [chain[n - 2]!, chain[n - 1]!]
        if ((b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0]) > 0) break
        chain.pop()
      }
      chain.push(p)
    }
    chain.pop()
    return chain
  }
  return [...half(points), ...half([...points].reverse())].flat()
}
