import { describe, expect, it } from 'vitest'
import { cleanSvg } from './clean-svg'

const paints = { sm: { color: '#0b5566', opacity: '0.8' } }
const wrap = (inner: string) =>
  `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 38000 14000" width="38mm" height="14mm">${inner}</svg>`
const box = { minX: 0, minY: 0, maxX: 38, maxY: 14 }
const clean = (inner: string) => cleanSvg(wrap(inner), 'p', paints, box)

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
