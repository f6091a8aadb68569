import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { expectClose, reference, referencesWith, type Reference } from '../../../tests/support/survival-reference'
import type { Observation } from './observation'
import { spansOf } from './spans'
import { fitWeibull, weibullLimits } from './weibull'
import { wearPattern, weibullQuantile, weibullSurvival } from './weibull-quantities'

const fitOf = (rows: Observation[]) => fitWeibull(spansOf(rows))

describe('worked by hand', () => {
  test('the score is zero: both likelihood equations hold for three exact times and a censored one', () => {
    const failed = [2, 5, 9]
    const all = [...failed, 12]
    const { shape, scale } = fitOf([...failed.map((time) => ({ time, event: 1 })), { time: 12, event: 0 }])!
    const power = (k: (t: number) => number) => all.reduce((sum, t) => sum + t ** shape * k(t), 0)
    expect(scale).toBeCloseTo((power(() => 1) / 3) ** (1 / shape), 12)
    const meanLog = failed.reduce((sum, t) => sum + Math.log(t), 0) / 3
    expect(power(Math.log) / power(() => 1) - 1 / shape).toBeCloseTo(meanLog, 12)
  })

  test('two inspection counts fix both parameters exactly', () => {
    // 36 of 100 fail by 10, 40 more by 40, the rest later.
    const fit = fitOf([
      { lower: 0, upper: 10, weight: 36 },
      { lower: 10, upper: 40, weight: 40 },
      { lower: 40, upper: null, weight: 24 }
    ])!
    const shape = Math.log(Math.log(0.24) / Math.log(0.64)) / Math.log(4)
    expect(fit.shape).toBeCloseTo(shape, 12)
    expect(fit.scale).toBeCloseTo(10 / (-Math.log(0.64)) ** (1 / shape), 10)
    expect(fit.logLikelihood).toBeCloseTo(36 * Math.log(0.36) + 40 * Math.log(0.4) + 24 * Math.log(0.24), 10)
    expect(weibullSurvival(fit, 10).estimate).toBeCloseTo(0.64, 12)
    expect(weibullQuantile(fit, 0.36).estimate).toBeCloseTo(10, 10)
  })

  test.each<[string, Observation[]]>([
    ['no rows', []],
    ['no failure', [{ time: 5, event: 0 }]],
    [
      'a failure at 0',
      [
        { time: 0, event: 1 },
        { time: 5, event: 1 },
        { time: 6, event: 0 }
      ]
    ],
    [
      'all at one time',
      [
        { time: 7, event: 1 },
        { time: 7, event: 1 },
        { time: 3, event: 0 }
      ]
    ],
    [
      'intervals with a common instant',
      [
        { lower: 2, upper: 5 },
        { lower: 3, upper: 6 },
        { time: 2, event: 0 }
      ]
    ],
    [
      'one inspection day: shape and scale cannot be told apart',
      [
        { lower: 0, upper: 12, weight: 3 },
        { lower: 12, upper: null, weight: 4 }
      ]
    ]
  ])('no maximum, no fit: %s', (_what, rows) => {
    expect(fitOf(rows)).toBeNull()
  })

  test('words for the shape only when its interval excludes 1', () => {
    const at = (shape: number, n: number) =>
      fitOf(Array.from({ length: n }, (_, i) => ({ time: 100 * (-Math.log((i + 0.5) / n)) ** (1 / shape), event: 1 })))!
    expect(wearPattern(at(0.5, 100))).toBe('early-failures')
    expect(wearPattern(at(2, 100))).toBe('wear-out')
    expect(wearPattern(at(1.1, 20))).toBeNull()
  })
})

type Case = { name: string; rows: Observation[]; expected: Reference }

function cases(): Case[] {
  return referencesWith('weibull').flatMap((name) => {
    const { data, results } = reference(name)
    return Object.entries<Reference>(results.weibull).map(([label, expected]) => {
      const n = (data.time ?? data.left).length
      const rows = Array.from({ length: n }, (_, i) => i)
        .filter((i) => label === 'pooled' || data.group[i] === label)
        .map((i): Observation => {
          const weight = data.count?.[i] ?? 1
          if (data.time) return { time: data.time[i], event: data.event[i], weight }
          return { lower: data.left[i] ?? 0, upper: data.right[i], weight }
        })
      return { name: `${name} ${label}`, rows, expected }
    })
  })
}

describe("R's survreg on published data sets (tests/fixtures/survival: estimates 1e-8, errors 1e-5)", () => {
  test('there are some', () => expect(cases().length).toBeGreaterThan(12))
  test.each(cases())('$name', ({ rows, expected }) => {
    const fit = fitOf(rows)!
    const { n } = expected
    expect(rows.reduce((sum, row) => sum + row.weight!, 0)).toBe(n)
    expectClose(
      [fit.shape, fit.scale, fit.mu, fit.sigma],
      [expected.shape, expected.scale_eta, expected.mu_log_scale, expected.sigma],
      1e-8,
      'estimates'
    )
    expect(Math.abs(fit.logLikelihood / expected.loglik - 1)).toBeLessThan(1e-10)
    const { mu, logSigma, both } = fit.covariance
    expectClose([Math.sqrt(mu), Math.sqrt(logSigma)], [expected.se_mu, expected.se_log_sigma], 1e-6, 'errors of mu and ln sigma')
    expect(Math.abs(both - expected.cov_mu_logsigma)).toBeLessThan(1e-6 * Math.sqrt(mu * logSigma))
    expectClose([fit.shapeStandardError, fit.scaleStandardError], [expected.se_shape, expected.se_eta], 1e-6, 'errors')
    const shape = weibullLimits(fit, 'shape')
    const scale = weibullLimits(fit, 'scale')
    const theirs = [expected.shape_lower, expected.shape_upper, expected.eta_lower, expected.eta_upper]
    expectClose([shape.lower, shape.upper, scale.lower, scale.upper], theirs, 1e-6, 'limits')
    for (const { p, time, lower, upper } of expected.quantiles)
      expectClose(Object.values(weibullQuantile(fit, p)), [time, lower, upper], 1e-6, `quantile ${p}`)
    for (const { time, surv, lower, upper } of expected.reliability ?? [])
      expectClose(Object.values(weibullSurvival(fit, time)), [surv, lower, upper], 1e-6, `reliability ${time}`)
  })
})

const row = fc.record({
  length: fc.integer({ min: 1, max: 60 }),
  entry: fc.integer({ min: 0, max: 30 }),
  kind: fc.constantFrom('exact', 'censored', 'interval')
})
const rows = fc.array(row, { minLength: 8, maxLength: 40 }).map((all) =>
  all.map(({ length, entry, kind }): Observation => {
    const time = entry + length
    return kind === 'interval'
      ? { entry, lower: Math.max(entry, time - 9), upper: time }
      : { entry, time, event: kind === 'exact' ? 1 : 0 }
  })
)

describe('properties', () => {
  test('splitting a record with delayed entry changes nothing', () => {
    fc.assert(
      fc.property(rows, fc.integer({ min: 1, max: 60 }), (all, cut) => {
        const split = all.flatMap((one): Observation[] => {
          const first = 'time' in one ? one.time : one.lower
          return one.entry! < cut && cut < first
            ? [
                { entry: one.entry, time: cut, event: 0 },
                { ...one, entry: cut }
              ]
            : [one]
        })
        const [whole, parts] = [fitOf(all), fitOf(split)]
        // A likelihood so flat that ln sigma is known to some factor of e^4 ends where rounding takes it, or nowhere.
        const isTold = (fit: typeof whole) => fit !== null && fit.covariance.logSigma < 16
        expect(isTold(parts)).toBe(isTold(whole))
        if (whole && parts && isTold(whole))
          expectClose(
            [parts.shape, parts.scale, parts.logLikelihood],
            [whole.shape, whole.scale, whole.logLikelihood],
            1e-8,
            'fit'
          )
      })
    )
  })

  test('the unit of time only scales the scale', () => {
    fc.assert(
      fc.property(rows, (all) => {
        const scaled = all.map((one): Observation =>
          'time' in one
            ? { ...one, entry: one.entry! / 365, time: one.time / 365 }
            : { ...one, entry: one.entry! / 365, lower: one.lower / 365, upper: one.upper! / 365 }
        )
        const [days, years] = [fitOf(all), fitOf(scaled)]
        expect(years === null).toBe(days === null)
        if (days && years)
          expectClose(
            [years.shape, years.scale * 365, years.shapeStandardError],
            [days.shape, days.scale, days.shapeStandardError],
            1e-7,
            'fit'
          )
      })
    )
  })

  test('narrow intervals tend to the exact fit', () => {
    const times = [3, 8, 13, 21, 34, 55, 70]
    const exact = fitOf(times.map((time) => ({ time, event: 1 })))!
    const narrow = fitOf(times.map((time) => ({ lower: time - 1e-6, upper: time + 1e-6 })))!
    expectClose([narrow.shape, narrow.scale], [exact.shape, exact.scale], 1e-8, 'fit')
  })
})
