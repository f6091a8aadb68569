import { describe, expect, test } from 'vitest'
import { kaplanMeierCases } from '../../../tests/support/survival-cases'
import { expectClose, reference } from '../../../tests/support/survival-reference'
import { columnsOf } from './columns'
import { confidenceLimits, curveLimits, type IntervalKind } from './confidence-limits'
import { curveRows } from './curve-rows'
import { kaplanMeier } from './kaplan-meier'
import { tallyOf } from './tally'

const kinds: IntervalKind[] = ['log-log', 'log', 'plain']

describe('worked by hand', () => {
  test('half of two units: S = 1/2, variance of ln S = 1/2', () => {
    const at = { survival: 0.5, greenwood: 0.5, atRisk: 2 }
    const z = 1.959963984540054
    const width = (z * Math.sqrt(0.5)) / Math.log(2)
    const { lower, upper } = confidenceLimits(at)
    expectClose([lower, upper], [0.5 ** Math.exp(width), 0.5 ** Math.exp(-width)], 1e-14, 'log-log')
    const plain = confidenceLimits(at, { confidence: 0.95, interval: 'plain' })
    expect(plain).toEqual({ lower: 0, upper: 1, bound: null })
    const log = confidenceLimits(at, { confidence: 0.95, interval: 'log' })
    expectClose([log.lower, log.upper], [0.5 * Math.exp(-z * Math.sqrt(0.5)), 1], 1e-14, 'log')
  })

  test.each(kinds)('no failure among the followed: exact one-sided bound whatever the interval (%s)', (interval) => {
    expect(confidenceLimits({ survival: 1, greenwood: 0, atRisk: 1 }, { confidence: 0.95, interval }).lower).toBeCloseTo(0.05, 15)
    expect(confidenceLimits({ survival: 1, greenwood: 0, atRisk: 2 }, { confidence: 0.75, interval })).toEqual({
      lower: 0.5,
      upper: 1,
      bound: 'exact-one-sided'
    })
  })

  test.each(kinds)('no limits at S = 0 and with nobody at risk (%s)', (interval) => {
    const none = { lower: null, upper: null, bound: null }
    expect(confidenceLimits({ survival: 0, greenwood: Infinity, atRisk: 1 }, { confidence: 0.95, interval })).toEqual(none)
    expect(confidenceLimits({ survival: 1, greenwood: 0, atRisk: 0 }, { confidence: 0.95, interval })).toEqual(none)
  })

  test.each([0, 1, -0.5, 95, NaN])('a confidence of %s is refused', (confidence) => {
    expect(() => confidenceLimits({ survival: 0.5, greenwood: 0.1, atRisk: 9 }, { confidence, interval: 'log' })).toThrow(
      RangeError
    )
  })
})

test('zero-failure bounds as binom.test gives them (exact-bounds-a, 1e-12)', () => {
  for (const { n, alpha, reliability_lower: expected } of reference('exact-bounds-a').results.zero_failure_lower_bound) {
    const lower = alpha.map(
      (a: number) => confidenceLimits({ survival: 1, greenwood: 0, atRisk: n }, { confidence: 1 - a, interval: 'log-log' }).lower
    )
    expectClose(lower, expected, 1e-12, `n = ${n}`)
  }
})

test('the fewest units without a failure that show a reliability (exact-bounds-a)', () => {
  const rows = reference('exact-bounds-a').results.zero_failure_sample_size
  expect(rows.length).toBeGreaterThan(3)
  for (const { reliability, confidence, n } of rows) {
    const shown = (units: number) =>
      confidenceLimits({ survival: 1, greenwood: 0, atRisk: units }, { confidence, interval: 'log-log' }).lower!
    expect(shown(n)).toBeGreaterThanOrEqual(reliability - 1e-12)
    expect(shown(n - 1)).toBeLessThan(reliability)
  }
})

describe("R's survfit at 95 % on published data sets (tests/fixtures/survival, 1e-9)", () => {
  test.each(kaplanMeierCases())('$name', ({ rows, expected }) => {
    const curve = kaplanMeier(tallyOf(columnsOf(rows)))
    for (const interval of kinds) {
      const limits = curveLimits(curve, { confidence: 0.95, interval })
      // While S is 1 R has [1, 1] or nothing; the exact bound stands there.
      const ours = (values: Float64Array) => Array.from(values, (value, i) => (curve.survival[i] === 1 ? null : value))
      const theirs = (values: (number | null)[]) => values.map((value, i) => (expected.rows.surv[i] === 1 ? null : value))
      expectClose(ours(limits.lower), theirs(expected.rows.ci[interval].lower), 1e-9, `${interval} lower`)
      expectClose(ours(limits.upper), theirs(expected.rows.ci[interval].upper), 1e-9, `${interval} upper`)
      curve.survival.forEach((s, i) => {
        expect(limits.exact[i]).toBe(s === 1 ? 1 : 0)
        if (s === 1) expect(limits.lower[i]).toBe(Math.pow(1 - 0.95, 1 / curve.atRisk[i]!))
      })
    }
    const variance = curveRows(curve, curveLimits(curve)).map(({ standardError }) =>
      standardError === null ? null : standardError ** 2
    )
    expectClose(variance, expected.rows.var_surv, 1e-12, 'variance of S')
  })
})
