import { sizedMark } from './aperture-mark'
import type { LayerFingerprint } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { addContour, addPoint, addStroke, seenFrom, WaveSum } from './geometry-sums'
import type { Hole } from './drill-file.types'

/** Where positions are counted from, in mm. */
type Origin = { x: number; y: number }

/**
 * Fingerprints of the geometry of each copper layer, of the board's outline and of all drilled holes together.
 *
 * Each is a text that holds, for each kind of object, how many there are and a sum of waves over their points (`WaveSum`), seen from the middle
 * of all points; and where that middle lies from the lower left corner of the outline's box. So the order of objects, aperture and tool
 * numbers, comments, dates, attributes, units and where 0, 0 lies leave no trace, and rounding to another unit leaves one that
 * `isSameGeometry` tells from a change. They are to be compared by that, never as texts.
 *
 * Files that were found broken have none, and with any of the drill files broken the holes have none.
 */
export function fingerprintsOf(reading: BundleReading): LayerFingerprint[] {
  const { outline, outlineFile } = reading
  const hasOutline = outline?.box && outlineFile && !outlineFile.isBroken && !outlineFile.image?.problem
  const origin = hasOutline ? { x: outline.box!.minX, y: outline.box!.minY } : null
  const prints: LayerFingerprint[] = []
  for (const file of reading.files) {
    const { sums, image } = file
    if (file.layer.function !== 'copper' || !sums || !image || image.problem || file.isBroken) continue
    const fingerprint = textOf({ f: sums.flashes, s: sums.strokes, r: sums.regions }, origin, image.resolution)
    const { side, index } = file.layer
    if (fingerprint) prints.push({ function: 'copper', side, index, file: file.layer.file, fingerprint })
  }
  if (hasOutline) prints.push(outlinePrint(reading, origin))
  const drill = drillPrint(reading, origin)
  if (drill) prints.push(drill)
  return prints
}

/** The edge and the cut-outs; what else the layer carries (titles, measures) lies outside or does not close. */
function outlinePrint({ outline, outlineFile }: BundleReading, origin: Origin | null): LayerFingerprint {
  const [edge, cutOuts] = [new WaveSum(), new WaveSum()]
  edge.objects = 1
  addContour(edge, outline!.contour!)
  const board = outline!.box!
  for (const contour of outline!.others) {
    const [x, y] = [contour[0]!, contour[1]!]
    if (x < board.minX || x > board.maxX || y < board.minY || y > board.maxY) continue
    cutOuts.objects++
    addContour(cutOuts, contour)
  }
  const fingerprint = textOf({ e: edge, c: cutOuts }, origin, outlineFile!.image!.resolution)!
  return { function: 'outline', side: null, index: null, file: outlineFile!.layer.file, fingerprint }
}

function drillPrint(reading: BundleReading, origin: Origin | null): LayerFingerprint | null {
  const files = reading.files.filter((file) => file.layer.function.startsWith('drill'))
  if (files.length === 0 || files.some((file) => file.isBroken || !file.holes || file.image?.problem)) return null
  const sums = { p: new WaveSum(), n: new WaveSum(), u: new WaveSum() }
  for (const file of files) for (const hole of file.holes!) addHole(sums[platingOf(file, hole)], hole)
  const resolution = Math.max(...files.map((file) => file.image?.resolution ?? 0))
  const fingerprint = textOf(sums, origin, resolution)
  const file = files.map((f) => f.layer.file).join(', ')
  return fingerprint ? { function: 'drill', side: null, index: null, file, fingerprint } : null
}

function platingOf({ layer }: FileReading, { plating }: Hole): 'p' | 'n' | 'u' {
  if (plating !== null) return plating === 'plated' ? 'p' : 'n'
  return layer.function === 'drill-plated' ? 'p' : layer.function === 'drill-nonplated' ? 'n' : 'u'
}

function addHole(sum: WaveSum, { x, y, toX, toY, diameter }: Hole): void {
  sum.objects++
  if (toX === null || toY === null) addPoint(sum, x, y, sizedMark(5, [diameter]))
  else addStroke(sum, [x, y, toX, toY], sizedMark(6, [diameter]))
}

/** Version, step of the coordinates in nm, where the outline's corner lies in nm, middle in µm from it, then per kind its name, objects, points and waves. */
function textOf(sums: Record<string, WaveSum>, origin: Origin | null, resolution: number): string | null {
  const all = Object.entries(sums)
  const points = all.reduce((sum, [, { points: n }]) => sum + n, 0)
  if (points === 0) return null
  const x = all.reduce((sum, [, { sumX }]) => sum + sumX, 0) / points
  const y = all.reduce((sum, [, { sumY }]) => sum + sumY, 0) / points
  const middle = origin ? `${((x - origin.x) * 1000).toFixed(2)},${((y - origin.y) * 1000).toFixed(2)}` : '-'
  const kinds = all.map(([name, sum]) => {
    const waves = seenFrom(sum, x, y).map((value) => value.toFixed(2).replace(/^-?0\.00$/, '0'))
    return `${name}:${sum.objects}:${sum.points}:${waves.join(',')}`
  })
  const corner = origin ? `${Math.round(origin.x * 1e6)},${Math.round(origin.y * 1e6)}` : '-'
  return ['1', (resolution * 1e6).toFixed(1), corner, middle, ...kinds].join(' ')
}
