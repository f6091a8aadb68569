import fc from 'fast-check'
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { kindOfDesignator, readPartValue } from './read-part-value'

/* Forty values as parts lists write them, with what they mean; made for this trade by hand, see the fixture's README. */
const cases = JSON.parse(readFileSync(new URL('../../../tests/fixtures/parts/bom-values.json', import.meta.url), 'utf8')) as {
  refdes: string
  raw: string
  expect: Record<string, unknown> & { tol?: [number, number]; dnp?: boolean }
}[]

describe('values as parts lists write them', () => {
  it.each(cases)('$refdes "$raw"', ({ refdes, raw, expect: wanted }) => {
    const { tol, dnp, ...rest } = wanted
    const read = readPartValue({ designator: refdes, value: raw })
    expect(read).toMatchObject({ ...rest, tolerance: tol ?? null, isNotFitted: dnp ?? false })
    for (const key of ['voltage', 'dielectric', 'size', 'esr', 'power', 'current'] as const)
      if (!(key in wanted)) expect(read[key], key).toBe(null)
    expect(read.unread === null).toBe(read.value !== null)
  })

  // IEC 60062, from memory: examples of the letter and digit code and of the three-digit code.
  it.each([
    ['R1', 'R47', 0.47],
    ['R1', '4K7', 4700],
    ['R1', '3M3', 3.3e6],
    ['R1', '59R04', 59.04],
    ['R1', '10MEG', 1e7],
    ['C1', 'p33', null],
    ['C1', '59p0', 5.9e-11],
    ['C1', '332', 3.3e-9],
    ['C1', '479', 4.7e-12],
    ['C1', '1m0', 1e-3],
    ['L1', '2u2', 2.2e-6]
  ])('%s %s is %s', (designator, value, wanted) => expect(readPartValue({ designator, value }).value).toBe(wanted))

  it.each([
    ['C1', '104K', 1e-7, [-0.1, 0.1]],
    ['C1', '100nF M', 1e-7, [-0.2, 0.2]],
    ['R1', '4K7J', 4700, [-0.05, 0.05]],
    ['R1', '47K', 47_000, null],
    ['R1', '0.1%  1k', 1000, [-0.001, 0.001]],
    ['C1', '10u +80/-20% 16V', 1e-5, [-0.2, 0.8]]
  ])('%s %s is %s within %s', (designator, value, wanted, tolerance) =>
    expect(readPartValue({ designator, value })).toMatchObject({ value: wanted, tolerance })
  )

  it('reads a fraction of a watt and a metric size', () => {
    expect(readPartValue({ designator: 'R1', value: '10R 1/4W 3216M' })).toMatchObject({ value: 10, power: 0.25, size: '1206' })
  })
})

describe('what stands elsewhere on the line', () => {
  it('fills in what the value does not say', () => {
    const read = readPartValue({
      designator: 'C3',
      value: '4u7',
      footprint: 'C_0603_1608Metric',
      description: 'CAP CER 4.7UF 6.3V X5R 10%'
    })
    expect(read).toMatchObject({
      value: 4.7e-6,
      voltage: 6.3,
      dielectric: 'X5R',
      size: '0603',
      tolerance: [-0.1, 0.1],
      unread: null
    })
  })

  it('reads the value from the description when the value is a part number', () => {
    expect(readPartValue({ designator: 'C3', value: 'AB12-XY', description: '10uF 25V' })).toMatchObject({
      value: 1e-5,
      voltage: 25
    })
  })

  it('is not believed against the value: two that differ give none, with the reason', () => {
    const read = readPartValue({ designator: 'C3', value: '4u7 0805', footprint: 'C0603', description: '10uF' })
    expect(read).toMatchObject({ kind: null, value: null, size: null, unread: 'two values that differ; two sizes that differ' })
  })

  it('says why there is no value', () => {
    const why = (designator: string, value: string) => readPartValue({ designator, value }).unread
    expect(why('C1', '')).toBe('no value is given')
    expect(why('C1', '0.1')).toBe('0.1 is no capacitance with a unit')
    expect(why('C1', '10MF')).toBe('10MF is no capacitance with a unit')
    expect(why('C1', '1,000uF')).toBe('1,000uF can be read in two ways')
    expect(why('L1', '4R7')).toBe('4R7 is no inductance with a unit')
    expect(why('R1', 'DNP')).toBe('it says only that it is not fitted')
    expect(why('U1', '555')).toMatch(/^U1 is no capacitor/)
  })
})

it('tells the kind by the letters alone', () => {
  expect(['C1', 'c12', 'CE3', 'R_4', 'L9', 'FB2'].map(kindOfDesignator)).toEqual([
    'capacitor',
    'capacitor',
    'capacitor',
    'resistor',
    'inductor',
    'ferrite'
  ])
  expect(['CN1', 'RN1', 'LED1', 'X1', 'C', '', 'constructor1'].map(kindOfDesignator)).toEqual(Array(7).fill(null))
})

it('never throws, and gives finite numbers only', () => {
  const text = fc.oneof(
    fc.string({ unit: 'binary', maxLength: 300 }),
    fc.string({ unit: fc.constantFrom(...'0147RKMpnuμΩ.,%+-/ VFX '), maxLength: 300 })
  )
  fc.assert(
    fc.property(
      fc.constantFrom('C1', 'R1', 'L1', 'FB1', 'U1', ''),
      text,
      text,
      text,
      (designator, value, footprint, description) => {
        const read = readPartValue({ designator, value, footprint, description })
        for (const each of Object.values(read).flat()) if (typeof each === 'number') expect(Number.isFinite(each)).toBe(true)
      }
    )
  )
})
