import { markOf, joined, addContour, addPoint, addStroke, WaveSum, type Mark } from './geometry-sums'
import type { Path } from './geometry'
import { upright, type Aperture, type Placing } from './gerber-apertures'
import type { DrawingWatch } from './gerber-canvas'

/** The sums of one Gerber layer while it is drawn: flashes, strokes and regions each by themselves, with dark and clear told apart. */
export class LayerSums implements DrawingWatch {
  readonly flashes = new WaveSum()
  readonly strokes = new WaveSum()
  readonly regions = new WaveSum()

  flash(x: number, y: number, aperture: Aperture, placing: Placing, isDark: boolean): void {
    this.flashes.objects++
    addPoint(this.flashes, x, y, placing === upright ? aperture.mark : placedMark(aperture, placing), isDark)
  }

  stroke(points: Path, aperture: Aperture, isDark: boolean): void {
    this.strokes.objects++
    addStroke(this.strokes, points, aperture.mark, isDark)
  }

  region(points: Path, isDark: boolean): void {
    this.regions.objects++
    addContour(this.regions, points, isDark)
  }
}

/** The mark of an aperture that may be mirrored, turned or scaled where it is flashed. */
function placedMark({ mark, shape }: Aperture, { mirrorX, mirrorY, rotation, scale }: Placing): Mark {
  const isRound = shape === 'circle'
  const turn = ((Math.round(rotation * 100) % 36_000) + 36_000) % 36_000
  const size = Math.round(scale * 1e4)
  const flips = (mirrorX ? 1 : 0) + (mirrorY ? 2 : 0)
  if (size === 1e4 && (isRound || (flips === 0 && turn === 0))) return mark
  return joined(mark, isRound ? markOf(size) : markOf(size, flips, turn))
}
