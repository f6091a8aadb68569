import { describe, expect, it } from 'vitest'
import { defaultLimits } from './limits'
import { PadNames } from './pad-names'
import { readGerber } from './read-gerber'

/** The pads by name that a layer of 2 by 1 mm flashes (D10) and 1 mm round ones (D11) draws. */
function padsOf(body: string) {
  const names = new PadNames()
  const text = `%FSLAX36Y36*%\n%MOMM*%\n%ADD10R,2X1*%\n%ADD11C,1*%\n${body}M02*\n`
  const image = readGerber(Buffer.from(text), defaultLimits, { strokes: false, flashes: false, watches: [names] })
  expect(image.problem).toBeNull()
  return [...names.pads.values()].filter(({ pads }) => pads > 0)
}
const at = (x: number, y: number) => `X${x * 1e6}Y${y * 1e6}D03*\n`

// Expectations follow the Gerber Layer Format Specification 2024.05, chapters 5.4 (how long an object attribute holds) and 5.6 (`.C`, `.P`).
describe('component names on a copper layer', () => {
  it('gathers the pads of a component until the next name or its deletion', () => {
    const body = `D10*\n%TO.P,U1,1*%\n${at(0, 0)}%TO.P,U1,2,clock*%\n${at(0, 5)}%TO.P,R1,1*%\n${at(9, 9)}%TD*%\n${at(50, 50)}`
    expect(padsOf(body)).toEqual([
      { name: 'U1', pads: 2, box: { minX: -1, minY: -0.5, maxX: 1, maxY: 5.5 } },
      { name: 'R1', pads: 1, box: { minX: 8, minY: 8.5, maxX: 10, maxY: 9.5 } }
    ])
  })

  it('reads names from comments of older tools, and `.C` behind a deleted `.P`', () => {
    const body = `D11*\nG04 #@! TO.C,C7*\nG04 #@! TO.P,C8,1*\n${at(0, 0)}G04 #@! TD.P*\n${at(1, 0)}G04 #@! TD.C*\n${at(2, 0)}`
    expect(padsOf(body).map(({ name, pads }) => [name, pads])).toEqual([
      ['C7', 1],
      ['C8', 1]
    ])
  })

  it('holds a name over other attributes and their deletion', () => {
    const body = `D11*\n%TO.P,R1,1*%\n%TO.N,GND*%\n%TD.N*%\n%TA.AperFunction,SMDPad*%\n%TD.AperFunction*%\n${at(0, 0)}`
    expect(padsOf(body).map(({ name }) => name)).toEqual(['R1'])
  })

  it('counts areas and strokes as pads, clear objects not', () => {
    const area = 'G36*\nX0Y0D02*\nG01*\nX3000000D01*\nY2000000D01*\nX0Y0D01*\nG37*\n'
    const body = `D11*\nG01*\n%TO.P,J1,1*%\n${area}X5000000Y0D02*\nX6000000D01*\n%LPC*%\n${at(40, 40)}`
    expect(padsOf(body)).toEqual([{ name: 'J1', pads: 2, box: { minX: 0, minY: -0.5, maxX: 6.5, maxY: 2 } }])
  })

  it('takes the box of a turned flash', () => {
    const [pad] = padsOf(`D10*\n%LR90*%\n%TO.P,U1,1*%\n${at(0, 0)}`)
    expect(pad!.box.maxX).toBeCloseTo(0.5, 9)
    expect(pad!.box.maxY).toBeCloseTo(1, 9)
  })

  it('names a flashed block, but nothing that is recorded for copies', () => {
    const block = `%ABD20*%\nD11*\n%TO.P,X1,1*%\n${at(0, 0)}%TD*%\n%AB*%\nD20*\n%TO.P,U1,1*%\n${at(3, 3)}%TD*%\n`
    expect(padsOf(block).map(({ name, pads }) => [name, pads])).toEqual([['U1', 1]])
    expect(padsOf(`%SRX2Y1I9J0*%\nD11*\n%TO.P,R1,1*%\n${at(0, 0)}%SR*%\n`)).toEqual([])
    expect(padsOf(`%SRX1Y1I0J0*%\nD11*\n%TO.P,R1,1*%\n${at(0, 0)}`)).toHaveLength(1)
  })

  it('is bounded in names and their length', () => {
    const many = Array.from({ length: 50_010 }, (_, i) => `%TO.C,R${i}*%\n${at(i % 1000, 0)}`)
    expect(padsOf(`D11*\n${many.join('')}`)).toHaveLength(50_000)
    expect(padsOf(`D11*\n%TO.C,R${'1'.repeat(64)}*%\n${at(0, 0)}`)).toEqual([])
  })
})
