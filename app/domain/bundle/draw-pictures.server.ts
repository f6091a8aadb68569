import { createHash } from 'node:crypto'
import pcbStackup from 'pcb-stackup'
import type { BundlePictures } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { cleanSvg, type SvgPaint } from './clean-svg'
import { boxOf, isInside, type Path } from './geometry'
import type { CheckLimits } from './limits'
import type { BundleSource } from './read-bundle.server'
import { gerberOfContours, gerberOfHoles } from './write-gerber'

/** Mask in petrol at 80 %, finish and legend as every board picture of Fettle's has them. */
const paints: Record<string, SvgPaint> = {
  fr4: { color: '#6f6a4a' },
  cu: { color: '#c9a961' },
  cf: { color: '#dcbf78' },
  sm: { color: '#0b5566', opacity: '0.8' },
  ss: { color: '#f5f0e4' }
}

const drawnAs = { copper: 'copper', soldermask: 'soldermask', legend: 'silkscreen' } as const

/**
 * Both sides of the board as SVG in mm, clipped by the outline; null where there is no closed outline, a layer could not be read, or the
 * picture would be too large. The viewBox is in the board's own coordinates: a place (x, y) of the layers is drawn at
 * (x, 2 minY + height - y) on the top side, and at (2 minX + width - x, the same) on the bottom side.
 *
 * Only files that our own readers passed reach the drawing library; outline and holes are written anew from what was read.
 */
export async function drawPictures(
  reading: BundleReading,
  source: BundleSource,
  limits: CheckLimits
): Promise<BundlePictures | null> {
  const contour = reading.outline?.contour
  if (!contour || reading.outlineFile?.isBroken) return null
  const wanted = reading.files.filter(
    (file) => file.layer.function in drawnAs && file.layer.side !== 'inner' && file.layer.side !== null
  )
  const drills = reading.files.filter((file) => file.layer.function.startsWith('drill'))
  const isReadable = (file: FileReading) => file.image !== null && file.image.problem === null
  if (![...wanted.filter((file) => file.kind !== 'empty'), ...drills].every(isReadable)) return null
  const layers = wanted.filter((file) => isReadable(file) && file.image!.objects > 0)
  if (layers.reduce((sum, file) => sum + file.image!.objects, 0) > limits.pictureObjects) return null

  const byPath = new Map(source.entries.map((entry) => [entry.path, entry]))
  const inputs: pcbStackup.InputLayer[] = [
    { gerber: gerberOfContours([contour, ...cutOuts(reading.outline!.others, contour)]), type: 'outline', side: 'all' }
  ]
  for (const file of layers) {
    const gerber = Buffer.from(await source.read(byPath.get(file.path)!))
    const { function: fn, side } = file.layer
    inputs.push({ gerber, type: drawnAs[fn as keyof typeof drawnAs], side: side as 'top' | 'bottom' })
  }
  const holes = drills.flatMap((file) => file.holes ?? [])
  if (holes.length > 0) inputs.push({ gerber: gerberOfHoles(holes), type: 'drill', side: 'all' })

  const stackup = await pcbStackup(inputs, { id: 'board', useOutline: true })
  // The library draws in thousandths of the unit that most layers use.
  const draw = (side: 'top' | 'bottom', prefix: string) =>
    cleanSvg(stackup[side].svg, prefix, paints, stackup[side].units === 'in' ? 0.0254 : 0.001)
  // Pictures of several releases may stand in one page: the ids carry what was drawn.
  const mark = createHash('sha256').update(stackup.top.svg).update(stackup.bottom.svg).digest('hex').slice(0, 8)
  const [top, bottom] = [draw('top', `t${mark}-`), draw('bottom', `b${mark}-`)]
  if (!top || !bottom || Math.max(top.length, bottom.length) > limits.pictureBytes) return null
  return { top, bottom, thumbnails: null, layers: [] }
}

/** Contours inside the board that are large enough to be cut-outs; what lies outside is a title or a dimension. */
function cutOuts(others: readonly Path[], contour: Path): Path[] {
  return others.slice(0, 500).filter((path) => {
    const box = boxOf(path)
    const isLarge = box.maxX - box.minX > 0.5 && box.maxY - box.minY > 0.5
    return isLarge && isInside(contour, path[0]!, path[1]!)
  })
}
