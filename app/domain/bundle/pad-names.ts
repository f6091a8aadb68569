import { boxOf, emptyBox, growBox, type Box, type Path } from './geometry'
import { place, type Aperture, type Placing } from './gerber-apertures'
import type { DrawingWatch } from './gerber-canvas'

/** Names of one layer that are kept; what is past them is as if it had none. */
const mostNames = 50_000

/** The pads of one component: its name as written, how many there are, and the box around them in mm. */
export type NamedPads = { name: string; pads: number; box: Box }

/** How names are compared: tools write the same one in capitals or not. */
export const nameKey = (name: string): string => name.toUpperCase()

/**
 * Looks on while a copper layer is drawn and keeps which component's pads stand where, as its object attributes say. What is recorded for
 * blocks and steps has no name; a block that is flashed under a name has it.
 */
export class PadNames implements DrawingWatch {
  /** By `nameKey`. */
  readonly pads = new Map<string, NamedPads>()
  private current: NamedPads | null = null

  component(name: string | null): void {
    if (name === null) {
      this.current = null
      return
    }
    const key = nameKey(name)
    let known = this.pads.get(key)
    if (!known && this.pads.size < mostNames) {
      known = { name, pads: 0, box: emptyBox() }
      this.pads.set(key, known)
    }
    this.current = known ?? null
  }

  flash(x: number, y: number, { box }: Aperture, placing: Placing, isDark: boolean): void {
    if (!this.current || !isDark) return
    this.current.pads++
    for (const cx of [box.minX, box.maxX]) {
      for (const cy of [box.minY, box.maxY]) {
        const [dx, dy] = place(placing, cx, cy)
        growBox(this.current.box, x + dx, y + dy)
      }
    }
  }

  stroke(points: Path, aperture: Aperture, isDark: boolean): void {
    this.drawn(points, isDark, aperture.diameter ?? 0)
  }

  region(points: Path, isDark: boolean): void {
    this.drawn(points, isDark, 0)
  }

  /** Pads of odd forms are drawn rather than flashed. */
  private drawn(points: Path, isDark: boolean, width: number): void {
    if (!this.current || !isDark) return
    this.current.pads++
    const { minX, minY, maxX, maxY } = boxOf(points)
    growBox(this.current.box, minX, minY, width / 2)
    growBox(this.current.box, maxX, maxY, width / 2)
  }
}
