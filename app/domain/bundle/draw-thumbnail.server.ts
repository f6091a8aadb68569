import { Resvg } from '@resvg/resvg-js'
import { palettePng } from './palette-png.server'

/** The longer side of a thumbnail in pixels: sharp in a list, where the widest board stands 540 px wide. */
const longest = 720

/**
 * A cleaned picture of a side as PNG on a transparent ground. No font and no other file is read.
 *
 * @param svg of `cleanSvg`
 * @throws Error from the renderer
 */
export function drawThumbnail(svg: string): Uint8Array {
  const [, width, height] = /viewBox="\S+ \S+ (\S+) (\S+)"/.exec(svg) ?? []
  const mode = Number(width) >= Number(height) ? 'width' : 'height'
  const renderer = new Resvg(svg, { fitTo: { mode, value: longest }, font: { loadSystemFonts: false }, logLevel: 'off' })
  const { pixels, width: across, height: down } = renderer.render()
  return palettePng(pixels, across, down)
}
