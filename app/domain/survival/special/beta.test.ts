import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { expectClose, reference } from '../../../../tests/support/survival-reference'
import { betaQuantile, betaUpperQuantile, incompleteBeta } from './beta'

describe('known values', () => {
  test('closed forms', () => {
    expect(incompleteBeta(1, 1, 0.3).lower).toBeCloseTo(0.3, 15)
    expect(incompleteBeta(2, 1, 0.3).lower).toBeCloseTo(0.09, 15)
    expect(betaQuantile(0.05, 1, 20)).toBeCloseTo(1 - 0.95 ** (1 / 20), 15)
    expect(betaUpperQuantile(0.05, 20, 1)).toBeCloseTo(0.95 ** (1 / 20), 15)
    expect(betaQuantile(0.5, 7, 7)).toBeCloseTo(0.5, 15)
  })

  test('ends of the domain', () => {
    expect([incompleteBeta(2, 3, 0), incompleteBeta(2, 3, 1)]).toEqual([
      { lower: 0, upper: 1 },
      { lower: 1, upper: 0 }
    ])
    expect([betaQuantile(0, 2, 3), betaQuantile(1, 2, 3)]).toEqual([0, 1])
    expect(() => incompleteBeta(0, 1, 0.5)).toThrow(RangeError)
    expect(() => betaQuantile(1.5, 1, 1)).toThrow(RangeError)
  })

  test("R's qbeta (exact-bounds-a, 1e-12)", () => {
    const { p, a, b, q } = reference('exact-bounds-a').results.quantiles_used.beta
    expectClose(
      p.map((value: number, i: number) => betaQuantile(value, a[i], b[i])),
      q,
      1e-12,
      'qbeta'
    )
  })
})

// mpmath 1.3, 40 digits: betainc(a, b, 0, x, regularized) and betainc(a, b, x, 1, regularized).
test.each([
  [2, 5, 0.125, 0.16652297973632813, 0.83347702026367188],
  [0.5, 0.5, 0.25, 0.33333333333333333, 0.66666666666666667],
  [30, 70, 0.4375, 0.99778722365176652, 0.0022127763482334797],
  [200, 2, 0.875, 6.5551699001704457e-11, 0.9999999999344483],
  [5, 900, 0.03125, 0.99999998816188204, 1.1838117959149935e-8]
])('I(%s, %s; %s) and its complement', (a, b, x, lower, upper) => {
  const ours = incompleteBeta(a, b, x)
  expect(Math.abs(ours.lower / lower - 1)).toBeLessThan(1e-12)
  expect(Math.abs(ours.upper / upper - 1)).toBeLessThan(1e-12)
})

test('quantile and distribution are inverse', () => {
  const shape = fc.double({ min: 0.5, max: 2000, noNaN: true })
  fc.assert(
    fc.property(fc.double({ min: 1e-6, max: 0.5, noNaN: true }), shape, shape, (p, a, b) => {
      expect(Math.abs(incompleteBeta(a, b, betaQuantile(p, a, b)).lower / p - 1)).toBeLessThan(1e-9)
    })
  )
})
