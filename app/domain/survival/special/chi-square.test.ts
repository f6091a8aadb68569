import { expect, test } from 'vitest'
import { expectClose, reference } from '../../../../tests/support/survival-reference'
import { chiSquareQuantile, chiSquareUpperTail } from './chi-square'

test('two degrees of freedom are an exponential', () => {
  expect(chiSquareUpperTail(6, 2)).toBeCloseTo(Math.exp(-3), 15)
  expect(chiSquareQuantile(0.95, 2)).toBeCloseTo(-2 * Math.log(0.05), 13)
})

test("R's qchisq (exact-bounds-a, 1e-12)", () => {
  const { p, df, q } = reference('exact-bounds-a').results.quantiles_used.chisq
  p.forEach((value: number, i: number) => {
    expectClose(
      df.map((d: number) => chiSquareQuantile(value, d)),
      q[i],
      1e-12,
      `p = ${value}`
    )
  })
})

test("R's upper tail pchisq (exact-bounds-a, 1e-12)", () => {
  const { x, df, p } = reference('exact-bounds-a').results.quantiles_used.chisq_upper_tail
  x.forEach((value: number, i: number) => {
    df.forEach((d: number, k: number) =>
      expect(Math.abs(chiSquareUpperTail(value, d) / p[i][k] - 1), `${value}, ${d}`).toBeLessThan(1e-12)
    )
  })
})
