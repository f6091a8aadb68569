import { Resvg } from '@resvg/resvg-js'
import { describe, expect, it } from 'vitest'
import { palettePng } from './palette-png.server'

/** The pixels of a PNG as another program's decoder reads them, colours multiplied by alpha. */
function decoded(png: Uint8Array, width: number, height: number): number[] {
  const href = `data:image/png;base64,${Buffer.from(png).toString('base64')}`
  const image = `<image width="${width}" height="${height}" image-rendering="optimizeSpeed" href="${href}"/>`
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">${image}</svg>`
  return [...new Resvg(svg, { font: { loadSystemFonts: false } }).render().pixels]
}

describe('an indexed PNG', () => {
  it('gives back few colours exactly, transparent and half transparent ones too', () => {
    // 3 × 2 pixels: mask, finish, nothing; legend, mask at a half, nothing.
    const pixels = [...[11, 85, 102, 255, 220, 191, 120, 255, 0, 0, 0, 0], ...[245, 240, 228, 255, 6, 43, 51, 128, 0, 0, 0, 0]]
    const found = decoded(palettePng(Uint8Array.from(pixels), 3, 2), 3, 2)
    expect(found.map((value, i) => Math.abs(value - pixels[i]!)).every((off) => off <= 1)).toBe(true)
  })

  it('brings many colours into one palette, each near to what it was', () => {
    const [width, height] = [64, 64]
    const pixels = Uint8Array.from({ length: width * height * 4 }, (_, i) => {
      const [x, y] = [(i >> 2) % width, Math.floor((i >> 2) / width)]
      return [x * 4, y * 4, (x * y) % 256, 255][i % 4]!
    })
    const png = palettePng(pixels, width, height)
    const found = decoded(png, width, height)
    // The coarsest step is 85: half of it to the middle, as much again from the mean of those about it.
    for (let i = 0; i < pixels.length; i++) expect(Math.abs(found[i]! - pixels[i]!)).toBeLessThanOrEqual(85)
    const palette = Buffer.from(png).indexOf('PLTE')
    expect(Buffer.from(png).readUInt32BE(palette - 4)).toBeLessThanOrEqual(768)
  })
})
