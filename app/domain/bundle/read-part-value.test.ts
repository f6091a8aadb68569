import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import cases from '../../../tests/fixtures/parts/bom-values.json'
import { isDescriptionNotFitted, isValueNotFitted } from './not-fitted'
import { partKind } from './part-kind'
import { readFootprintSizes } from './part-size'
import { readPartValue } from './read-part-value'

type Written = { designator?: string; value?: string; footprint?: string; description?: string; isFitted?: boolean }
const read = (designator: string, value: string, more: Written = {}) =>
  readPartValue({ designator, value, footprint: '', description: '', isFitted: true, ...more })

describe('values of the reference list', () => {
  it.each(cases)('$refdes $raw', ({ refdes, raw, expect: wanted }) => {
    const { unread, tolerance, isNotFitted, ...rest } = read(refdes, raw)
    const said = Object.fromEntries(Object.entries(rest).filter(([key, is]) => is !== null || key === 'kind' || key === 'value'))
    expect({ ...said, ...(tolerance && { tol: tolerance }), ...(isNotFitted && { dnp: true }) }).toEqual(wanted)
    // What was not read has its reason, what was read has none.
    expect(unread === null).toBe(wanted.value !== null)
  })

  it('are all there', () => expect(cases).toHaveLength(40))
})

// Letter and digit codes of IEC 60062, from memory.
describe('letter and digit codes', () => {
  it.each([
    ['p1', 0.1e-12],
    ['p15', 0.15e-12],
    ['p332', 0.332e-12],
    ['1p5', 1.5e-12],
    ['59p04', 59.04e-12],
    ['150p', 150e-12],
    ['1n0', 1e-9],
    ['332n', 332e-9],
    ['u1', 0.1e-6],
    ['3u32', 3.32e-6],
    ['1m0', 1e-3],
    ['33m2', 33.2e-3]
  ])('%s on a capacitor', (text, farads) => expect(read('C1', text).value).toBe(farads))

  it.each([
    ['R10', 0.1],
    ['R332', 0.332],
    ['1R0', 1],
    ['3R32', 3.32],
    ['59R04', 59.04],
    ['100R', 100],
    ['1K0', 1000],
    ['59k04', 59040],
    ['1M0', 1e6],
    ['3M32', 3.32e6],
    ['1G0', 1e9],
    ['1T0', 1e12]
  ])('%s on a resistor', (text, ohms) => expect(read('R1', text).value).toBe(ohms))

  it.each([
    ['C1', '104K', 1e-7, [-0.1, 0.1]],
    ['C1', '4n7J', 4.7e-9, [-0.05, 0.05]],
    ['C1', '104Z', 1e-7, [-0.2, 0.8]],
    ['C1', '10n M', 1e-8, [-0.2, 0.2]],
    ['C1', '5pD', 5e-12, [-0.1, 0.1]],
    ['R1', '4K7K', 4700, [-0.1, 0.1]],
    ['R1', '4K7J', 4700, [-0.05, 0.05]],
    ['R1', 'R22F', 0.22, [-0.01, 0.01]],
    ['R1', '10k G', 1e4, [-0.02, 0.02]]
  ])('%s %s with a tolerance letter', (designator, text, value, tolerance) => {
    const reading = read(designator, text)
    expect(reading.value).toBe(value)
    reading.tolerance!.forEach((share, i) => expect(share).toBeCloseTo(tolerance[i]!, 12))
  })
})

// Common practice, no source.
describe('ways of writing', () => {
  it.each<[string, string, object]>([
    ['C1', '4u7 6.3V X5R 0603', { value: 4.7e-6, voltage: 6.3, dielectric: 'X5R', size: '0603' }],
    ['C1', '100nF,0402,50V', { value: 1e-7, voltage: 50, size: '0402' }],
    ['C1', '100n_50V_0603_X7R', { value: 1e-7, voltage: 50, size: '0603', dielectric: 'X7R' }],
    ['C1', '100n-50V-X7R-0603', { value: 1e-7, voltage: 50, size: '0603', dielectric: 'X7R' }],
    ['C1', '0,047uF', { value: 4.7e-8 }],
    ['C1', '47 UF 10 V', { value: 4.7e-5, voltage: 10 }],
    ['C1', '100uF/25V 105°C', { value: 1e-4, voltage: 25 }],
    ['C1', '10u 16 V -55..125°C', { value: 1e-5, voltage: 16 }],
    ['C1', '470u 6V3 20% ESR=25mΩ', { value: 4.7e-4, voltage: 6.3, tolerance: [-0.2, 0.2], esr: 0.025 }],
    ['C1', '10uF +80-20% Y5V', { value: 1e-5, tolerance: [-0.2, 0.8], dielectric: 'Y5V' }],
    ['C1', '22p COG', { value: 2.2e-11, dielectric: 'C0G' }],
    ['C1', '100nF 1608M', { value: 1e-7, size: '0603' }],
    ['C1', '10nF 2kV', { value: 1e-8, voltage: 2000 }],
    ['C1', 'DNP-100n', { value: 1e-7, isNotFitted: true }],
    ['R1', 'RES SMD 10K OHM 1% 1/10W 0603', { value: 1e4, tolerance: [-0.01, 0.01], power: 0.1, size: '0603' }],
    ['R1', '10 k 1 %', { value: 1e4, tolerance: [-0.01, 0.01] }],
    ['R1', '22k 250mW 100ppm/°C', { value: 22e3, power: 0.25 }],
    ['R1', '10MOhm', { value: 1e7 }],
    ['R1', '10mOhm', { value: 0.01 }],
    ['R1', '10kΩ', { value: 1e4 }],
    ['R1', '470', { value: 470 }],
    ['L1', 'FIXED IND 4.7UH 3A 40 MOHM SMD', { value: 4.7e-6, current: 3 }],
    ['L1', '1m', { value: 1e-3 }],
    ['FB1', '600 ohm @ 100 MHz', { value: 600 }],
    ['FB1', '120R 100MHz 2A', { value: 120, current: 2 }]
  ])('%s %s', (designator, text, wanted) => {
    expect(read(designator, text)).toMatchObject({ ...wanted, unread: null })
  })

  it.each([
    ['C1', '1,000uF', /decimal comma or thousands/],
    ['C1', '1 500 uF', /parted by a blank/],
    ['C1', '10', /no unit/],
    ['C1', '10MF', /million/],
    ['C1', '2x100n', /several values/],
    ['C1', '-100n', /negative/],
    ['C1', '100n or 1u', /100\u00a0nF and 1\u00a0µF/],
    ['C1', '10k', /without guessing/],
    ['C1', 'ABC155R71C104KA88', /without guessing/],
    ['R1', '10 MOHM', /milliohms or megohms/],
    ['R1', '10uF', /without guessing/],
    ['R1', '0603', /without guessing/],
    ['R1', '100E', /without guessing/],
    ['L1', '4R7', /point of ohms/],
    ['FB1', '10uH', /without guessing/],
    ['RN1', '10k', /RN names no single/],
    ['CP1', '10u', /CP names no single/],
    ['12', '10k', /no letters/],
    ['C1', 'X'.repeat(600), /longer than 500/]
  ])('%s %s is not read, and why', (designator, text, reason) => {
    const reading = read(designator, text)
    expect([reading.kind, reading.value]).toEqual([null, null])
    expect(reading.unread).toMatch(reason)
  })
})

describe('value, description and footprint together', () => {
  it('fill each other in', () => {
    expect(read('C1', '100n', { description: 'CAP CER 0.1UF 16V X7R', footprint: 'C_0402_1005Metric' })).toMatchObject({
      value: 1e-7,
      voltage: 16,
      dielectric: 'X7R',
      size: '0402',
      unread: null
    })
    expect(read('C1', '', { description: 'CAP CER 10UF 6.3V' })).toMatchObject({ value: 1e-5, voltage: 6.3 })
  })

  it('leave open what they contradict each other in', () => {
    expect(read('C1', '100n', { description: 'CAP 1UF 16V' })).toMatchObject({
      value: null,
      voltage: 16,
      unread: expect.stringContaining('capacitance')
    })
    expect(read('R1', '10k 0603', { footprint: 'R_0805_2012Metric' })).toMatchObject({
      value: 1e4,
      size: null,
      unread: expect.stringContaining('0603 and 0805')
    })
    expect(read('C1', '100nF 16V/25V')).toMatchObject({ value: 1e-7, voltage: null })
  })

  it.each([
    ['C_0603_1608Metric', ['0603']],
    ['0603', ['0603']],
    ['R0402', ['0402']],
    ['SMD_1608', ['0603']],
    ['C_0201_0603Metric', ['0201']],
    ['CAPC0603X33N', ['0201']],
    ['RESC1608X50N', ['0603']],
    ['CP_EIA-3528-21', []],
    ['R_Axial_DIN0207_L6.3mm', []],
    ['R_Array_4x0603', []],
    ['SOT-23', []]
  ])('size of %s', (footprint, sizes) => expect(readFootprintSizes(footprint)).toEqual(sizes))
})

it('tells the kind by the letters alone', () => {
  const designators = ['C1', 'c2', 'CE3', 'R?', 'R_IN', 'L4', 'FB5', 'CR1', 'RV1', 'RT1', 'LED1', 'CN1', 'F1', '']
  expect(designators.map(partKind)).toEqual([
    ...Array.from({ length: 3 }, () => 'capacitor'),
    ...Array.from({ length: 2 }, () => 'resistor'),
    'inductor',
    'ferrite',
    ...Array.from({ length: 7 }, () => null)
  ])
})

it('tells not-fitted marks from other words', () => {
  for (const text of ['DNP', '100n DNP', '10k (do not populate)', 'dnf', '1u/DNI', 'not fitted', 'nicht bestückt', 'non monté'])
    expect([text, isValueNotFitted(text)]).toEqual([text, true])
  for (const text of ['100nF', 'NP0', 'DNPX', '1NF', 'NC7SZ', 'NoteD'])
    expect([text, isValueNotFitted(text)]).toEqual([text, false])
  expect(isDescriptionNotFitted('Diode, beside the DNP option')).toBe(false)
  expect(isDescriptionNotFitted('Resistor (not fitted)')).toBe(true)
})

describe('any text', () => {
  const piece = fc.constantFrom(
    '4u7',
    '10',
    'k',
    '%',
    '±',
    '+',
    '-',
    '/',
    ',',
    '.',
    ' ',
    '(',
    'Ω',
    'V',
    'X7R',
    '0603',
    'ESR',
    '@',
    'ohm',
    'M',
    '°C',
    'µ'
  )
  const text = fc.oneof(
    fc.string({ maxLength: 80, unit: 'grapheme' }),
    fc.array(piece, { maxLength: 60 }).map((parts) => parts.join(''))
  )

  it('is read without an exception into finite numbers', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('C1', 'R1', 'L1', 'FB1', 'U1'),
        text,
        text,
        text,
        (designator, value, description, footprint) => {
          const reading = read(designator, value, { description, footprint })
          for (const number of [
            reading.value,
            reading.voltage,
            reading.esr,
            reading.power,
            reading.current,
            ...(reading.tolerance ?? [])
          ])
            expect(number === null || Number.isFinite(number)).toBe(true)
          expect(reading.value === null && reading.unread === null).toBe(false)
        }
      ),
      { numRuns: 2000 }
    )
  })

  it('comes back the same number from its own decimal text', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 999 }), fc.constantFrom('p', 'n', 'u', 'm'), (figure, prefix) => {
        const exponent = { p: -12, n: -9, u: -6, m: -3 }[prefix]!
        expect(read('C1', `${figure}${prefix}F`).value).toBe(Number(`${figure}e${exponent}`))
        expect(read('C1', `1${prefix}${figure}`).value).toBe(Number(`1.${figure}e${exponent}`))
      })
    )
  })

  it('that was made to keep patterns busy is read within steps that grow with its length', () => {
    for (const unit of [
      '1',
      '1 ',
      '+1',
      '1,',
      '0.',
      '± ',
      '1/',
      '-',
      'x',
      'ohm ',
      '1 k ',
      'do not ',
      'ESR ',
      '@ 1',
      ' ',
      '1 000 '
    ])
      for (const length of [499, 100_000])
        expect(read('C1', unit.repeat(length).slice(0, length), { description: unit.repeat(499).slice(0, 499) }).value).toBeNull()
  })
})
