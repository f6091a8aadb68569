import { describe, expect, test } from 'vitest'
import { expectClose, reference, referencesWith } from '../../../tests/support/survival-reference'
import { columnsOf } from './columns'
import { kaplanMeier } from './kaplan-meier'
import type { TimedObservation } from './observation'
import { restrictedMean, restrictedMeanDifference } from './restricted-mean'
import { tallyOf } from './tally'

const curveOf = (rows: TimedObservation[]) => kaplanMeier(tallyOf(columnsOf(rows)))

describe('worked by hand', () => {
  const curve = curveOf([
    { time: 2, event: 1 },
    { time: 4, event: 0 }
  ])

  test('area 2 + 1/2 x 2, variance (1/2 x 2)^2 x 1/(2 x 1)', () => {
    const mean = restrictedMean(curve, 4)
    expect(mean.estimate).toBe(3)
    expect(mean.standardError).toBeCloseTo(Math.SQRT1_2, 15)
    expect(mean.upper! - 3).toBeCloseTo(1.959963984540054 * Math.SQRT1_2, 14)
  })

  test('before the first row S is 1: the area is tau', () => {
    expect(restrictedMean(curve, 1)).toMatchObject({ estimate: 1, standardError: 0 })
  })

  test('past the last row it is unknown, unless all had failed', () => {
    expect(restrictedMean(curve, 5)).toEqual({ tau: 5, estimate: null, standardError: null, lower: null, upper: null })
    expect(restrictedMean(curveOf([{ time: 2, event: 1 }]), 5)).toMatchObject({ estimate: 2, standardError: 0 })
    expect(restrictedMean(curveOf([]), 5).estimate).toBeNull()
  })

  test('a difference with an unknown side is unknown; of different tau it is refused', () => {
    expect(restrictedMeanDifference(restrictedMean(curve, 5), restrictedMean(curve, 5))).toBeNull()
    expect(restrictedMeanDifference(restrictedMean(curve, 1), restrictedMean(curve, 1))).toMatchObject({
      estimate: 0,
      z: null,
      p: null
    })
    expect(() => restrictedMeanDifference(restrictedMean(curve, 1), restrictedMean(curve, 2))).toThrow(RangeError)
  })

  test.each([0, -1, NaN, Infinity])('tau = %s is refused', (tau) => {
    expect(() => restrictedMean(curve, tau)).toThrow(RangeError)
  })
})

describe('R on published data sets (tests/fixtures/survival, 1e-12)', () => {
  const names = referencesWith('rmst')
  test('there are some', () => expect(names.length).toBeGreaterThan(3))
  test.each(names)('%s', (name) => {
    const { data, results } = reference(name)
    for (const want of results.rmst) {
      const means = want.groups.map((group: string) => {
        const rows = data.time.flatMap((time: number, i: number) =>
          data.group[i] === group ? [{ time, event: data.event[i] }] : []
        )
        return restrictedMean(curveOf(rows), want.tau)
      })
      const column = (key: 'estimate' | 'standardError' | 'lower' | 'upper') =>
        means.map((mean: ReturnType<typeof restrictedMean>) => mean[key])
      expectClose(column('estimate'), want.rmst, 1e-12, 'estimate')
      expectClose(column('standardError'), want.se, 1e-12, 'standard error')
      expectClose(column('lower'), want.lower, 1e-11, 'lower')
      expectClose(column('upper'), want.upper, 1e-11, 'upper')
      const difference = want.difference_group2_minus_group1
      if (!difference) continue
      const ours = restrictedMeanDifference(means[0], means[1])!
      const theirs = [difference.estimate, difference.se, difference.lower, difference.upper, difference.z, difference.p]
      expectClose([ours.estimate, ours.standardError, ours.lower, ours.upper, ours.z, ours.p], theirs, 1e-11, 'difference')
    }
  })
})
