import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { expectClose } from '../../../tests/support/survival-reference'
import { aalenJohansen } from './aalen-johansen'
import { columnsOf, splitColumns } from './columns'
import { curveLimits } from './confidence-limits'
import { kaplanMeier } from './kaplan-meier'
import { logRank } from './log-rank'
import { nelsonAalen } from './nelson-aalen'
import { isInterval, type Observation, type TimedObservation } from './observation'
import { quantile } from './quantile'
import { restrictedMean } from './restricted-mean'
import { spansOf } from './spans'
import { tallyOf } from './tally'
import { turnbull, turnbullAt } from './turnbull'
import { fitWeibull } from './weibull'

/*
 * What holds for every estimator alike: a weight is a repetition, the order of rows has no say, and a record split at any time with delayed
 * entry is the same record. What belongs to one estimator alone is tested beside it.
 */

type Row = TimedObservation & { group: 'a' | 'b' }
const row = fc
  .record({
    entry: fc.integer({ min: 0, max: 20 }),
    length: fc.integer({ min: 1, max: 40 }),
    event: fc.constantFrom(0, 'board', 'accident'),
    weight: fc.integer({ min: 1, max: 3 }),
    group: fc.constantFrom('a' as const, 'b' as const)
  })
  .map(({ length, ...rest }): Row => ({ ...rest, time: rest.entry + length }))
const rows = fc.array(row, { minLength: 2, maxLength: 30 })

const tallyOfRows = (all: Row[]) => tallyOf(columnsOf(all, ['board', 'accident']))
const curveOf = (all: Row[]) => kaplanMeier(tallyOfRows(all))

/** What each estimator says, as plain numbers in columns; at the days of failures where a censoring has a row as well. */
const estimators: Record<string, (all: Row[]) => (number | null)[]> = {
  'Kaplan-Meier with its limits': (all) => {
    const curve = curveOf(all)
    const limits = curveLimits(curve)
    return [...curve.time.keys()]
      .filter((i) => curve.events[i]! > 0)
      .flatMap((i) => [curve.time[i]!, curve.survival[i]!, curve.greenwood[i]!, limits.lower[i]!, limits.upper[i]!])
  },
  'the median and its limits': (all) => {
    const curve = curveOf(all)
    return Object.values(quantile(curve, curveLimits(curve), 0.5))
  },
  'the restricted mean': (all) => {
    const { estimate, standardError } = restrictedMean(curveOf(all), 15)
    return [estimate, standardError]
  },
  'Nelson-Aalen': (all) => {
    const curve = curveOf(all)
    const { cumulative, variance } = nelsonAalen(curve)
    return [...curve.time.keys()]
      .filter((i) => curve.events[i]! > 0)
      .flatMap((i) => [curve.time[i]!, cumulative[i]!, variance[i]!])
  },
  'Aalen-Johansen with its errors': (all) => {
    const { time, incidence, standardError } = aalenJohansen(tallyOfRows(all))
    const failures = new Set(all.filter(({ event }) => event !== 0).map((one) => one.time))
    return [...time.keys()]
      .filter((i) => failures.has(time[i]!))
      .flatMap((i) => [time[i]!, ...incidence.map((f) => f[i]!), ...standardError.map((se) => se[i]!)])
  },
  'the log-rank test': (all) => {
    const groups = splitColumns(
      columnsOf(all, ['board', 'accident']),
      all.map(({ group }) => (group === 'a' ? 0 : 1)),
      2
    )
    const result = logRank([groups.map(tallyOf)])
    return result === null ? [] : [result.chiSquare, result.p, ...result.observed, ...result.expected, ...result.variance.flat()]
  }
}

const repeated = (all: Row[]) => all.flatMap((one) => Array.from({ length: one.weight! }, () => ({ ...one, weight: 1 })))
const splitAt = (all: Row[], cut: number) =>
  all.flatMap((one): Row[] =>
    one.entry! < cut && cut < one.time
      ? [
          { ...one, time: cut, event: 0 },
          { ...one, entry: cut }
        ]
      : [one]
  )

describe.each(Object.entries(estimators))('%s', (name, says) => {
  const same = (a: Row[], b: Row[]) => expectClose(says(a), says(b), 1e-12, name)
  test('a weight is a repetition', () => fc.assert(fc.property(rows, (all) => same(repeated(all), all))))
  test('unsorted input', () => {
    const shuffled = rows.chain((all) =>
      fc.tuple(fc.constant(all), fc.shuffledSubarray(all, { minLength: all.length, maxLength: all.length }))
    )
    fc.assert(fc.property(shuffled, ([all, other]) => same(other, all)))
  })
  test('a record split at any time with delayed entry', () => {
    fc.assert(fc.property(rows, fc.integer({ min: 1, max: 59 }), (all, cut) => same(splitAt(all, cut), all)))
  })
})

/** A share of the rows as intervals: those who were found failed at a check-in. */
const withIntervals = (all: Row[]): Observation[] =>
  all.map(({ group: _, event, ...one }) =>
    event === 'board'
      ? { entry: one.entry, weight: one.weight, lower: Math.max(one.entry!, one.time - 9), upper: one.time }
      : { ...one, event: event === 0 ? 0 : 1 }
  )
const repeatedRows = (all: Observation[]) =>
  all.flatMap((one) => Array.from({ length: one.weight! }, (): Observation => ({ ...one, weight: 1 })))

describe('Weibull', () => {
  test('a weight is a repetition, in any order', () => {
    fc.assert(
      fc.property(rows, (all) => {
        const weighted = withIntervals(all)
        const [one, other] = [fitWeibull(spansOf(weighted)), fitWeibull(spansOf(repeatedRows(weighted).reverse()))]
        // Where the likelihood is all but flat, whether a maximum is found hangs on the last digit of a sum.
        if (one === null || other === null) return
        const numbers = (fit: typeof one) => [
          fit.shape,
          fit.scale,
          fit.shapeStandardError,
          fit.scaleStandardError,
          fit.logLikelihood
        ]
        expectClose(numbers(other), numbers(one), 1e-7, 'fit')
      })
    )
  })
})

describe('Turnbull', () => {
  test('S never rises from one day to the next', () => {
    fc.assert(
      fc.property(rows, (all) => {
        const fit = turnbull(spansOf(withIntervals(all)))
        let before = 1
        for (let t = 0; t <= 60; t++) {
          const s = turnbullAt(fit, t)
          if (s === null) continue
          expect(s >= 0 && s <= before).toBe(true)
          before = s
        }
      })
    )
  })

  test('the narrower the intervals, delayed entry or not, the nearer to Kaplan-Meier: at last the same', () => {
    fc.assert(
      fc.property(rows, fc.constantFrom(1e-2, 1e-4, 1e-6), (all, width) => {
        const exact = all.map((one): TimedObservation => ({ ...one, event: one.event === 0 ? 0 : 1 }))
        // A unit that enters on the day of a failure would otherwise be at risk within the interval.
        const late = exact.map((one) => ({ ...one, entry: one.entry! > 0 ? one.entry! + 0.5 : 0, time: one.time + 0.75 }))
        const narrow = late.map((one): Observation => {
          const { event, time, ...rest } = one
          return event === 1 ? { ...rest, lower: time - width, upper: time } : one
        })
        expect(narrow.some(isInterval)).toBe(late.some(({ event }) => event === 1))
        const curve = kaplanMeier(tallyOf(columnsOf(late)))
        const fit = turnbull(spansOf(narrow))
        for (let i = 0; i < curve.time.length; i++)
          if (curve.events[i]! > 0) expect(Math.abs(turnbullAt(fit, curve.time[i]!)! - curve.survival[i]!)).toBeLessThan(1e-8)
      })
    )
  })
})
