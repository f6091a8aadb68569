import { crc32, deflateSync } from 'node:zlib'

/** Colours of a palette (PNG, W3C, 11.2.2). */
const most = 256

/** How coarsely channels are told apart, from fine to coarse, until the palette holds all colours; of the last there are 4 × 4 × 4 × 4. */
const steps = [8, 12, 17, 25, 36, 51, 85]

/**
 * Pixels as an indexed-colour PNG: a third of the size of full colour for a drawing in few inks. Colours that are told apart no more are
 * shown as their mean.
 *
 * @param pixels red, green, blue, alpha of each pixel from the top left; the colours multiplied by alpha, as renderers keep them
 * Source: Portable Network Graphics (PNG) Specification, Third Edition, W3C: chapters 5, 9, 11.
 */
export function palettePng(pixels: Uint8Array, width: number, height: number): Uint8Array {
  for (const step of steps) {
    const indexed = index(pixels, width, height, step)
    if (indexed) return write(indexed.lines, indexed.palette, width, height)
  }
  throw new RangeError('More colours than the coarsest step has')
}

type Color = { red: number; green: number; blue: number; alpha: number; count: number }

/** One byte a pixel, each line after a byte 0 for "not filtered"; null where the colours are more than a palette holds. */
function index(pixels: Uint8Array, width: number, height: number, step: number) {
  const places = new Map<number, number>()
  const palette: Color[] = []
  const lines = new Uint8Array((width + 1) * height)
  const levels = Math.round(255 / step) + 1
  for (let y = 0, from = 0, to = 0; y < height; y++) {
    to++
    for (let x = 0; x < width; x++, from += 4, to++) {
      const alpha = Math.round(pixels[from + 3]! / step)
      const [red, green, blue] = [pixels[from]!, pixels[from + 1]!, pixels[from + 2]!]
      const near = [red, green, blue].map((value) => Math.round(value / step)) as [number, number, number]
      const key = alpha === 0 ? -1 : ((near[0] * levels + near[1]) * levels + near[2]) * levels + alpha
      let place = places.get(key)
      if (place === undefined) {
        if (palette.length === most) return null
        place = palette.push({ red: 0, green: 0, blue: 0, alpha: 0, count: 0 }) - 1
        places.set(key, place)
      }
      const color = palette[place]!
      color.red += red
      color.green += green
      color.blue += blue
      color.alpha += key === -1 ? 0 : pixels[from + 3]!
      color.count++
      lines[to] = place
    }
  }
  return { lines, palette }
}

/** A channel of the mean colour as PNG keeps it, not multiplied by alpha. */
const channel = (sum: number, { alpha }: Color) => (alpha === 0 ? 0 : Math.min(255, Math.round((sum * 255) / alpha)))

function write(lines: Uint8Array, palette: readonly Color[], width: number, height: number): Uint8Array {
  const head = Buffer.alloc(13)
  head.writeUInt32BE(width, 0)
  head.writeUInt32BE(height, 4)
  // Eight bits an index, colour type 3: indexed.
  head.set([8, 3, 0, 0, 0], 8)
  return Buffer.concat([
    Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
    chunk('IHDR', head),
    chunk('PLTE', Buffer.from(palette.flatMap((c) => [channel(c.red, c), channel(c.green, c), channel(c.blue, c)]))),
    chunk('tRNS', Buffer.from(palette.map(({ alpha, count }) => Math.round(alpha / count)))),
    chunk('IDAT', deflateSync(lines, { level: 9 })),
    chunk('IEND', Buffer.alloc(0))
  ])
}

function chunk(type: string, content: Uint8Array): Buffer {
  const named = Buffer.concat([Buffer.from(type, 'latin1'), content])
  const [length, sum] = [Buffer.alloc(4), Buffer.alloc(4)]
  length.writeUInt32BE(content.length)
  sum.writeUInt32BE(crc32(named))
  return Buffer.concat([length, named, sum])
}
