import fc from 'fast-check'
import { expect, test } from 'vitest'
import { isotonic } from './isotonic'

test.each([
  ['none', [], [], []],
  ['in order already', [1, 2, 4], [1, 1, 1], [1, 2, 4]],
  ['two out of order meet at their mean', [1, 4, 2], [1, 1, 1], [1, 3, 3]],
  ['the heavier pulls harder', [4, 1], [1, 2], [2, 2]],
  ['pooling backwards as far as needed', [3, 4, 2, 0, 9], [1, 1, 1, 1, 1], [2.25, 2.25, 2.25, 2.25, 9]]
])('%s', (_what, values, weight, expected) => {
  expect([...isotonic(values, weight)]).toEqual(expected)
})

test('nothing below the least', () => {
  expect([...isotonic([-3, 1, -2, 5], [1, 1, 1, 1], 0)]).toEqual([0, 0, 0, 5])
})

test('never falls, and every pool keeps its weighted mean (the conditions of the least squares)', () => {
  const pairs = fc.array(fc.tuple(fc.double({ min: -9, max: 9, noNaN: true }), fc.double({ min: 0.1, max: 9, noNaN: true })), {
    maxLength: 30
  })
  fc.assert(
    fc.property(pairs, (rows) => {
      const [values, weight] = [rows.map(([v]) => v), rows.map(([, w]) => w)]
      const fitted = isotonic(values, weight)
      let behind = 0
      fitted.forEach((f, i) => {
        expect(f >= (fitted[i - 1] ?? -Infinity)).toBe(true)
        // Sum of weight times what is left: 0 at the end of each pool, never below 0 within (Barlow and others, theorem 1.6).
        behind += weight[i]! * (values[i]! - f)
        if (i + 1 === fitted.length || fitted[i + 1] !== f) expect(behind).toBeCloseTo(0, 9)
        else expect(behind).toBeGreaterThan(-1e-9)
      })
    })
  )
})
