import type { GerberImage } from './read-gerber'
import type { Hole } from './drill-file.types'

/** The holes of a drill file in Gerber form: round flashes are holes, obround ones and strokes slots of their aperture's width. */
export function holesOfGerber(image: GerberImage): Hole[] {
  const holes: Hole[] = []
  const { flashes } = image
  for (let i = 0; i < flashes.x.length; i++) {
    const [x, y, halfX, halfY] = [flashes.x[i]!, flashes.y[i]!, flashes.halfX[i]!, flashes.halfY[i]!]
    const width = 2 * Math.min(halfX, halfY)
    const [dx, dy] = [halfX - width / 2, halfY - width / 2]
    const isSlot = dx > 1e-6 || dy > 1e-6
    holes.push(
      isSlot
        ? { x: x - dx, y: y - dy, toX: x + dx, toY: y + dy, diameter: width, plating: null }
        : { x, y, toX: null, toY: null, diameter: width, plating: null }
    )
  }
  for (const { points, aperture } of image.strokes) {
    const width = aperture.diameter ?? aperture.size?.[0] ?? 0
    holes.push({ x: points[0]!, y: points[1]!, toX: points.at(-2)!, toY: points.at(-1)!, diameter: width, plating: null })
  }
  return holes
}
