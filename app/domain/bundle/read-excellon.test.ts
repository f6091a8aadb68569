import { describe, expect, it } from 'vitest'
import { indexFlashes } from './alignment'
import { settleDrillFormat } from './drill-format'
import { defaultLimits } from './limits'
import type { DrillFormat } from './drill-file.types'
import { readExcellon } from './read-excellon'

const read = (text: string, assume: Partial<DrillFormat> = {}) => readExcellon(Buffer.from(text), defaultLimits, assume)
const places = (text: string) =>
  read(text).holes.map(({ x, y, toX, toY }) =>
    [x, y, ...(toX === null ? [] : [toX, toY!])].map((v) => Math.round(v! * 1e4) / 1e4)
  )

/** Hand-worked cases after the XNC Format Specification 2021.11 and the published Excellon description. */
describe('a drill file', () => {
  it('is read in mm and inches, with points, leading or trailing zeros', () => {
    expect(places('M48\nMETRIC\nT1C0.3\n%\nT1\nX1.5Y-2.25\nM30')).toEqual([[1.5, -2.25]])
    expect(places('M48\nMETRIC,TZ\nT1C0.3\n%\nT1\nX1500Y-2250\nM30')).toEqual([[1.5, -2.25]])
    expect(places('M48\nMETRIC,LZ\nT1C0.3\n%\nT1\nX0015Y-00225\nM30')).toEqual([[1.5, -2.25]])
    expect(places('M48\nINCH,TZ\nT1C0.02\n%\nT1\nX10000Y5000\nM30')).toEqual([[25.4, 12.7]])
    expect(places('M48\nINCH,LZ\nT1C0.02\n%\nT1\nX01Y005\nM30')).toEqual([[25.4, 12.7]])
    expect(places('M48\nMETRIC,TZ,0000.00\nT1C0.3\n%\nT1\nX150Y-225\nM30')).toEqual([[1.5, -2.25]])
    expect(places('M48\n;FILE_FORMAT=2:5\nINCH,TZ\nT1C0.02\n%\nT1\nX100000Y50000\nM30')).toEqual([[25.4, 12.7]])
  })

  it('keeps what is left out of a line, and counts steps from the last place', () => {
    expect(places('M48\nMETRIC\nT1C0.3\n%\nT1\nX1.0Y2.0\nY3.0\nX4.0\nM30')).toEqual([
      [1, 2],
      [1, 3],
      [4, 3]
    ])
    expect(places('M48\nMETRIC\nT1C0.3\n%\nG91\nT1\nX1.0Y2.0\nX1.0\nM30')).toEqual([
      [1, 2],
      [2, 2]
    ])
  })

  it('reads slots and routes', () => {
    expect(places('M48\nMETRIC\nT1C0.3\n%\nT1\nX1.0Y2.0G85X3.0Y2.0\nG05\nX9.0Y9.0\nM30')).toEqual([
      [1, 2, 3, 2],
      [9, 9]
    ])
    expect(places('M48\nMETRIC\nT1C0.3\n%\nG00X1.0Y2.0\nT1\nM15\nG01X3.0Y2.0\nM16\nG05\nX9.0Y9.0\nM30')).toEqual([
      [1, 2, 3, 2],
      [9, 9]
    ])
  })

  it('repeats holes and patterns', () => {
    expect(places('M48\nMETRIC\nT1C0.3\n%\nT1\nX1.0Y1.0\nR3X2.0\nM30')).toEqual([
      [1, 1],
      [3, 1],
      [5, 1],
      [7, 1]
    ])
    expect(places('M48\nMETRIC\nT1C0.3\n%\nT1\nM25\nX1.0Y1.0\nX2.0Y1.0\nM01\nM02X0.0Y5.0\nM08\nM30')).toEqual([
      [1, 1],
      [2, 1],
      [1, 6],
      [2, 6]
    ])
  })

  it('takes plating from attributes in comments and from type comments', () => {
    const x2 = read(
      'M48\n; #@! TF.FileFunction,MixedPlating,1,2\nMETRIC\n; #@! TA.AperFunction,Plated,PTH,ViaDrill\nT1C0.3\n; #@! TA.AperFunction,NonPlated,NPTH,ComponentDrill\nT2C1\n%\nT1\nX1.0Y1.0\nT2\nX2.0Y2.0\nM30'
    )
    expect(x2.attributes.get('.FileFunction')).toEqual(['MixedPlating', '1', '2'])
    expect(x2.holes.map((hole) => [hole.plating, hole.diameter])).toEqual([
      ['plated', 0.3],
      ['non-plated', 1]
    ])
    const typed = read(
      'M48\n;TYPE=PLATED\nINCH,LZ\nT1F00S00C0.0280\n;TYPE=NON_PLATED\nT2F00S00C0.1\n%\nT01\nX01Y01\nT02\nX02Y02\nM30'
    )
    expect(typed.holes.map((hole) => [hole.plating, Math.round(hole.diameter * 1e4) / 1e4])).toEqual([
      ['plated', 0.7112],
      ['non-plated', 2.54]
    ])
  })

  it('without holes is no defect', () => {
    expect(read('M30\n')).toMatchObject({ holes: [], problem: null, smallestTool: null })
    expect(read('M48\nMETRIC\n%\nG90\nG05\nM30\n')).toMatchObject({ holes: [], problem: null })
  })

  it.each([
    ['an undefined tool', 'M48\nMETRIC\nT1C0.3\n%\nT77\nX1.0Y1.0\nM30', 'unreadable'],
    ['no tool', 'M48\nMETRIC\n%\nX1.0Y1.0\nM30', 'unreadable'],
    ['a tool without size', 'M48\nMETRIC\nT1\n%\nT1\nX1.0Y1.0\nM30', 'unreadable'],
    ['nonsense', 'M48\nMETRIC\nT1C0.3\n%\nT1\nhello there\nM30', 'unreadable'],
    ['a number that is none', 'M48\nMETRIC\nT1C0.3\n%\nT1\nX1.0.0Y1\nM30', 'unreadable'],
    ['no end', 'M48\nMETRIC\nT1C0.3\n%\nT1\nX1.0Y1.0\n', 'truncated'],
    ['a repeat of 10^8', 'M48\nMETRIC\nT1C0.3\n%\nT1\nX1.0Y1.0\nR99999999X1\nM30', 'too-complex'],
    [
      'patterns that double without end',
      `M48\nMETRIC\nT1C0.3\n%\nT1\nM25\nX1.0Y1.0\nR50000X0.1\nM01\n${'M02X1.0Y0.0\n'.repeat(50)}M08\nM30`,
      'too-complex'
    ]
  ])('that has %s is not read', (_name, text, kind) => {
    expect(read(text).problem?.kind).toBe(kind)
  })
})

describe('a drill format that is not declared', () => {
  const pads = [
    [1.27, 2.54],
    [5.08, 2.54],
    [7.62, 10.16],
    [12.7, 15.24]
  ]
  const flashes = {
    x: pads.map((p) => p[0]!),
    y: pads.map((p) => p[1]!),
    halfX: pads.map(() => 0.5),
    halfY: pads.map(() => 0.5),
    aperture: pads.map(() => null)
  }
  const index = [indexFlashes(flashes)]
  const settle = (text: string) => settleDrillFormat(Buffer.from(text), read(text), index, defaultLimits)
  const file = (header: string, digits: (mm: number) => string) =>
    `M48\n${header}\nT1C0.02\n%\nT1\n${pads.map(([x, y]) => `X${digits(x!)}Y${digits(y!)}`).join('\n')}\nM30`

  it('is the customary one where the holes then fall on the pads', () => {
    const settled = settle(file('INCH,TZ', (v) => String(Math.round((v / 25.4) * 1e4))))
    expect(settled).toMatchObject({ assumed: false, file: { format: { unit: 'inch', integer: 2, decimals: 4 } } })
  })

  it('is settled by the pads: digits, unit and zeros', () => {
    const digits = settle(file('INCH,TZ', (v) => String(Math.round((v / 25.4) * 1e3))))
    expect(digits).toMatchObject({ assumed: true, file: { format: { integer: 2, decimals: 3 } } })
    const unit = settle(file('', (v) => String(Math.round(v * 1e3))))
    expect(unit).toMatchObject({ assumed: true, file: { format: { unit: 'mm', integer: 3, decimals: 3, keeps: 'trailing' } } })
    const zeros = settle(file('METRIC', (v) => v.toFixed(3).padStart(7, '0').replace('.', '').replace(/0+$/, '')))
    expect(zeros).toMatchObject({ assumed: true, file: { format: { unit: 'mm', keeps: 'leading' } } })
  })
})
