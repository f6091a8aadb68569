import { boxOf, emptyBox, growBox, type Box, type Path } from './geometry'
import { place, type Aperture, type Placing, type Recorded } from './gerber-apertures'
import { TooComplex } from './gerber-macro'
import type { CheckLimits } from './limits'

/** Flashes as parallel lists: where, half their width and height in mm, and the aperture (null for a small area that may be a pad). */
export type Flashes = { x: number[]; y: number[]; halfX: number[]; halfY: number[]; aperture: (Aperture | null)[] }

/** Areas up to this size in mm may be pads. */
const largestPad = 8
/** Strokes from this width in mm may be pads. */
const leastPadStroke = 1

export type Stroke = { points: Path; aperture: Aperture }

/** Looks on while a layer is drawn, object by object with blocks and steps counted out, clear ones among them; keeps what it needs. */
export type DrawingWatch = {
  stroke(points: Path, aperture: Aperture, isDark: boolean): void
  region(points: Path, isDark: boolean): void
  flash(x: number, y: number, aperture: Aperture, placing: Placing, isDark: boolean): void
  /** The component that the objects from here on belong to; null for none. */
  component?(name: string | null): void
}

/** Which objects to keep besides counting them, and who looks on. */
export type Keeping = { strokes: boolean; flashes: boolean; watches?: readonly DrawingWatch[] }

/**
 * What a Gerber file draws, as far as a check needs it: extents, strokes, flashes, the thinnest lines; within a budget of objects.
 * Blocks and steps are recorded once and drawn again at each of their places.
 */
export class GerberCanvas {
  readonly box: Box = emptyBox()
  readonly flashes: Flashes = { x: [], y: [], halfX: [], halfY: [], aperture: [] }
  readonly strokes: Stroke[] = []
  readonly regions: Path[] = []
  /** Objects drawn dark, copies counted out. */
  objects = 0
  smallestConductor: number | null = null
  smallestStroke: number | null = null
  private operations = 0
  private shapes = 0
  private readonly recorders: { prims: Recorded[]; objects: number }[] = []

  constructor(
    private readonly limits: CheckLimits,
    private readonly keep: Keeping
  ) {}

  /** Counts work; throws TooComplex past the budget. */
  spend(count: number): void {
    this.operations += count
    if (this.operations > this.limits.gerberObjects) throw new TooComplex(`more than ${this.limits.gerberObjects} drawn objects`)
  }

  path(points: Path, aperture: Aperture, isDark: boolean): void {
    this.spend(1)
    const recorder = this.recorders.at(-1)
    if (recorder) {
      recorder.objects++
      recorder.prims.push({ kind: 'path', points, aperture, isDark })
    } else this.drawPath(points, aperture, isDark)
  }

  region(points: Path, isDark: boolean): void {
    this.spend(1)
    const recorder = this.recorders.at(-1)
    if (recorder) {
      recorder.objects++
      recorder.prims.push({ kind: 'region', points, isDark })
    } else this.drawRegion(points, isDark)
  }

  flash(x: number, y: number, aperture: Aperture, placing: Placing, isDark: boolean): void {
    const recorder = this.recorders.at(-1)
    if (recorder) {
      this.spend(1)
      recorder.objects += aperture.objects
      recorder.prims.push({ kind: 'flash', x, y, aperture, placing, isDark })
    } else this.drawFlash(x, y, aperture, placing, isDark)
  }

  /** The component that the objects from here on belong to; what is recorded belongs to none. */
  component(name: string | null): void {
    if (this.recorders.length > 0) return
    for (const watch of this.keep.watches ?? []) watch.component?.(name)
  }

  /** From here on drawing is recorded, until `takeRecorded`. */
  record(): void {
    if (this.recorders.length >= this.limits.blockDepth)
      throw new TooComplex(`blocks nested deeper than ${this.limits.blockDepth}`)
    this.component(null)
    this.recorders.push({ prims: [], objects: 0 })
  }

  takeRecorded(): { prims: Recorded[]; objects: number } {
    return this.recorders.pop() ?? { prims: [], objects: 0 }
  }

  get recording(): number {
    return this.recorders.length
  }

  /** Draws what was recorded, moved by (dx, dy) after being placed. */
  replay(recorded: { prims: Recorded[]; objects: number }, dx: number, dy: number, placing: Placing, isDark: boolean): void {
    for (const prim of recorded.prims) {
      // Clear copies of a block turn its polarity round (specification, 4.11).
      const dark = isDark ? prim.isDark : !prim.isDark
      if (prim.kind === 'flash') {
        const [x, y] = place(placing, prim.x, prim.y)
        this.flash(x + dx, y + dy, prim.aperture, combined(placing, prim.placing), dark)
      } else {
        const points: Path = []
        for (let i = 0; i < prim.points.length; i += 2) {
          const [x, y] = place(placing, prim.points[i]!, prim.points[i + 1]!)
          points.push(x + dx, y + dy)
        }
        if (prim.kind === 'path') this.path(points, prim.aperture, dark)
        else this.region(points, dark)
      }
    }
  }

  private drawPath(points: Path, aperture: Aperture, isDark: boolean): void {
    for (const watch of this.keep.watches ?? []) watch.stroke(points, aperture, isDark)
    if (!isDark) return
    this.objects++
    const halfX = (aperture.box.maxX - aperture.box.minX) / 2
    const halfY = (aperture.box.maxY - aperture.box.minY) / 2
    for (let i = 0; i < points.length; i += 2) growBox(this.box, points[i]!, points[i + 1]!, halfX, halfY)
    if (aperture.diameter !== null) {
      if (this.smallestStroke === null || aperture.diameter < this.smallestStroke) this.smallestStroke = aperture.diameter
      if (
        aperture.aperFunction === 'Conductor' &&
        (this.smallestConductor === null || aperture.diameter < this.smallestConductor)
      ) {
        this.smallestConductor = aperture.diameter
      }
    }
    if (this.keep.strokes) this.strokes.push({ points, aperture })
    else if (this.keep.flashes && points.length === 4 && halfX >= leastPadStroke / 2) this.keepPadStroke(points, halfX, halfY)
  }

  /** Some tools draw long pads as one short thick stroke: for alignment these count as flashes. */
  private keepPadStroke(points: Path, halfX: number, halfY: number): void {
    const [x0, y0, x1, y1] = points as [number, number, number, number]
    const [reachX, reachY] = [Math.abs(x1 - x0) / 2, Math.abs(y1 - y0) / 2]
    if (reachX + reachY > 3 * halfX || (reachX > 1e-6 && reachY > 1e-6)) return
    this.keepFlash((x0 + x1) / 2, (y0 + y1) / 2, reachX + halfX, reachY + halfY, null)
  }

  private drawRegion(points: Path, isDark: boolean): void {
    if (points.length < 6) return
    for (const watch of this.keep.watches ?? []) watch.region(points, isDark)
    if (!isDark) return
    this.objects++
    const box = boxOf(points)
    growBox(this.box, box.minX, box.minY)
    growBox(this.box, box.maxX, box.maxY)
    if (this.keep.strokes) this.regions.push(points)
    // Some tools draw pads as small areas: for alignment these count as flashes.
    if (this.keep.flashes && box.maxX - box.minX <= largestPad && box.maxY - box.minY <= largestPad) {
      this.keepFlash(
        (box.minX + box.maxX) / 2,
        (box.minY + box.maxY) / 2,
        (box.maxX - box.minX) / 2,
        (box.maxY - box.minY) / 2,
        null
      )
    }
  }

  private drawFlash(x: number, y: number, aperture: Aperture, placing: Placing, isDark: boolean): void {
    this.spend(1)
    if (aperture.block) {
      if (this.operations + aperture.objects > this.limits.gerberObjects) {
        throw new TooComplex(`a block of ${aperture.objects} objects, in all more than ${this.limits.gerberObjects}`)
      }
      this.replay({ prims: aperture.block, objects: aperture.objects }, x, y, placing, isDark)
      return
    }
    this.shapes += aperture.primitives
    if (this.shapes > this.limits.macroShapes)
      throw new TooComplex(`more than ${this.limits.macroShapes} shapes in aperture macros`)
    for (const watch of this.keep.watches ?? []) watch.flash(x, y, aperture, placing, isDark)
    if (!isDark) return
    this.objects++
    const { minX, minY, maxX, maxY } = aperture.box
    const corners = [
      place(placing, minX, minY),
      place(placing, maxX, minY),
      place(placing, maxX, maxY),
      place(placing, minX, maxY)
    ]
    let halfX = 0
    let halfY = 0
    for (const [cx, cy] of corners) {
      growBox(this.box, x + cx, y + cy)
      halfX = Math.max(halfX, Math.abs(cx))
      halfY = Math.max(halfY, Math.abs(cy))
    }
    if (this.keep.flashes) this.keepFlash(x, y, halfX, halfY, aperture)
  }

  private keepFlash(x: number, y: number, halfX: number, halfY: number, aperture: Aperture | null): void {
    this.flashes.x.push(x)
    this.flashes.y.push(y)
    this.flashes.halfX.push(halfX)
    this.flashes.halfY.push(halfY)
    this.flashes.aperture.push(aperture)
  }
}

/** One placing after another, near enough for extents: exact for quarter turns and unmirrored turns. */
function combined(outer: Placing, inner: Placing): Placing {
  const turned = outer.mirrorX !== outer.mirrorY ? -inner.rotation : inner.rotation
  return {
    mirrorX: outer.mirrorX !== inner.mirrorX,
    mirrorY: outer.mirrorY !== inner.mirrorY,
    rotation: outer.rotation + turned,
    scale: outer.scale * inner.scale
  }
}
