import fc from 'fast-check'
import { expect, it } from 'vitest'
import { packRows, unpackRows } from './pack-rows'

const number = fc.oneof(fc.double({ noNaN: true, noDefaultInfinity: true }), fc.integer(), fc.constant(-0))
const plain = fc.oneof(number, fc.string(), fc.boolean(), fc.constant(null))
const rows = fc
  .record({ time: number, lower: fc.option(number), bound: fc.option(fc.constantFrom('exact-one-sided', '')), mixed: plain })
  .chain((row) => fc.array(fc.oneof(fc.constant(row), fc.constant({ ...row, lower: null })), { maxLength: 80 }))

it('gives back what was packed, whatever it was', () => {
  fc.assert(
    fc.property(
      fc.dictionary(
        fc.string().filter((name) => name !== '__proto__'),
        fc.oneof(rows, fc.array(plain), plain, fc.record({ rows }))
      ),
      (value) => {
        expect(unpackRows(structuredClone(packRows(value)))).toEqual({ ...value })
      }
    )
  )
})

it('packs long lists of like rows and leaves others as they are', () => {
  const row = (i: number) => ({ time: i, lower: i % 3 === 0 ? null : i / 7, bound: i % 2 === 0 ? 'exact-one-sided' : null })
  const many = Array.from({ length: 100 }, (_, i) => row(i))
  const packed = packRows({ curve: many, few: many.slice(0, 3) }) as { curve: object; few: object }
  expect(Array.isArray(packed.curve)).toBe(false)
  expect(packed.few).toEqual(many.slice(0, 3))
  const uneven = [...many, { ...row(1), more: 1 }]
  expect(packRows(uneven)).toEqual(uneven)
  const nested = many.map((one) => ({ ...one, open: { from: 1 } }))
  expect(packRows(nested)).toEqual(nested)
})
