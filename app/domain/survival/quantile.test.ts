import { describe, expect, test } from 'vitest'
import { kaplanMeierCases } from '../../../tests/support/survival-cases'
import { columnsOf } from './columns'
import { curveLimits, type IntervalKind } from './confidence-limits'
import { kaplanMeier } from './kaplan-meier'
import type { TimedObservation } from './observation'
import { quantile } from './quantile'
import { tallyOf } from './tally'

const curveOf = (rows: TimedObservation[]) => kaplanMeier(tallyOf(columnsOf(rows)))
const failedAt = (...times: number[]): TimedObservation[] => times.map((time) => ({ time, event: 1 }))

describe('worked by hand', () => {
  test.each([
    ['falls through the level', failedAt(2, 4, 6), 0.5, 4],
    ['equals the level, then falls: the middle', failedAt(2, 4, 6, 8), 0.5, 5],
    ['equals the level to the end: its first time', [...failedAt(2, 4), { time: 6, event: 0 }, { time: 9, event: 0 }], 0.5, 4],
    ['never gets there', [...failedAt(2), { time: 6, event: 0 }, { time: 9, event: 0 }], 0.5, null],
    ['equals the level from day 0', [...failedAt(0), ...failedAt(3, 5, 6)], 0.25, 1.5],
    ['an empty curve', [], 0.5, null]
  ])('%s', (_what, rows, p, expected) => {
    const curve = curveOf(rows)
    expect(quantile(curve, curveLimits(curve), p).estimate).toBe(expected)
  })

  test('a bound while nothing has failed gives no lower limit of the median', () => {
    const curve = curveOf([{ time: 3, event: 0 }])
    expect(curveLimits(curve).lower[0]).toBeCloseTo(0.05, 12)
    expect(quantile(curve, curveLimits(curve), 0.5)).toEqual({ estimate: null, lower: null, upper: null })
  })

  test.each([0, 1, -1, NaN])('p = %s is refused', (p) => {
    const curve = curveOf(failedAt(1))
    expect(() => quantile(curve, curveLimits(curve), p)).toThrow(RangeError)
  })
})

describe("R's survfit by the first-crossing rule (tests/fixtures/survival, exact)", () => {
  test.each(kaplanMeierCases())('$name', ({ rows, expected }) => {
    const curve = curveOf(rows)
    const { probs, value_first_crossing: values, ci_first_crossing: limits } = expected.quantiles
    for (const interval of ['log-log', 'log', 'plain'] as IntervalKind[]) {
      const ours = probs.map((p: number) => quantile(curve, curveLimits(curve, { confidence: 0.95, interval }), p))
      const theirs = probs.map((_: number, k: number) => ({
        estimate: values[k],
        lower: limits[interval].lower[k],
        upper: limits[interval].upper[k]
      }))
      expect(ours, interval).toEqual(theirs)
      const { value, ci } = expected.median_print
      const median = quantile(curve, curveLimits(curve, { confidence: 0.95, interval }), 0.5)
      expect(median, interval).toEqual({ estimate: value, lower: ci[interval].lower, upper: ci[interval].upper })
    }
  })
})
