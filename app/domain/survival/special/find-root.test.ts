import { expect, test } from 'vitest'
import { findRoot } from './find-root'

test('finds the root where Newton alone would run away', () => {
  expect(findRoot((x) => ({ value: Math.atan(x), slope: 1 / (1 + x * x) }), -1e6, 1e6, 1e5)).toBeCloseTo(0, 12)
  expect(findRoot((x) => ({ value: x * x - 2, slope: 2 * x }), 0, 2, 1)).toBeCloseTo(Math.SQRT2, 15)
  // A slope of 0 leaves nothing but halving, over many powers of ten.
  expect(findRoot((x) => ({ value: Math.log10(x) + 200, slope: 0 }), 1e-300, 1, 0.5) / 1e-200).toBeCloseTo(1, 10)
})
