import fc from 'fast-check'
import { expect, test } from 'vitest'
import { boxQuadratic } from './box-quadratic'

test.each([
  ['free minimum inside', [2, 0, 0, 4], [2, 4], [1, 1], [2, 2]],
  ['one would go negative', [1, 0, 0, 1], [-5, 1], [1, 1], [0, 2]],
  ['correlated: the other moves when one is held at 0', [2, 1, 1, 2], [-4, 0], [1, 1], [0, 1.5]],
  ['a zero comes in', [1, 0, 0, 1], [0, 3], [1, 0], [1, 3]]
])('%s', (_what, h, gradient, x, expected) => {
  boxQuadratic(Float64Array.from(h), gradient, x).forEach((value, i) => expect(value).toBeCloseTo(expected[i]!, 10))
})

test.each([1, 3, 9])('meets the conditions of a minimum for random matrices, 0 from %s off the diagonal', (band) => {
  const k = 9
  // Row n of the root of the matrix has nothing but the columns n to n + band - 1.
  const at = (r: readonly number[], n: number, i: number) => (i >= n && i < n + band ? r[i]! : 0)
  const vector = fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: k, maxLength: k })
  fc.assert(
    fc.property(fc.array(vector, { minLength: k, maxLength: k }), vector, vector, (rows, gradient, start) => {
      const h = new Float64Array(k * k)
      for (let i = 0; i < k; i++)
        for (let j = 0; j < k; j++) h[i * k + j] = rows.reduce((sum, r, n) => sum + at(r, n, i) * at(r, n, j), i === j ? 0.1 : 0)
      const x = start.map((value) => Math.max(0, value))
      const y = boxQuadratic(h, gradient, x)
      for (let i = 0; i < k; i++) {
        let slope = -gradient[i]!
        for (let j = 0; j < k; j++) slope += h[i * k + j]! * (y[j]! - x[j]!)
        expect(y[i]! >= 0).toBe(true)
        expect(slope).toBeGreaterThan(-1e-6)
        expect(Math.abs(slope * y[i]!)).toBeLessThan(1e-5)
      }
    })
  )
})
