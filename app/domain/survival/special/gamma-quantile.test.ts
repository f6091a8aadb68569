import fc from 'fast-check'
import { expect, test } from 'vitest'
import { expectClose, reference } from '../../../../tests/support/survival-reference'
import { incompleteGamma } from './gamma'
import { gammaQuantile, gammaUpperQuantile } from './gamma-quantile'

test('shape 1 is the exponential; ends; no probability', () => {
  expect(gammaQuantile(0.3, 1)).toBeCloseTo(-Math.log(0.7), 15)
  expect(gammaUpperQuantile(1e-20, 1)).toBeCloseTo(20 * Math.log(10), 12)
  expect([gammaQuantile(0, 3), gammaQuantile(1, 3)]).toEqual([0, Infinity])
  expect(() => gammaQuantile(2, 1)).toThrow(RangeError)
  expect(() => gammaQuantile(0.5, 0)).toThrow(RangeError)
})

test('limits of a mean time between failures by chi-square (exact-bounds-a, 1e-12)', () => {
  for (const row of reference('exact-bounds-a').results.mtbf) {
    const { total_time: time, failures } = row
    const ended = (alpha: number, r: number) => (r === 0 ? null : time / gammaUpperQuantile(alpha, r))
    const ours = [ended(0.05, failures + 1), ended(0.1, failures + 1), ended(0.05, failures)]
    expectClose(
      ours,
      [row.one_sided_lower_95_time_truncated, row.one_sided_lower_90_time_truncated, row.one_sided_lower_95_failure_truncated],
      1e-12,
      `${failures}`
    )
  }
})

test('quantile and distribution are inverse in both tails', () => {
  fc.assert(
    fc.property(fc.double({ min: 1e-9, max: 0.5, noNaN: true }), fc.double({ min: 0.2, max: 5000, noNaN: true }), (p, a) => {
      expect(Math.abs(incompleteGamma(a, gammaQuantile(p, a)).lower / p - 1)).toBeLessThan(1e-9)
      expect(Math.abs(incompleteGamma(a, gammaUpperQuantile(p, a)).upper / p - 1)).toBeLessThan(1e-9)
    })
  )
})
