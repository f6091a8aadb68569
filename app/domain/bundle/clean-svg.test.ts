import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { checkBundle } from './check-bundle.server'
import { cleanSvg } from './clean-svg'
import { drawPictures } from './draw-pictures.server'
import { defaultLimits } from './limits'

const paints = { sm: { color: '#0b5566', opacity: '0.8' } }
const wrap = (inner: string) =>
  `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 38000 14000" width="38mm" height="14mm">${inner}</svg>`
const clean = (inner: string) => cleanSvg(wrap(inner), 'p', paints)

describe('a picture', () => {
  it('is rewritten in mm, with ids of its own and paint instead of classes', () => {
    expect(
      clean('<defs><g id="a_pad"><circle cx="1" cy="-2.5" r="3"/></g></defs><use xlink:href="#a_pad" x="5" class="a_sm"/>')
    ).toBe(
      '<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 38 14" width="38mm" height="14mm"><g transform="scale(0.001)">' +
        '<defs><g id="p0"><circle cx="1" cy="-2.5" r="3"/></g></defs><use href="#p0" x="5" color="#0b5566" opacity="0.8"/></g></svg>'
    )
  })

  it.each([
    ['a script', '<script>alert(1)</script>'],
    ['an image', '<image href="x"/>'],
    ['text', '<g>hello</g>'],
    ['a foreign object', '<foreignObject/>'],
    ['an animation', '<animate attributeName="href"/>'],
    ['a comment', '<!-- x -->'],
    ['a CDATA section', '<![CDATA[x]]>'],
    ['an entity in a value', '<g id="&#97;"/>'],
    ['an element that is not closed', '<g>'],
    ['an element closed twice', '<g></g></g>'],
    ['a second document', '</svg><svg viewBox="0 0 1 1">'],
    ['a style sheet with markup', '<style>a{}</style><style><g/></style>']
  ])('with %s is refused', (_name, inner) => {
    expect(clean(inner)).toBeNull()
  })

  it.each([
    'onload="alert(1)"',
    'style="fill:url(http://x)"',
    'xlink:href="http://x/y"',
    'href="javascript:x"',
    'fill="url(http://x)"',
    'mask="url(x.svg#m)"',
    'transform="expression(1)"'
  ])('loses the attribute %s', (attribute) => {
    expect(clean(`<g ${attribute}></g>`)).toContain('<g></g>')
  })
})

describe('the pictures of a bundle', () => {
  const read = (path: string) => checkBundle(readFileSync(fileURLToPath(new URL(`../../../${path}`, import.meta.url))))

  it('show both sides within the limits, without anything that could run', async () => {
    const { reading, source } = await read('db/seed/bundles/buttress-1.1.0.zip')
    const { top, bottom } = (await drawPictures(reading!, source!, defaultLimits))!
    for (const svg of [top, bottom]) {
      expect(svg).toMatch(/^<svg [^>]*viewBox="0 0 38 14"/)
      expect(svg).not.toMatch(/<(style|script|text|image|a|foreignObject)\b|\son\w+=|https?:\/\/(?!www\.w3\.org\/2000\/svg)/i)
      expect(svg).toContain('color="#dcbf78"')
      const ids = [...svg.matchAll(/ id="([^"]+)"/g)].map((m) => m[1])
      expect(new Set(ids).size).toBe(ids.length)
      for (const [, target] of svg.matchAll(/(?:href="#|url\(#)([^")]+)/g)) expect(ids).toContain(target)
    }
  })

  it('are in mm for boards in inches too', async () => {
    const { reading, source } = await read('tests/fixtures/bundles/OC23-fx-wifi.zip')
    expect((await drawPictures(reading!, source!, defaultLimits))!.top).toMatch(/width="20.32mm" height="35.56mm"/)
  })

  it('are left out where they would be too large or the outline is missing', async () => {
    const { reading, source } = await read('db/seed/bundles/buttress-1.1.0.zip')
    expect(await drawPictures(reading!, source!, { ...defaultLimits, pictureBytes: 1000 })).toBeNull()
    expect(await drawPictures(reading!, source!, { ...defaultLimits, pictureObjects: 100 })).toBeNull()
    const open = await read('tests/fixtures/bundles/OC40-gv-gedaold.zip')
    expect(await drawPictures(open.reading!, open.source!, defaultLimits)).toBeNull()
  })
})
