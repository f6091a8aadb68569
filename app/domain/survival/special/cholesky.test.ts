import fc from 'fast-check'
import { expect, test } from 'vitest'
import { choleskyFactor, choleskySolve } from './cholesky'

test.each([
  ['none', 0, [], [], []],
  ['one', 1, [4], [8], [2]],
  ['two', 2, [2, 1, 1, 2], [4, 5], [1, 2]]
])('%s', (_what, k, h, right, expected) => {
  choleskySolve(choleskyFactor(Float64Array.from(h), k), right).forEach((z, i) => expect(z).toBeCloseTo(expected[i]!, 11))
})

test('some rows and columns alone', () => {
  const h = Float64Array.of(2, 9, 1, 9, 99, 9, 1, 9, 2)
  choleskySolve(choleskyFactor(h, 3, [0, 2]), [4, 5]).forEach((z, i) => expect(z).toBeCloseTo(i + 1, 11))
})

test.each([1, 3, 9])('a random matrix with nothing from %s off the diagonal gives back what it was multiplied with', (band) => {
  const k = 9
  const vector = fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: k, maxLength: k })
  // Row n of the root of the matrix has nothing but the columns n to n + band - 1.
  const at = (r: readonly number[], n: number, i: number) => (i >= n && i < n + band ? r[i]! : 0)
  fc.assert(
    fc.property(fc.array(vector, { minLength: k, maxLength: k }), vector, (rows, z) => {
      const h = new Float64Array(k * k)
      for (let i = 0; i < k; i++)
        for (let j = 0; j < k; j++) h[i * k + j] = rows.reduce((sum, r, n) => sum + at(r, n, i) * at(r, n, j), i === j ? 0.1 : 0)
      const right = z.map((_, i) => z.reduce((sum, value, j) => sum + h[i * k + j]! * value, 0))
      choleskySolve(choleskyFactor(h, k), right).forEach((value, i) => expect(value).toBeCloseTo(z[i]!, 6))
    })
  )
})

test('equal columns do no harm', () => {
  const z = choleskySolve(choleskyFactor(Float64Array.of(1, 1, 1, 1), 2), [2, 2])
  expect(z[0]! + z[1]!).toBeCloseTo(2, 6)
})
