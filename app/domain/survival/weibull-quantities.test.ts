import { describe, expect, test } from 'vitest'
import type { WeibullFit } from './weibull'
import { wearPattern, weibullQuantile, weibullSurvival } from './weibull-quantities'

const fit = (shape: number, logSigma: number, mu = 0): WeibullFit => ({
  shape,
  scale: 100,
  shapeStandardError: shape * Math.sqrt(logSigma),
  scaleStandardError: 100 * Math.sqrt(mu),
  logLikelihood: 0,
  mu: Math.log(100),
  sigma: 1 / shape,
  covariance: { mu, logSigma, both: 0 }
})

describe('worked by hand', () => {
  test('shape 1: the median is the scale times ln 2, the scale itself outlived by 1/e', () => {
    expect(weibullQuantile(fit(1, 0.01), 0.5).estimate).toBeCloseTo(100 * Math.LN2, 12)
    expect(weibullSurvival(fit(1, 0.01), 100).estimate).toBeCloseTo(1 / Math.E, 15)
    expect(weibullSurvival(fit(1, 0.01), 0)).toEqual({ estimate: 1, lower: 1, upper: 1 })
  })

  test('with the scale alone uncertain, every quantile has its relative limits', () => {
    const { estimate, lower, upper } = weibullQuantile(fit(2, 0, 0.04), 0.1)
    const factor = Math.exp(1.959963984540054 * 0.2)
    expect(upper / estimate).toBeCloseTo(factor, 12)
    expect(estimate / lower).toBeCloseTo(factor, 12)
  })

  test('quantile and survival agree, limits too', () => {
    const uncertain = fit(1.5, 0.02, 0.01)
    const { estimate } = weibullQuantile(uncertain, 0.3)
    expect(weibullSurvival(uncertain, estimate).estimate).toBeCloseTo(0.7, 14)
    const { lower, upper } = weibullSurvival(uncertain, estimate)
    expect(lower < 0.7 && 0.7 < upper).toBe(true)
  })

  test.each<[number, number, string | null]>([
    [0.5, 0.01, 'early-failures'],
    [2, 0.01, 'wear-out'],
    [0.5, 0.25, null],
    [2, 0.25, null],
    [1, 0.0001, null]
  ])('shape %s with variance %s of its logarithm: %s', (shape, logSigma, expected) => {
    expect(wearPattern(fit(shape, logSigma))).toBe(expected)
  })

  test('out of range', () => {
    for (const p of [0, 1, NaN]) expect(() => weibullQuantile(fit(1, 0.01), p)).toThrow(RangeError)
    expect(() => weibullSurvival(fit(1, 0.01), -1)).toThrow(RangeError)
  })
})
