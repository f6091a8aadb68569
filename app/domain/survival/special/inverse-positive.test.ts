import fc from 'fast-check'
import { expect, test } from 'vitest'
import { inversePositive } from './inverse-positive'

test.each([
  ['none', 0, [], []],
  ['one', 1, [4], [1 / 4]],
  ['two', 2, [2, 1, 1, 2], [2 / 3, -1 / 3, -1 / 3, 2 / 3]]
])('%s', (_what, k, h, expected) => {
  inversePositive(Float64Array.from(h), k).forEach((value, i) => expect(value).toBeCloseTo(expected[i]!, 12))
})

test('a matrix times its inverse is 1', () => {
  const k = 7
  const vector = fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: k, maxLength: k })
  fc.assert(
    fc.property(fc.array(vector, { minLength: k, maxLength: k }), (rows) => {
      const h = new Float64Array(k * k)
      for (let i = 0; i < k; i++)
        for (let j = 0; j < k; j++) h[i * k + j] = rows.reduce((sum, r) => sum + r[i]! * r[j]!, i === j ? 0.1 : 0)
      const inverse = inversePositive(h, k)
      for (let i = 0; i < k; i++)
        for (let j = 0; j < k; j++) {
          let sum = 0
          for (let m = 0; m < k; m++) sum += h[i * k + m]! * inverse[m * k + j]!
          expect(sum).toBeCloseTo(i === j ? 1 : 0, 7)
        }
    })
  )
})

test('equal columns do no harm', () => {
  inversePositive(Float64Array.of(1, 1, 1, 1), 2).forEach((value) => expect(Number.isFinite(value)).toBe(true))
})
