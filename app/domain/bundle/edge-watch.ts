import type { BoardArea } from './board-area'
import { boxesTouch, boxOf, growBox, isInside, type Box, type Path } from './geometry'
import { place, type Aperture, type Placing } from './gerber-apertures'
import type { DrawingWatch } from './gerber-canvas'

/** Copper may reach this far past the edge, in mm, before it is told: rounding, and arcs that stand as chords. */
export const edgeSlack = 0.05
/** Strokes up to this width in mm that run on the edge itself are the board's edge drawn on every layer, as older tools do (common practice, no source). */
const edgePen = 0.3
/** How far such strokes may stray from the contour, whose ends were joined over as much, in mm. */
const edgePenOff = 0.3
/** How finely the worst place along a line is looked for, in mm. */
const finest = 0.02
const mostSpots = 2000
/** Work for one layer, in cells and segments looked at; past it only extents are compared. */
const mostWork = 30_000_000
/** Work for clear objects of one layer, in spots compared. */
const mostClearing = 5_000_000
/** Areas up to this size in mm may be pads. */
const largestPad = 8

/** A place where copper reaches past the edge: how far in mm, where, and past which contour of the board's area. */
export type EdgeSpot = { by: number; x: number; y: number; contour: number; side: EdgeSide }
export type EdgeSide = 'left' | 'right' | 'lower' | 'upper' | 'edge' | 'cut-out'

/** What one layer draws past the board's edge, and the cut-outs that a single pad covers whole (plated slots). */
export type EdgeExcess = { spots: EdgeSpot[]; covered: Set<number> }

/** Looks on while a copper layer is drawn and keeps the places where it reaches past the board's edge or into a cut-out. */
export class EdgeWatch implements DrawingWatch {
  readonly spots: EdgeSpot[] = []
  readonly covered = new Set<number>()
  private clearing = 0
  private readonly workBefore: number
  /** The worst places of the object that is being looked at, by contour and side. */
  private worst = new Map<string, EdgeSpot>()

  constructor(private readonly area: BoardArea) {
    this.workBefore = area.work
  }

  stroke(points: Path, aperture: Aperture, isDark: boolean): void {
    const { minX, maxX, minY, maxY } = aperture.box
    const half = (aperture.diameter ?? Math.min(maxX - minX, maxY - minY)) / 2
    const box = boxOf(points)
    growBox(box, box.minX, box.minY, half)
    growBox(box, box.maxX, box.maxY, half)
    if (!isDark) return this.clear(box, points.length, (x, y) => distanceToPath(points, x, y) <= half)
    if (this.isTold(box)) return
    if (half * 2 <= edgePen && this.runsOnEdge(points)) return
    this.markCovered(box)
    for (let i = 2; i < points.length; i += 2) this.line(points[i - 2]!, points[i - 1]!, points[i]!, points[i + 1]!, half)
    this.keep()
  }

  region(points: Path, isDark: boolean): void {
    const box = boxOf(points)
    if (!isDark) return this.clear(box, points.length, (x, y) => isInside(points, x, y))
    if (this.isTold(box)) return
    if (box.maxX - box.minX <= largestPad && box.maxY - box.minY <= largestPad) this.markCovered(box)
    this.around(points)
    this.area.contours.forEach(({ isCutout, depth, x, y }, contour) => {
      if (!isCutout || depth <= edgeSlack || x < box.minX || x > box.maxX || y < box.minY || y > box.maxY) return
      this.area.work += points.length
      if (isInside(points, x, y)) this.add({ by: depth, x, y, contour, side: 'cut-out' })
    })
    this.keep()
  }

  flash(x: number, y: number, aperture: Aperture, placing: Placing, isDark: boolean): void {
    const { box } = aperture
    const corners = cornersOf(box).map(([cx, cy]) => place(placing, cx, cy))
    const around = boxOf(corners.flatMap(([cx, cy]) => [x + cx, y + cy]))
    if (!isDark) {
      const isIn = (px: number, py: number) => px >= around.minX && px <= around.maxX && py >= around.minY && py <= around.maxY
      return this.clear(around, 1, isIn)
    }
    if (this.isTold(around)) return
    this.markCovered(around)
    if (aperture.shape === 'circle' || aperture.shape === 'obround' || aperture.shape === 'polygon') {
      const [halfX, halfY] = [box.maxX, box.maxY]
      const radius = Math.min(halfX, halfY)
      const [ex, ey] = place(placing, halfX - radius, halfY - radius)
      this.line(x - ex, y - ey, x + ex, y + ey, radius * placing.scale)
    } else if (aperture.shape === 'macro' && aperture.dots) {
      for (let i = 0; i < aperture.dots.length; i += 3) {
        const [dx, dy] = place(placing, aperture.dots[i]!, aperture.dots[i + 1]!)
        this.line(x + dx, y + dy, x + dx, y + dy, aperture.dots[i + 2]! * placing.scale)
        this.line(x, y, x + dx, y + dy, 0)
      }
    } else this.around(corners.flatMap(([cx, cy]) => [x + cx, y + cy]))
    this.keep()
  }

  private around(points: Path): void {
    const n = points.length
    this.line(points[n - 2]!, points[n - 1]!, points[0]!, points[1]!, 0)
    for (let i = 2; i < n; i += 2) this.line(points[i - 2]!, points[i - 1]!, points[i]!, points[i + 1]!, 0)
  }

  /** Whether an object needs no closer look: it lies on the board, or wholly beside it, or the work for this layer is used up. */
  private isTold(box: Box): boolean {
    const { area } = this
    if (area.isWithin(box.minX, box.minY, box.maxX, box.maxY)) return true
    if (boxesTouch(box, area.box) && area.work - this.workBefore <= mostWork) return false
    const [x, y] = [(box.minX + box.maxX) / 2, (box.minY + box.maxY) / 2]
    const past = [area.box.minX - box.minX, box.maxX - area.box.maxX, area.box.minY - box.minY, box.maxY - area.box.maxY]
    const by = Math.max(...past)
    this.add({ by, x, y, contour: 0, side: (['left', 'right', 'lower', 'upper'] as const)[past.indexOf(by)]! })
    this.keep()
    return true
  }

  /** The worst places of a line with round ends: halved again and again where it may still reach farther out than what was found. */
  private line(x0: number, y0: number, x1: number, y1: number, half: number): void {
    const { area } = this
    const parts = [x0, y0, x1, y1]
    // Most lines reach farthest with an end.
    let best = Math.max(edgeSlack, this.look(x0, y0, half, 0), this.look(x1, y1, half, 0))
    while (parts.length > 0) {
      const [ax, ay, bx, by] = parts.splice(-4) as [number, number, number, number]
      const [left, right] = ax < bx ? [ax, bx] : [bx, ax]
      const [low, high] = ay < by ? [ay, by] : [by, ay]
      if (area.isWithin(left - half, low - half, right + half, high + half)) continue
      const [x, y] = [(ax + bx) / 2, (ay + by) / 2]
      const length = Math.hypot(bx - ax, by - ay) / 2
      const reach = this.look(x, y, half, length)
      best = Math.max(best, reach)
      if (length < finest || reach + length <= best * 1.02 + 0.01 || area.work - this.workBefore > mostWork) continue
      parts.push(ax, ay, x, y, x, y, bx, by)
    }
  }

  /** How far a round place reaches past the edge; exact from `length` inside it on. */
  private look(x: number, y: number, half: number, length: number): number {
    if (this.area.isWithin(x - half - length, y - half - length, x + half + length, y + half + length)) return edgeSlack
    const near = this.area.outsideness(x, y, length + half + edgeSlack)
    const reach = near.distance + half
    if (reach > edgeSlack) this.add({ ...this.named(near.segment, near.contour, x, y), by: reach, x, y })
    return reach
  }

  /** Which side of the board an edge's segment is, or that of a place far from it. */
  private named(segment: number, contour: number, x: number, y: number): { contour: number; side: EdgeSide } {
    const { area } = this
    if (area.contours[contour]!.isCutout) return { contour, side: 'cut-out' }
    const { box } = area.contours[contour]!
    const [x0, y0, x1, y1] = segment < 0 ? [x, y, x, y] : area.segment(segment)
    const near = 0.02
    if (Math.max(x0, x1) <= box.minX + near) return { contour, side: 'left' }
    if (Math.min(x0, x1) >= box.maxX - near) return { contour, side: 'right' }
    if (Math.max(y0, y1) <= box.minY + near) return { contour, side: 'lower' }
    if (Math.min(y0, y1) >= box.maxY - near) return { contour, side: 'upper' }
    return { contour, side: 'edge' }
  }

  private add(spot: EdgeSpot): void {
    const { isCutout, depth } = this.area.contours[spot.contour]!
    if (isCutout) spot.by = Math.min(spot.by, Math.max(depth, edgeSlack))
    if (spot.by <= edgeSlack) return
    const key = `${spot.contour} ${spot.side}`
    const known = this.worst.get(key)
    if (!known || known.by < spot.by) this.worst.set(key, spot)
  }

  private keep(): void {
    if (this.worst.size === 0) return
    for (const spot of this.worst.values()) {
      if (this.spots.length < mostSpots) this.spots.push(spot)
      else {
        const last = this.spots.findLastIndex((other) => other.contour === spot.contour && other.side === spot.side)
        if (last < 0) this.spots[mostSpots - 1] = spot
        else if (this.spots[last]!.by < spot.by) this.spots[last] = spot
      }
    }
    this.worst = new Map()
  }

  /** Copper that is taken away again does not count. */
  private clear(box: Box, cost: number, isCleared: (x: number, y: number) => boolean): void {
    if (this.spots.length === 0 || this.clearing > mostClearing || this.area.isWithin(box.minX, box.minY, box.maxX, box.maxY))
      return
    const isIn = ({ x, y }: EdgeSpot) => x >= box.minX && x <= box.maxX && y >= box.minY && y <= box.maxY
    this.clearing += this.spots.length
    const left = this.spots.filter((spot) => {
      if (!isIn(spot)) return true
      this.clearing += cost
      return !isCleared(spot.x, spot.y)
    })
    if (left.length < this.spots.length) this.spots.splice(0, this.spots.length, ...left)
  }

  private markCovered(around: Box): void {
    this.area.contours.forEach(({ isCutout, box }, index) => {
      if (!isCutout || around.minX > box.minX || around.minY > box.minY) return
      if (around.maxX >= box.maxX && around.maxY >= box.maxY) this.covered.add(index)
    })
  }

  private runsOnEdge(points: Path): boolean {
    let near = 0
    let all = 0
    const look = (x: number, y: number) => {
      const { segment, distance } = this.area.nearest(x, y, edgePenOff)
      all++
      if (segment >= 0 && distance <= edgeSlack) near++
      return segment >= 0
    }
    for (let i = 0; i < points.length; i += 2) {
      if (!look(points[i]!, points[i + 1]!)) return false
      if (i > 0 && !look((points[i]! + points[i - 2]!) / 2, (points[i + 1]! + points[i - 1]!) / 2)) return false
    }
    return near * 3 >= all
  }
}

const cornersOf = ({ minX, minY, maxX, maxY }: Aperture['box']): [number, number][] => [
  [minX, minY],
  [maxX, minY],
  [maxX, maxY],
  [minX, maxY]
]

function distanceToPath(points: Path, x: number, y: number): number {
  let least = Infinity
  for (let i = 2; i < points.length; i += 2) {
    const [dx, dy] = [points[i]! - points[i - 2]!, points[i + 1]! - points[i - 1]!]
    const squared = dx * dx + dy * dy
    const along = squared === 0 ? 0 : Math.min(1, Math.max(0, ((x - points[i - 2]!) * dx + (y - points[i - 1]!) * dy) / squared))
    least = Math.min(least, Math.hypot(x - points[i - 2]! - along * dx, y - points[i - 1]! - along * dy))
  }
  return least
}
