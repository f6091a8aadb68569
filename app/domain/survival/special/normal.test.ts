import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { expectClose, reference } from '../../../../tests/support/survival-reference'
import { normalCdf, normalQuantile, normalUpperQuantile, normalUpperTail } from './normal'

describe('known values', () => {
  test('the middle, the ends and no probability', () => {
    expect([normalCdf(0), normalQuantile(0.5), normalQuantile(0), normalQuantile(1)]).toEqual([0.5, 0, -Infinity, Infinity])
    expect([normalUpperTail(Infinity), normalUpperTail(-Infinity)]).toEqual([0, 1])
    for (const p of [-0.1, 1.1, NaN]) expect(() => normalQuantile(p)).toThrow(RangeError)
  })

  test('tails, from mpmath 1.3 with 40 digits', () => {
    const expected = [0.15865525393145705, 0.0013498980316300945, 6.2209605742717841e-16, 2.7536241186062337e-89]
    for (const [i, z] of [1, 3, 8, 20].entries()) expect(Math.abs(normalUpperTail(z) / expected[i]! - 1)).toBeLessThan(1e-13)
  })

  test("R's qnorm (exact-bounds-a, 1e-14)", () => {
    const { p, q } = reference('exact-bounds-a').results.quantiles_used.normal
    expectClose(p.map(normalQuantile), q, 1e-14, 'qnorm')
  })
})

test('quantile and tail are inverse, also far out', () => {
  fc.assert(
    fc.property(fc.double({ min: -690, max: -0.7, noNaN: true }), (ln) => {
      const q = Math.exp(ln)
      expect(Math.abs(normalUpperTail(normalUpperQuantile(q)) / q - 1)).toBeLessThan(1e-11)
    })
  )
})
