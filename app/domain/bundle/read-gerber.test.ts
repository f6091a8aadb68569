import { describe, expect, it } from 'vitest'
import { defaultLimits } from './limits'
import { readGerber } from './read-gerber'

const head = '%FSLAX46Y46*%\n%MOMM*%\n'
const read = (text: string, limits = defaultLimits) => readGerber(Buffer.from(text), limits, { strokes: true, flashes: true })
const drawn = (body: string) => read(`${head}${body}M02*\n`)

/** Hand-worked cases after the Gerber Layer Format Specification 2024.05. */
describe('a Gerber file', () => {
  it('gives extents with line widths, strokes and conductor', () => {
    const image = drawn(
      '%TA.AperFunction,Conductor*%\n%ADD10C,0.2*%\n%ADD11C,0.3*%\n%TD*%\n%ADD12C,0.1*%\n' +
        'D10*\nX0Y0D02*\nX10000000Y0D01*\nD11*\nX10000000Y5000000D01*\nD12*\nX0Y0D01*\n'
    )
    expect(image.problem).toBeNull()
    expect(image.objects).toBe(3)
    expect(image.box).toEqual({ minX: -0.1, minY: -0.15, maxX: 10.15, maxY: 5.15 })
    expect([image.smallestConductor, image.smallestStroke]).toEqual([0.2, 0.1])
  })

  it('in inches with 2.4 digits, leading or trailing zeros left out, is read in mm', () => {
    const leading = read('%FSLAX24Y24*%\n%MOIN*%\n%ADD10C,0.01*%\nD10*\nX10000Y-5000D03*\nM02*')
    expect([leading.flashes.x[0], leading.flashes.y[0]]).toEqual([25.4, -12.7])
    const trailing = read('%FSTAX24Y24*%\n%MOIN*%\n%ADD10C,0.01*%\nD10*\nX01Y-005D03*\nM02*')
    expect([trailing.flashes.x[0], trailing.flashes.y[0]]).toEqual([25.4, -12.7])
    expect(trailing.deprecated).toEqual(['FSTA'])
  })

  it('follows a quarter, a half and a full circle to their extremes', () => {
    const quarter = drawn('%ADD10C,0*%\nD10*\nG75*\nX1000000Y0D02*\nG03*\nX0Y1000000I-1000000J0D01*\n')
    expect(quarter.box!.maxX).toBeCloseTo(1, 6)
    expect(quarter.box!.minX).toBeCloseTo(0, 6)
    const half = drawn('%ADD10C,0*%\nD10*\nG75*\nX1000000Y0D02*\nG03*\nX-1000000Y0I-1000000J0D01*\n')
    expect(half.box!.maxY).toBeCloseTo(1, 2)
    expect(half.box!.minY).toBeCloseTo(0, 6)
    const clockwise = drawn('%ADD10C,0*%\nD10*\nG75*\nX1000000Y0D02*\nG02*\nX-1000000Y0I-1000000J0D01*\n')
    expect(clockwise.box!.minY).toBeCloseTo(-1, 2)
    const full = drawn('%ADD10C,0*%\nD10*\nG75*\nX1000000Y0D02*\nG02*\nX1000000Y0I-1000000J0D01*\n')
    for (const [value, expected] of [
      [full.box!.minX, -1],
      [full.box!.minY, -1],
      [full.box!.maxY, 1]
    ])
      expect(value).toBeCloseTo(expected!, 2)
  })

  it('in single-quadrant mode finds the centre by itself', () => {
    const image = drawn('%ADD10C,0*%\nD10*\nG74*\nX1000000Y0D02*\nG03*\nX0Y1000000I1000000J0D01*\n')
    const points = image.strokes[0]!.points
    for (let i = 0; i < points.length; i += 2) expect(Math.hypot(points[i]!, points[i + 1]!)).toBeCloseTo(1, 6)
    expect(image.deprecated).toContain('G74')
  })

  it('counts a region once and keeps its contours', () => {
    const image = drawn(
      'G36*\nX0Y0D02*\nG01*\nX4000000Y0D01*\nX4000000Y3000000D01*\nX0Y0D01*\nX9000000Y0D02*\nX9500000Y0D01*\nX9500000Y900000D01*\nX9000000Y0D01*\nG37*\n'
    )
    expect(image.objects).toBe(2)
    expect(image.regions[0]).toEqual([0, 0, 4, 0, 4, 3, 0, 0])
  })

  it('repeats steps and nested blocks, turned and mirrored', () => {
    const stepped = drawn('%ADD10C,1*%\n%SRX3Y2I10J20*%\nD10*\nX0Y0D03*\n%SR*%\n')
    expect(stepped.objects).toBe(6)
    expect(stepped.box).toEqual({ minX: -0.5, minY: -0.5, maxX: 20.5, maxY: 20.5 })
    const nested = drawn(
      '%ADD10C,1*%\n%ABD11*%\nD10*\nX0Y0D03*\nX2000000Y0D03*\n%AB*%\n%ABD12*%\nD11*\nX0Y0D03*\nX0Y5000000D03*\n%AB*%\n' +
        'D12*\nX0Y0D03*\n%LR90*%\nX100000000Y0D03*\n%LR0*%\n%LMX*%\nX200000000Y0D03*\n'
    )
    expect(nested.objects).toBe(12)
    const places = nested.flashes.x.map((x, i) => `${Math.round(x)},${Math.round(nested.flashes.y[i]!)}`)
    expect(places).toEqual(['0,0', '2,0', '0,5', '2,5', '100,0', '100,2', '95,0', '95,2', '200,0', '198,0', '200,5', '198,5'])
  })

  it('leaves clear objects out of what is drawn', () => {
    const image = drawn('%ADD10C,1*%\nD10*\nX0Y0D03*\n%LPC*%\nX50000000Y0D03*\n')
    expect(image.objects).toBe(1)
    expect(image.box!.maxX).toBe(0.5)
  })

  it('evaluates macros with parameters, variables and rotation', () => {
    const image = drawn('%AMBOX*\n0 a comment*\n$3=$1x2*\n21,1,$3,$2+1,0,0,90*\n%\n%ADD10BOX,2X1*%\nD10*\nX0Y0D03*\n')
    expect(image.problem).toBeNull()
    for (const [key, value] of Object.entries({ minX: -1, minY: -2, maxX: 1, maxY: 2 }))
      expect(image.box![key as 'minX']).toBeCloseTo(value, 9)
  })

  it('takes attributes from commands and from comments of older tools', () => {
    const x2 = read('%TF.FileFunction,Copper,L1,Top*%\n%TF.Part,Single\\u002cArray*%\nM02*')
    expect(x2.attributes.get('.FileFunction')).toEqual(['Copper', 'L1', 'Top'])
    expect(x2.attributes.get('.Part')).toEqual(['Single,Array'])
    const comment = read('G04 #@! TF.FileFunction,Legend,Bot*\nG04 #@! TO.C,R7*\nM02*')
    expect(comment.attributes.get('.FileFunction')).toEqual(['Legend', 'Bot'])
  })

  it('notes deprecated commands and markup', () => {
    const image = drawn('G70*\nG90*\n%LNTOP*%\n%ADD10C,0.01*%\nG54D10*\n%TO.C,<script>*%\nX0Y0D02*\nX1Y1D01*\nX2Y2*\n')
    expect(image.problem).toBeNull()
    expect(image.deprecated).toEqual(['G70', 'G90', 'LN', 'G54', 'coordinates without D01, D02 or D03'])
    expect(image.markup).toBe('TO..C')
  })
})

describe('what is wrong with a Gerber file', () => {
  it.each([
    ['no end', `${head}%ADD10C,1*%\nD10*\nX0Y0D03*\n`, 'truncated'],
    ['an end in the middle of a command', `${head}%ADD10C,1*%\nD10*\nX0Y0D`, 'truncated'],
    ['no format', '%MOMM*%\n%ADD10C,1*%\nD10*\nX0Y0D03*\nM02*', 'unreadable'],
    ['an undefined aperture', `${head}D77*\nM02*`, 'unreadable'],
    ['no aperture chosen', `${head}X0Y0D03*\nM02*`, 'unreadable'],
    ['an undefined macro', `${head}%ADD10NONE,1*%\nD10*\nX0Y0D03*\nM02*`, 'unreadable'],
    ['a polygon of absurd corners', `${head}%ADD10P,1X99999999X0*%\nD10*\nX0Y0D03*\nM02*`, 'unreadable'],
    ['a coordinate that is no number', `${head}%ADD10C,1*%\nD10*\nX1e309YNaND01*\nM02*`, 'unreadable'],
    ['an unknown command', `${head}G66*\nM02*`, 'unreadable'],
    ['an endless macro expression', `${head}%AMA*1,1,${'('.repeat(5000)}1*%\n%ADD10A*%\nD10*\nX0Y0D03*\nM02*`, 'unreadable'],
    ['10^8 steps', `${head}%ADD10C,1*%\nD10*\n%SRX10000Y10000I1J1*%\nX0Y0D03*\n%SR*%\nM02*`, 'too-complex'],
    ['10^12 nested blocks', `${head}%ADD10C,1*%\n${nest(12)}D22*\nX0Y0D03*\nM02*`, 'too-complex'],
    ['blocks nested without end', `${head}${'%ABD11*%\n'.repeat(100)}M02*`, 'too-complex'],
    [
      'a macro of 20,000 shapes flashed 2,000 times',
      `${head}%AMB*\n${'1,1,0.1,0,0*\n'.repeat(20_000)}%\n%ADD10B*%\nD10*\n${'X0Y0D03*\n'.repeat(2000)}M02*`,
      'too-complex'
    ],
    ['a comment of megabytes', `${head}G04 ${'A'.repeat(2_000_000)}*\nM02*`, 'too-complex'],
    ['600,000 draws', `${head}%ADD10C,1*%\nD10*\n${'X0Y1D01*\n'.repeat(600_000)}M02*`, 'too-complex']
  ])('%s', (_name, text, kind) => {
    expect(read(text).problem?.kind).toBe(kind)
  })
})

/** Blocks D11 to D11+depth-1 of ten flashes each of the one before. */
function nest(depth: number): string {
  return Array.from({ length: depth }, (_, i) => `%ABD${11 + i}*%\nD${10 + i}*\n${'X0Y0D03*\n'.repeat(10)}%AB*%\n`).join('')
}
