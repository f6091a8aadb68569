import { createHash } from 'node:crypto'
import pcbStackup from 'pcb-stackup'
import { cleanSvg } from './clean-svg'
import type { Box } from './geometry'
import type { GerberImage } from './read-gerber'

/** A Gerber file drawn by the library, before it is part of a picture: what its converter holds, in µm. */
export type LayerDrawing = Pick<
  pcbStackup.InputLayer['converter'] & object,
  'id' | 'attributes' | 'defs' | 'layer' | 'viewBox' | 'width' | 'height' | 'units'
>

/**
 * The ink of a single layer: in light and dark it stands on paper at 3.5 and more. What is not drawn is transparent, so that a page can
 * give a layer any other colour by its alpha (a CSS mask or an SVG filter).
 */
const ink = '#7d7565'

/**
 * Aperture blocks, mirrored, turned or scaled apertures, and changes of the whole image: the library passes over these commands, so that
 * the picture would be wrong.
 */
const beyond =
  /[%*]\s*(AB|LM[XY]|LR-?0*\.?0*[1-9]|LS(?!1(\.0*)?\*)|MI(A1|A0*B1|B1)|SF[AB](?!1(\.0*)?(B1(\.0*)?)?\*)|OF[AB]-?[0B.]*[1-9]|FS[LTD]?I)/

/** Whether the library can draw this Gerber file, which our own reader passed, as it is meant. */
export function isWithinLibrary(gerber: Uint8Array, image: Pick<GerberImage, 'deprecated'>): boolean {
  if (image.deprecated.includes('G91') || image.deprecated.includes('decimal points in coordinates')) return false
  return !beyond.test(Buffer.from(gerber.buffer, gerber.byteOffset, gerber.byteLength).toString('latin1'))
}

/**
 * Draws one Gerber file that our own reader passed.
 *
 * @param id for the ids inside; the same file with the same id gives the same drawing
 * @param isOutline whether its strokes are a contour that clips
 * @throws Error from the library, where it cannot make sense of the file
 */
export async function drawLayer(gerber: string | Buffer, id: string, isOutline = false): Promise<LayerDrawing> {
  // An inner layer is on no side: the library converts it and stacks nothing.
  const options = { id, plotAsOutline: isOutline }
  const { layers } = await pcbStackup([{ gerber, type: 'copper', side: 'inner', options }], { id: 'none' })
  const { attributes, defs, layer, viewBox, width, height, units } = layers[0]!.converter
  if (units !== 'in') return { id, attributes, defs, layer, viewBox, width, height, units: 'mm' }
  // The library chooses a unit for each side and then adds the sides' boxes, whatever their units: it gets one unit only.
  const inMm = layer.length > 0 ? [`<g transform="scale(25.4)">${layer.join('')}</g>`] : []
  const box = viewBox.map((value) => value * 25.4)
  return { id, attributes, defs, layer: inMm, viewBox: box, width: width * 25.4, height: height * 25.4, units: 'mm' }
}

/** Two readers round arcs differently by this much, in mm; a part that is missing or elsewhere is further off. */
const tolerance = 0.1

/** Whether a drawing reaches as far as our own reader measured (mm): otherwise the library understood the file differently. */
export function reaches({ viewBox }: LayerDrawing, box: Box): boolean {
  const [x, y, width, height] = viewBox.map((value) => value / 1000) as [number, number, number, number]
  const isWide = x - box.minX <= tolerance && box.maxX - (x + width) <= tolerance
  return isWide && y - box.minY <= tolerance && box.maxY - (y + height) <= tolerance
}

/** What the ids of a picture begin with: pictures of several releases may stand in one page, so they carry what was drawn. */
export function markOf(...drawn: string[]): string {
  const hash = createHash('sha256')
  for (const text of drawn) hash.update(text)
  return hash.digest('hex').slice(0, 8)
}

/**
 * A drawing as a picture of its own: in one ink on nothing, seen from the top.
 *
 * @param box what the picture shows, in mm
 * @returns null where nothing is drawn, or anything is in it that a picture does not hold
 */
export function layerSvg({ defs, layer }: LayerDrawing, box: Box): string | null {
  if (layer.length === 0) return null
  // The file's y points up; the same place as on the drawing of the top side.
  const turn = `translate(0,${(box.minY + box.maxY) * 1000}) scale(1,-1)`
  const svg =
    '<svg stroke-linecap="round" stroke-linejoin="round" stroke-width="0" fill-rule="evenodd" clip-rule="evenodd">' +
    `<defs>${defs.join('')}</defs><g fill="${ink}" stroke="${ink}" transform="${turn}">${layer.join('')}</g></svg>`
  return cleanSvg(svg, `l${markOf(svg)}-`, {}, box)
}
