import type { BundleLayer, LayerPicture } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { drawLayer, isWithinLibrary, layerSvg, reaches, type LayerDrawing } from './draw-layer.server'
import { drawSides, type SideLayer, type Sides } from './draw-sides.server'
import type { DrawnPart } from './drawn-part'
import { boxOf, emptyBox, growBox, isEmptyBox, isInside, type Box, type Path } from './geometry'
import { inStackOrder } from './layer-order'
import type { CheckLimits } from './limits'
import type { BundleSource } from './tell-layers'
import { gerberOfContours, gerberOfHoles } from './write-gerber'

const singleLayers = ['copper', 'soldermask', 'paste', 'legend', 'outline'] as const
const onSides = { copper: 'copper', soldermask: 'soldermask', legend: 'silkscreen' } as const

const isReadable = (file: FileReading) => file.image !== null && file.image.problem === null
const drillsOf = (reading: BundleReading) => reading.files.filter((file) => file.layer.function.startsWith('drill'))
const holesOf = (reading: BundleReading) => drillsOf(reading).flatMap((file) => file.holes ?? [])

/**
 * The pictures of a bundle, part by part: what they show, both sides clipped by the outline, every single layer in the order of the
 * stack, and the sides' thumbnails. All are in mm with the same viewBox, in the board's own coordinates: a place (x, y) of the layers is drawn at
 * (x, 2 minY + height - y), and on the bottom side at (2 minX + width - x, the same).
 *
 * Sides need a closed outline and every layer that shows on them; a single layer needs only itself. What could not be read, goes beyond
 * what the library draws, or is too large, is left out. Only files that our own readers passed reach the library; outline and holes are
 * written anew from what was read.
 */
export async function* drawPictures(
  reading: BundleReading,
  source: BundleSource,
  limits: CheckLimits
): AsyncGenerator<DrawnPart, void> {
  const box = boxToShow(reading)
  if (!box) return
  yield { box }
  const drawer = drawerOf(reading, source)

  const sides = await drawBothSides(reading, drawer, limits)
  if (sides) yield sides

  let left = limits.layerPictureBytes
  const draw = async (layer: Omit<LayerPicture, 'svg'>, drawing: LayerDrawing | null) => {
    const svg = drawing && layerSvg(drawing, box)
    if (!svg || svg.length > Math.min(limits.pictureBytes, left)) return []
    left -= svg.length
    return [{ layer: { ...layer, svg } }]
  }
  for (const { file, fn } of layersToDraw(reading, limits)) {
    const { side, index } = file.layer
    const layer = { file: file.layer.file, function: fn, side, index }
    yield* await draw(layer, fn === 'outline' ? await drawOutline(reading, drawer, box) : await drawer.take(file))
  }
  const holes = drillsOf(reading).every(isReadable) ? holesOf(reading) : []
  if (holes.length > 0 && holes.length <= limits.pictureObjects) {
    const drawing = await orNull(() => drawLayer(gerberOfHoles(holes), 'holes'))
    yield* await draw({ file: null, function: 'drill', side: null, index: null }, drawing)
  }
  if (!sides) return
  // Loaded only now and drawn last: what goes wrong in the renderer's native code ends the process.
  const { drawThumbnail } = await import('./draw-thumbnail.server')
  const thumbnails = await orNull(async () => ({ top: drawThumbnail(sides.top), bottom: drawThumbnail(sides.bottom) }))
  if (thumbnails) yield { thumbnails }
}

/** The outline's box; without a closed outline that of its strokes, or of the copper. */
function boxToShow({ outline, outlineFile, files }: BundleReading): Box | null {
  if (outline?.contour && !outlineFile?.isBroken) return boxOf(outline.contour)
  const copper = files.filter((file) => file.layer.function === 'copper' && isReadable(file))
  const box = outlineFile?.image?.box ?? joined(copper.flatMap((file) => file.image!.box ?? []))
  return box && box.maxX > box.minX && box.maxY > box.minY ? box : null
}

function joined(boxes: readonly Box[]): Box | null {
  const all = emptyBox()
  for (const box of boxes) {
    growBox(all, box.minX, box.minY)
    growBox(all, box.maxX, box.maxY)
  }
  return isEmptyBox(all) ? null : all
}

type Drawer = {
  /** The file's drawing, kept for the next time; null where it cannot be drawn. */
  look: (file: FileReading) => Promise<LayerDrawing | null>
  /** As `look`, for the last time. */
  take: (file: FileReading) => Promise<LayerDrawing | null>
}

/** Draws a file once, although its side and its own picture both want it. */
function drawerOf(reading: BundleReading, source: BundleSource): Drawer {
  const entries = new Map(source.entries.map((entry) => [entry.path, entry]))
  const kept = new Map<FileReading, LayerDrawing | null>()
  const look = async (file: FileReading) => {
    if (!kept.has(file)) {
      const gerber = Buffer.from(await source.read(entries.get(file.path)!))
      const id = `l${reading.files.indexOf(file)}`
      const drawing = isWithinLibrary(gerber, file.image!) ? await orNull(() => drawLayer(gerber, id)) : null
      kept.set(file, drawing && file.image!.box && reaches(drawing, file.image!.box) ? drawing : null)
    }
    return kept.get(file)!
  }
  const take = async (file: FileReading) => {
    const drawing = await look(file)
    kept.delete(file)
    return drawing
  }
  return { look, take }
}

/** What the library cannot make sense of is not drawn; the rest is. */
const orNull = <T>(draw: () => Promise<T>): Promise<T | null> => draw().catch(() => null)

async function drawBothSides(reading: BundleReading, drawer: Drawer, limits: CheckLimits): Promise<Sides | null> {
  const contour = reading.outline?.contour
  if (!contour || reading.outlineFile?.isBroken) return null
  const wanted = reading.files.filter(
    ({ layer }) => layer.function in onSides && (layer.side === 'top' || layer.side === 'bottom')
  )
  const files = wanted.filter((file) => file.kind !== 'empty')
  if (![...files, ...drillsOf(reading)].every(isReadable)) return null
  const shown = files.filter((file) => file.image!.objects > 0)
  if (shown.reduce((sum, file) => sum + file.image!.objects, 0) > limits.pictureObjects) return null
  const layers: SideLayer[] = []
  for (const file of shown) {
    const drawing = await drawer.look(file)
    if (!drawing) return null
    const { function: fn, side } = file.layer
    layers.push({ drawing, type: onSides[fn as keyof typeof onSides], side: side as 'top' | 'bottom' })
  }
  const contours = [contour, ...cutOuts(reading.outline!.others, contour)]
  const sides = await orNull(() => drawSides(layers, contours, holesOf(reading), boxOf(contour)))
  return sides && Math.max(sides.top.length, sides.bottom.length) <= limits.pictureBytes ? sides : null
}

/** Readable layers with something on them in the order of the stack, as many as their number and their objects allow. */
function layersToDraw(reading: BundleReading, limits: CheckLimits) {
  const byLayer = new Map<BundleLayer, FileReading>(reading.files.map((file) => [file.layer, file]))
  const wanted: { file: FileReading; fn: (typeof singleLayers)[number] }[] = []
  let left = limits.layerPictureObjects
  for (const layer of inStackOrder([...byLayer.keys()])) {
    const file = byLayer.get(layer)!
    const fn = singleLayers.find((name) => name === layer.function)
    if (!fn || !isReadable(file) || (fn === 'outline' && file !== reading.outlineFile)) continue
    const { objects } = file.image!
    if (objects === 0 || objects > Math.min(limits.pictureObjects, left) || wanted.length >= limits.layerPictures) continue
    left -= objects
    wanted.push({ file, fn })
  }
  return wanted
}

/** The board's edge and its cut-outs in a line that can be seen; where it does not close, the file as it is. */
async function drawOutline(reading: BundleReading, drawer: Drawer, box: Box): Promise<LayerDrawing | null> {
  const { contour, others } = reading.outline!
  if (!contour || reading.outlineFile!.isBroken) return drawer.take(reading.outlineFile!)
  // Half of the line lies outside the picture.
  const width = Math.max(0.1, Math.max(box.maxX - box.minX, box.maxY - box.minY) / 250)
  return orNull(() => drawLayer(gerberOfContours([contour, ...cutOuts(others, contour)], width), 'edge'))
}

/** Contours inside the board that are large enough to be cut-outs; what lies outside is a title or a dimension. */
function cutOuts(others: readonly Path[], contour: Path): Path[] {
  return others.slice(0, 500).filter((path) => {
    const box = boxOf(path)
    const isLarge = box.maxX - box.minX > 0.5 && box.maxY - box.minY > 0.5
    return isLarge && isInside(contour, path[0]!, path[1]!)
  })
}
