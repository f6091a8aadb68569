import { boxArea, boxOf, emptyBox, growBox, isInside, type Box, type Path } from './geometry'
import type { Outline } from './outline-contours'

/** Closed contours smaller than this in mm are no cut-outs: the finest cutter mills 0.8 mm (common practice, no source). */
const finestCutter = 0.8
/** Closed contours beside the board count as boards of a panel from this size in mm on; smaller ones are letters. */
const leastBoard = 3
/** An outline that follows another one this closely, in mm, is the other edge of its pen or the same once more. */
const doubled = 0.3
const mostCutouts = 500
const mostSegments = 200_000
/** Distances from the edge are measured up to here, in mm. */
const farthest = 20

/** A contour of the board's edge: the outer one, or an opening with its innermost point and how far that is from the edge. */
type Edge = { path: Path; box: Box; isCutout: boolean; depth: number; x: number; y: number }

/** The nearest point of the edge: its distance in mm, the segment, and the contour it belongs to. */
export type Nearest = { distance: number; segment: number; contour: number }

/**
 * The area of the board: the outer contour (several in a panel) less the cut-outs, ready to be asked a million times how far a place is
 * from its edge. Contours inside a cut-out are not looked at; those that follow another contour closely count once.
 */
export class BoardArea {
  readonly box: Box
  readonly contours: Edge[]
  /** Cells looked at so far: what the questions cost. */
  work = 0
  private readonly segments: Float64Array
  private readonly owner: Uint16Array
  private readonly cell: number
  private readonly columns: number
  private readonly rows: number
  private readonly starts: Int32Array
  private readonly items: Int32Array
  private readonly rowStarts: Int32Array
  private readonly rowItems: Int32Array
  private readonly sums: Int32Array
  private readonly states: Uint8Array

  /** The board's area; null without a closed outline, or where it has more corners than any board. */
  static of(outline: Outline | null): BoardArea | null {
    if (!outline?.contour || !outline.box) return null
    const contours = edgesOf(outline.contour, outline.others)
    const corners = contours.reduce((sum, { path }) => sum + path.length / 2, 0)
    return corners > mostSegments ? null : new BoardArea(contours, corners)
  }

  private constructor(contours: Edge[], corners: number) {
    this.contours = contours
    this.segments = new Float64Array(corners * 4)
    this.owner = new Uint16Array(corners)
    this.box = emptyBox()
    let at = 0
    contours.forEach(({ path }, index) => {
      let [px, py] = [path.at(-2)!, path.at(-1)!]
      for (let i = 0; i < path.length; i += 2) {
        growBox(this.box, path[i]!, path[i + 1]!)
        this.segments.set([px, py, path[i]!, path[i + 1]!], at * 4)
        this.owner[at++] = index
        px = path[i]!
        py = path[i + 1]!
      }
    })
    const [width, height] = [this.box.maxX - this.box.minX, this.box.maxY - this.box.minY]
    this.cell = Math.max(0.25, Math.max(width, height) / 256)
    this.columns = Math.floor(width / this.cell) + 1
    this.rows = Math.floor(height / this.cell) + 1
    const inCells = this.sorted(this.columns * this.rows, (segment, put) => this.eachCell(segment, put))
    const inRows = this.sorted(this.rows, (segment, put) => {
      const [, y0, , y1] = this.segment(segment)
      for (let row = this.row(Math.min(y0, y1)); row <= this.row(Math.max(y0, y1)); row++) put(row)
    })
    this.starts = inCells.starts
    this.items = inCells.items
    this.rowStarts = inRows.starts
    this.rowItems = inRows.items
    this.states = new Uint8Array(this.columns * this.rows)
    this.sums = this.summed()
    for (const contour of contours) if (contour.isCutout) this.findInnermost(contour)
  }

  /** Whether a rectangle lies wholly on the board, told from the grid alone; false also where it cannot be told so. */
  isWithin(minX: number, minY: number, maxX: number, maxY: number): boolean {
    const { box } = this
    if (minX < box.minX || minY < box.minY || maxX > box.maxX || maxY > box.maxY) return false
    const [c0, c1] = [this.column(minX), this.column(maxX)]
    const [r0, r1] = [this.row(minY), this.row(maxY)]
    const wide = this.columns + 1
    const sum = (r: number, c: number) => this.sums[r * wide + c]!
    if (sum(r1 + 1, c1 + 1) - sum(r0, c1 + 1) - sum(r1 + 1, c0) + sum(r0, c0) > 0) return false
    const at = r0 * this.columns + c0
    if (this.states[at] === 0) this.states[at] = this.contains(minX, minY) ? 1 : 2
    return this.states[at] === 1
  }

  /** Whether a place lies on the board: inside the outer contour and in no cut-out. */
  contains(x: number, y: number): boolean {
    const { box, segments } = this
    if (x < box.minX || x > box.maxX || y < box.minY || y > box.maxY) return false
    const row = this.row(y)
    this.work += this.rowStarts[row + 1]! - this.rowStarts[row]!
    let inside = false
    for (let i = this.rowStarts[row]!; i < this.rowStarts[row + 1]!; i++) {
      const s = this.rowItems[i]! * 4
      const [px, py, qx, qy] = [segments[s]!, segments[s + 1]!, segments[s + 2]!, segments[s + 3]!]
      if (qy > y !== py > y && x < ((px - qx) * (y - qy)) / (py - qy) + qx) inside = !inside
    }
    return inside
  }

  /** The nearest point of the edge within `limit` mm; its `segment` is -1 where there is none so near. */
  nearest(x: number, y: number, limit: number): Nearest {
    const { cell, columns, rows, box } = this
    const column = Math.floor((x - box.minX) / cell)
    const row = Math.floor((y - box.minY) / cell)
    const found: Nearest = { distance: limit, segment: -1, contour: 0 }
    const first = Math.max(0, -column, -row, column - columns + 1, row - rows + 1)
    for (let ring = first; (ring - 1) * cell <= found.distance && ring <= columns + rows + first; ring++) {
      for (let r = Math.max(0, row - ring); r <= Math.min(rows - 1, row + ring); r++) {
        const isEnd = r === row - ring || r === row + ring
        for (let c = column - ring; c <= column + ring; c += isEnd || ring === 0 ? 1 : 2 * ring) {
          this.work++
          if (c >= 0 && c < columns) this.nearestIn(r * columns + c, x, y, found)
        }
      }
    }
    if (found.segment >= 0) found.contour = this.owner[found.segment]!
    return found
  }

  /** How far a place is outside the board in mm, negative inside; exact up to `within` inside and `farthest` outside, from the board's box past it. */
  outsideness(x: number, y: number, within: number): Nearest {
    this.work++
    const isOn = this.contains(x, y)
    const nearest = this.nearest(x, y, isOn ? within : farthest)
    if (isOn) nearest.distance = -nearest.distance
    else if (nearest.segment < 0) nearest.distance = Math.max(farthest, this.fromBox(x, y))
    return nearest
  }

  private fromBox(x: number, y: number): number {
    const { box } = this
    return Math.hypot(Math.max(0, box.minX - x, x - box.maxX), Math.max(0, box.minY - y, y - box.maxY))
  }

  /** The distance of a place from the edge, however far it is. */
  distance(x: number, y: number): number {
    const near = this.nearest(x, y, farthest)
    if (near.segment >= 0) return near.distance
    let least = Infinity
    for (let s = 0; s < this.owner.length; s++) least = Math.min(least, this.toSegment(s, x, y))
    return least
  }

  segment(index: number): [number, number, number, number] {
    const { segments } = this
    const s = index * 4
    return [segments[s]!, segments[s + 1]!, segments[s + 2]!, segments[s + 3]!]
  }

  private readonly column = (x: number) => Math.min(this.columns - 1, Math.max(0, Math.floor((x - this.box.minX) / this.cell)))
  private readonly row = (y: number) => Math.min(this.rows - 1, Math.max(0, Math.floor((y - this.box.minY) / this.cell)))

  private nearestIn(at: number, x: number, y: number, found: Nearest): void {
    this.work += this.starts[at + 1]! - this.starts[at]!
    for (let i = this.starts[at]!; i < this.starts[at + 1]!; i++) {
      const distance = this.toSegment(this.items[i]!, x, y)
      if (distance > found.distance) continue
      found.distance = distance
      found.segment = this.items[i]!
    }
  }

  private toSegment(index: number, x: number, y: number): number {
    const [px, py, qx, qy] = this.segment(index)
    const [dx, dy] = [qx - px, qy - py]
    const squared = dx * dx + dy * dy
    const along = squared === 0 ? 0 : Math.min(1, Math.max(0, ((x - px) * dx + (y - py) * dy) / squared))
    return Math.hypot(x - px - along * dx, y - py - along * dy)
  }

  /** The cells that a segment runs through, and some beside them. */
  private eachCell(index: number, put: (cell: number) => void): void {
    const [x0, y0, x1, y1] = this.segment(index)
    const [low, high] = [Math.min(y0, y1), Math.max(y0, y1)]
    for (let row = this.row(low); row <= this.row(high); row++) {
      let [left, right] = [Math.min(x0, x1), Math.max(x0, x1)]
      if (high > low) {
        const at = (y: number) => x0 + ((x1 - x0) * (y - y0)) / (y1 - y0)
        const a = at(Math.min(high, Math.max(low, this.box.minY + row * this.cell)))
        const b = at(Math.min(high, Math.max(low, this.box.minY + (row + 1) * this.cell)))
        left = Math.min(a, b)
        right = Math.max(a, b)
      }
      for (let column = this.column(left - 1e-6); column <= this.column(right + 1e-6); column++) put(row * this.columns + column)
    }
  }

  private sorted(cells: number, each: (segment: number, put: (cell: number) => void) => void) {
    const starts = new Int32Array(cells + 1)
    for (let s = 0; s < this.owner.length; s++) each(s, (cell) => starts[cell + 1]!++)
    for (let i = 0; i < cells; i++) starts[i + 1]! += starts[i]!
    const items = new Int32Array(starts[cells]!)
    const next = starts.slice()
    for (let s = 0; s < this.owner.length; s++) each(s, (cell) => (items[next[cell]!++] = s))
    return { starts, items }
  }

  /** For each corner of the grid, in how many cells to its lower left the edge runs. */
  private summed(): Int32Array {
    const wide = this.columns + 1
    const sums = new Int32Array(wide * (this.rows + 1))
    for (let r = 0; r < this.rows; r++) {
      for (let c = 0; c < this.columns; c++) {
        const own = this.starts[r * this.columns + c + 1]! > this.starts[r * this.columns + c]! ? 1 : 0
        sums[(r + 1) * wide + c + 1] = own + sums[r * wide + c + 1]! + sums[(r + 1) * wide + c]! - sums[r * wide + c]!
      }
    }
    return sums
  }

  private findInnermost(cutout: Edge): void {
    const { box, path } = cutout
    const steps = 14
    for (let i = 1; i < steps; i++) {
      for (let j = 1; j < steps; j++) {
        const x = box.minX + ((box.maxX - box.minX) * i) / steps
        const y = box.minY + ((box.maxY - box.minY) * j) / steps
        if (!isInside(path, x, y)) continue
        const { distance } = this.nearest(x, y, farthest)
        if (distance > cutout.depth) Object.assign(cutout, { depth: distance, x, y })
      }
    }
  }
}

/** The outer contours and the cut-outs among an outline layer's closed contours, given with the largest first. */
function edgesOf(contour: Path, others: readonly Path[]): Edge[] {
  const edge = (path: Path, isCutout: boolean): Edge => ({ path, box: boxOf(path), isCutout, depth: 0, x: path[0]!, y: path[1]! })
  const edges = [edge(contour, false)]
  const bySize = [...others].sort((a, b) => boxArea(boxOf(b)) - boxArea(boxOf(a)))
  for (const path of bySize.slice(0, 5000)) {
    if (edges.length > mostCutouts) break
    const box = boxOf(path)
    const least = Math.min(box.maxX - box.minX, box.maxY - box.minY)
    if (least < finestCutter || edges.some((other) => isSameBox(other.box, box))) continue
    const around = edges.filter((other) => isAround(other, path, box))
    if (around.some((other) => other.isCutout)) continue
    if (around.length > 0) edges.push(edge(path, true))
    else if (least >= leastBoard) edges.push(edge(path, false))
  }
  return edges
}

const isSameBox = (a: Box, b: Box) =>
  Math.max(Math.abs(a.minX - b.minX), Math.abs(a.minY - b.minY), Math.abs(a.maxX - b.maxX), Math.abs(a.maxY - b.maxY)) <= doubled

function isAround({ path: outer, box }: Edge, path: Path, inner: Box): boolean {
  if (inner.minX > box.maxX || inner.maxX < box.minX || inner.minY > box.maxY || inner.maxY < box.minY) return false
  // By most of a few corners: a contour that touches another one lies on neither side with all of them.
  const places = [0, 1, 2, 3, 4].map((i) => 2 * Math.floor((i * (path.length / 2 - 1)) / 5))
  return places.filter((i) => isInside(outer, path[i]!, path[i + 1]!)).length >= 3
}
