import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { beforeAll, describe, expect, it } from 'vitest'
import { demoFiles, zipOf } from '../../../tests/factories/demo-bundle'
import type { BundlePictures } from './bundle-check.types'
import { checkBundle } from './check-bundle.server'
import { drawPictures } from './draw-pictures.server'
import { somePictures, withPart } from './drawn-part'
import { defaultLimits, type CheckLimits } from './limits'

const at = (path: string) => fileURLToPath(new URL(`../../../${path}`, import.meta.url))

async function drawn(bundle: string | Buffer, limits: Partial<CheckLimits> = {}): Promise<BundlePictures | null> {
  const { reading, source } = await checkBundle(typeof bundle === 'string' ? readFileSync(at(bundle)) : bundle)
  let pictures: BundlePictures | null = null
  for await (const part of drawPictures(reading!, source!, { ...defaultLimits, ...limits })) pictures = withPart(pictures, part)
  return somePictures(pictures)
}

const viewBox = (svg: string) => /^<svg [^>]*viewBox="([^"]*)"/.exec(svg)?.[1]
const harmful = /<(style|script|text|image|a|foreignObject)\b|\son\w+=|https?:\/\/(?!www\.w3\.org\/2000\/svg)/i

const four = 'db/seed/bundles/buttress-1.1.0.zip'

describe('the pictures of a board of four layers', () => {
  let pictures: BundlePictures
  beforeAll(async () => {
    pictures = (await drawn(four))!
  })

  it('are both sides and every layer in the order of the stack, the holes last', () => {
    expect(pictures.layers.map((layer) => [layer.function, layer.side, layer.index])).toEqual([
      ['copper', 'top', 1],
      ['copper', 'inner', 2],
      ['copper', 'inner', 3],
      ['copper', 'bottom', 4],
      ['soldermask', 'top', null],
      ['soldermask', 'bottom', null],
      ['paste', 'top', null],
      ['legend', 'top', null],
      ['legend', 'bottom', null],
      ['outline', null, null],
      ['drill', null, null]
    ])
    expect(pictures.layers.map((layer) => layer.file?.split('/').at(-1) ?? null).slice(0, 2)).toEqual([
      'buttress-F_Cu.gbr',
      'buttress-In1_Cu.gbr'
    ])
    expect(pictures.layers.at(-1)!.file).toBeNull()
  })

  it('lie over each other, and hold nothing that could run', () => {
    expect(pictures.box).toEqual({ minX: 0, minY: 0, maxX: 38, maxY: 14 })
    const all = [pictures.top!, pictures.bottom!, ...pictures.layers.map((layer) => layer.svg)]
    for (const svg of all) {
      expect(viewBox(svg)).toBe('0 0 38 14')
      expect(svg).not.toMatch(harmful)
      const ids = [...svg.matchAll(/ id="([^"]+)"/g)].map((m) => m[1])
      expect(new Set(ids).size).toBe(ids.length)
      for (const [, target] of svg.matchAll(/(?:href="#|url\(#)([^")]+)/g)) expect(ids).toContain(target)
    }
    const ids = all.flatMap((svg) => [...svg.matchAll(/ id="([^"]+)"/g)].map((m) => m[1]))
    expect(new Set(ids).size).toBe(ids.length)
  })

  it('are in finish and mask on the sides, and in one ink on nothing for a layer', () => {
    expect(pictures.top).toContain('color="#dcbf78"')
    for (const { svg } of pictures.layers) {
      expect(svg).not.toMatch(/color=|opacity=/)
      expect(svg).toContain('fill="#7d7565" stroke="#7d7565"')
    }
  })

  it('are the same whenever they are drawn', async () => {
    expect(await drawn(four)).toEqual(pictures)
  })

  it('have thumbnails of the board’s proportion', () => {
    for (const png of [pictures.thumbnails!.top, pictures.thumbnails!.bottom]) {
      // PNG (W3C), 11.2.1: signature, then IHDR with width, height, bit depth and colour type; 3 is indexed.
      const view = Buffer.from(png)
      expect(view.subarray(0, 8)).toEqual(Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]))
      expect([view.readUInt32BE(16), view.readUInt32BE(20), view[25]]).toEqual([720, 265, 3])
    }
    expect(pictures.thumbnails!.top).not.toEqual(pictures.thumbnails!.bottom)
  })
})

describe('a board in inches', () => {
  it('is drawn in mm', async () => {
    const { top, layers } = (await drawn('tests/fixtures/bundles/OC23-fx-wifi.zip'))!
    for (const svg of [top!, ...layers.map((layer) => layer.svg)]) expect(svg).toMatch(/width="20.32mm" height="35.56mm"/)
  })
})

describe('what cannot be drawn', () => {
  it('is left out where it would be too large', async () => {
    const small = (await drawn(four, { pictureBytes: 40_000 }))!
    expect([small.top, small.bottom, small.thumbnails]).toEqual([null, null, null])
    expect(small.layers.length).toBeGreaterThan(3)
    for (const { svg } of small.layers) expect(svg.length).toBeLessThanOrEqual(40_000)
    const few = (await drawn(four, { pictureObjects: 100 }))!
    expect(few.top).toBeNull()
    expect(few.layers.map((layer) => layer.function)).toContain('outline')
    expect(await drawn(four, { pictureBytes: 100 })).toBeNull()
  })

  it('leaves out single layers past their common limits, and the sides stand', async () => {
    expect((await drawn(four, { layerPictures: 2 }))!.layers.map((layer) => layer.function)).toEqual([
      'copper',
      'copper',
      'drill'
    ])
    const some = (await drawn(four, { layerPictureBytes: 50_000 }))!
    expect(some.top).not.toBeNull()
    expect(some.layers.reduce((sum, layer) => sum + layer.svg.length, 0)).toBeLessThanOrEqual(50_000)
  })

  it('are the sides where the outline is missing; the layers stand in the box of the copper', async () => {
    const open = (await drawn('tests/fixtures/bundles/OC40-gv-gedaold.zip'))!
    expect([open.top, open.bottom, open.thumbnails]).toEqual([null, null, null])
    expect(open.layers.map((layer) => layer.function)).toContain('copper')
    expect(new Set(open.layers.map((layer) => viewBox(layer.svg))).size).toBe(1)
  })
})

/** A demo bundle whose top legend has more in it. */
async function withLegend(more: string, name = 'gerber/buttress-F_Silkscreen.gbr'): Promise<Buffer> {
  const files = await demoFiles('buttress-1.1.0')
  const gerber = files.get(name)!.toString('latin1')
  files.set(name, Buffer.from(gerber.replace(/M02\*\s*$/, `${more}\nM02*\n`), 'latin1'))
  return zipOf(files)
}
const legend = (pictures: BundlePictures | null) => pictures!.layers.find((l) => l.function === 'legend' && l.side === 'top')

describe('a file that the library reads differently', () => {
  // Gerber Layer Format Specification 2024.05: 4.9 transformations, 4.11 blocks, 8.1.4 to 8.1.8 deprecated changes of the image.
  it.each([
    ['an aperture block', '%ABD90*%%ADD91C,0.2*%D91*X0Y0D03*%AB*%D90*X5000000Y5000000D03*'],
    ['a mirrored aperture', '%LMX*%%ADD90C,0.2*%D90*X5000000Y5000000D03*'],
    ['a turned aperture', '%LR45*%%ADD90R,2X0.2*%D90*X5000000Y5000000D03*'],
    ['a scaled aperture', '%LS2*%%ADD90C,0.2*%D90*X5000000Y5000000D03*'],
    ['an offset', '%OFA1B0*%']
  ])('with %s is not drawn, nor its side; the others are', async (_name, gerber) => {
    const pictures = await drawn(await withLegend(gerber))
    expect(legend(pictures)).toBeUndefined()
    expect([pictures!.top, pictures!.thumbnails]).toEqual([null, null])
    expect(pictures!.layers.length).toBe(10)
  })

  it.each([
    ['no mirroring, turning or scaling', '%LMN*%%LR0.0*%%LS1.0*%'],
    ['an offset of nothing', '%OFA0B0*%%SFA1.0B1.0*%']
  ])('is told from one with %s', async (_name, gerber) => {
    expect(legend(await drawn(await withLegend(gerber)))).toBeDefined()
  })
})

describe('hostile files', () => {
  it('put none of their words into a picture', async () => {
    const words = '%TF.Part,<script>alert(1)</script>*%G04 <script>alert(2)</script>*%LN"><image href=x onerror=alert(3)>*%'
    const macro = '%AMonload*1,1,0.2,0,0*%%ADD90onload*%D90*X5000000Y5000000D03*'
    const pictures = await drawn(await withLegend(words + macro))
    const svg = legend(pictures)!.svg
    expect(svg).toContain('<use href=')
    for (const text of [svg, pictures!.top!]) expect(text).not.toMatch(/alert|onload|onerror|image/)
  })

  it('do not wrap a picture in thousands of masks', async () => {
    const clear = (n: number) => Array.from({ length: n }, (_, i) => `%LPC*%X${i}000Y0D03*%LPD*%X${i}000Y500000D03*`).join('\n')
    expect(legend(await drawn(await withLegend(`%ADD90C,0.2*%D90*${clear(40)}`)))).toBeDefined()
    const pictures = await drawn(await withLegend(`%ADD90C,0.2*%D90*${clear(2000)}`))
    expect([legend(pictures), pictures!.top]).toEqual([undefined, null])
    expect(pictures!.layers.length).toBe(10)
  })
})
