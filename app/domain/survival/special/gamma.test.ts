import { describe, expect, test } from 'vitest'
import { deviance, incompleteGamma, logGamma, stirlingError } from './gamma'

describe('known values', () => {
  test('factorials and half numbers', () => {
    expect([logGamma(1), logGamma(2), logGamma(0)]).toEqual([0, 0, Infinity])
    expect(logGamma(11)).toBeCloseTo(Math.log(3628800), 13)
    expect(logGamma(0.5)).toBeCloseTo(Math.log(Math.PI) / 2, 14)
    expect(stirlingError(1)).toBeCloseTo(1 - Math.log(2 * Math.PI) / 2, 15)
  })

  test('the deviance is 0 at its mean and keeps its digits beside it', () => {
    expect(deviance(7, 7)).toBe(0)
    expect(deviance(10, 5)).toBeCloseTo(10 * Math.log(2) - 5, 14)
    expect(deviance(1 + 1e-9, 1) / 5e-19).toBeCloseTo(1, 6)
  })

  test('shape 1 is the exponential', () => {
    for (const x of [0.001, 0.5, 1.9, 2.1, 40]) {
      const { lower, upper } = incompleteGamma(1, x)
      expect(Math.abs(upper / Math.exp(-x) - 1)).toBeLessThan(1e-14)
      expect(Math.abs(lower / -Math.expm1(-x) - 1)).toBeLessThan(1e-14)
    }
  })

  test('ends of the domain', () => {
    expect(incompleteGamma(2, 0)).toEqual({ lower: 0, upper: 1 })
    expect(incompleteGamma(2, Infinity)).toEqual({ lower: 1, upper: 0 })
    expect(() => incompleteGamma(0, 1)).toThrow(RangeError)
    expect(() => incompleteGamma(1, -1)).toThrow(RangeError)
  })
})

// mpmath 1.3, 40 digits: gammainc(a, 0, x, regularized) and gammainc(a, x, inf, regularized).
test.each([
  [0.5, 0.3, 0.56142197391900014, 0.43857802608099986],
  [13, 5, 0.0020188516274370348, 0.99798114837256297],
  [200, 240, 0.99634529810771185, 0.0036547018922881526],
  [1000, 900, 0.00054990226571178292, 0.99945009773428822],
  [3, 40, 0.99999999999999643, 3.5728659287002263e-15]
])('P(%s, %s) and its complement', (a, x, lower, upper) => {
  const ours = incompleteGamma(a, x)
  expect(Math.abs(ours.lower / lower - 1)).toBeLessThan(1e-12)
  expect(Math.abs(ours.upper / upper - 1)).toBeLessThan(1e-12)
})
