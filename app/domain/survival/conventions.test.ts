import { describe, expect, test } from 'vitest'
import { expectClose, reference } from '../../../tests/support/survival-reference'
import { aalenJohansen } from './aalen-johansen'
import { clopperPearson } from './clopper-pearson'
import { columnsOf, splitColumns } from './columns'
import { confidenceLimits, curveLimits, type IntervalKind } from './confidence-limits'
import { curveRows } from './curve-rows'
import { completeness } from './follow-up'
import { kaplanMeier } from './kaplan-meier'
import { logRank } from './log-rank'
import { nelsonAalen } from './nelson-aalen'
import { checkObservations, type Observation, type TimedObservation } from './observation'
import { quantile } from './quantile'
import { restrictedMean } from './restricted-mean'
import { silentBounds } from './silent-bounds'
import { spansOf } from './spans'
import { gammaUpperQuantile } from './special/gamma-quantile'
import { tallyOf } from './tally'
import { turnbull, turnbullAt } from './turnbull'
import { fitWeibull } from './weibull'
import { weibullQuantile } from './weibull-quantities'

/*
 * The conventions of R's survival package that trip a re-implementation (tests/fixtures/survival: the numbers are those of its reference), each once by
 * name. What follows from them for every published data set is tested beside each estimator.
 */

const at = (time: number, event: 0 | 1, entry = 0): TimedObservation => ({ entry, time, event })
const curveOf = (rows: readonly TimedObservation[]) => kaplanMeier(tallyOf(columnsOf([...rows])))
const fileRows = ({ time, event, entry }: { time: number[]; event: (0 | 1)[]; entry?: number[] }) =>
  time.map((t, i) => at(t, event[i]!, entry?.[i]))

test('1. at one time events come before censorings; S is continuous from the right', () => {
  const curve = curveOf([at(5, 0), at(5, 1), at(8, 0)])
  expect([curve.atRisk[0], curve.survival[0]]).toEqual([3, 2 / 3])
})

describe('2. near times are one', () => {
  test('0.1 + 0.2 and 0.3, the smallest standing for both', () => {
    const curve = curveOf([at(0.1 + 0.2, 1), at(0.3, 1), at(0.5, 0)])
    expect([...curve.time]).toEqual([0.3, 0.5])
    expect(curve.events[0]).toBe(2)
  })

  test('by 1.5e-8, or that share of the mean distinct time; whole days never', () => {
    const timesOf = (...times: number[]) => curveOf(times.map((t) => at(t, 1))).time.length
    expect([timesOf(1, 1 + 1.4e-8), timesOf(1, 1 + 1.6e-8)]).toEqual([1, 2])
    expect([timesOf(1000, 1000 + 1.4e-5), timesOf(1000, 1000 + 1.6e-5)]).toEqual([1, 2])
    expect(timesOf(1e6, 1e6 + 1)).toBe(2)
  })

  test('neighbours in a chain are one with the first of it', () => {
    expect([...curveOf([at(1, 1), at(1 + 1e-8, 1), at(1 + 2e-8, 1)]).time]).toEqual([1])
  })

  test('the fan record holds 459.99999999999994, which is 460', () => {
    const { data, results } = reference('right-fan70')
    expect(data.time.some((t: number) => t !== Math.round(t) && Math.abs(t - Math.round(t)) < 1e-9)).toBe(true)
    expectClose(curveOf(fileRows(data)).time, results.kaplan_meier.pooled.rows.time, 0, 'time')
  })
})

test('3. a failure at time 0 counts for Kaplan-Meier and rules out a Weibull fit', () => {
  const rows = [at(0, 1), at(3, 1), at(5, 1)]
  const curve = curveOf(rows)
  expect([curve.time[0], curve.survival[0]]).toEqual([0, 2 / 3])
  expect(fitWeibull(spansOf(rows))).toBeNull()
})

test('4. the standard error is that of S, S times that of ln S; at S = 0 there is none and no limit of any kind', () => {
  const curve = curveOf([at(2, 1), at(4, 1)])
  for (const interval of ['plain', 'log', 'log-log'] as IntervalKind[]) {
    const [half, none] = curveRows(curve, curveLimits(curve, { confidence: 0.95, interval }))
    expect(half!.standardError).toBeCloseTo(0.5 * Math.sqrt(1 / 2), 15)
    expect(none).toMatchObject({ survival: 0, standardError: null, lower: null, upper: null })
  }
})

test('5. while S is 1, not certainty but the exact bound, marked as such', () => {
  const { data, what } = { data: reference('odd-cases-a').results.kaplan_meier.zero_failures_20.input, what: 'exact-one-sided' }
  const curve = curveOf(fileRows(data))
  for (const interval of ['plain', 'log', 'log-log'] as IntervalKind[]) {
    const [first] = curveRows(curve, curveLimits(curve, { confidence: 0.95, interval }))
    expect(first).toMatchObject({ survival: 1, upper: 1, bound: what })
    expect(first!.lower).toBeCloseTo(0.05 ** (1 / 20), 14)
  }
})

test('6. limits: plain clipped to 0 and 1, log clipped above, log-log within by itself', () => {
  const of = (interval: IntervalKind, survival: number) =>
    confidenceLimits({ survival, greenwood: 0.5, atRisk: 4 }, { confidence: 0.95, interval })
  const z = 1.959963984540054
  expect(of('plain', 0.5)).toMatchObject({ lower: 0, upper: 1 })
  expect(of('log', 0.5).upper).toBe(1)
  expect(of('log', 0.5).lower).toBeCloseTo(Math.exp(Math.log(0.5) - z * Math.sqrt(0.5)), 15)
  const width = (z * Math.sqrt(0.5)) / Math.log(0.5)
  expect(of('log-log', 0.5).lower).toBeCloseTo(Math.exp(-Math.exp(Math.log(Math.LN2) - width)), 14)
  expect(of('log-log', 0.5).upper).toBeCloseTo(Math.exp(-Math.exp(Math.log(Math.LN2) + width)), 14)
})

describe('7. quantiles by the first crossing', () => {
  const medianOf = (rows: TimedObservation[], interval: IntervalKind = 'log-log', p = 0.5) => {
    const curve = curveOf(rows)
    return quantile(curve, curveLimits(curve, { confidence: 0.95, interval }), p)
  }

  test('the middle of a stretch at the level that ends in a fall; its beginning where it never falls', () => {
    expect(medianOf([at(2, 1), at(4, 1), at(6, 1), at(8, 1)]).estimate).toBe(5)
    expect(medianOf([at(2, 1), at(4, 1), at(6, 0), at(9, 0)]).estimate).toBe(4)
    // Three times 1/5 leave 0.4000000000000001 of 1 - 0.6.
    expect(
      medianOf(
        [1, 2, 3, 4, 5].map((t) => at(t, 1)),
        'log-log',
        0.6
      ).estimate
    ).toBe(3.5)
  })

  test('where a limit is not monotone, its first crossing (45 and not 48; 804 and not 822)', () => {
    expect(medianOf(fileRows(reference('right-aml').data), 'log').upper).toBe(45)
    const { data } = reference('truncated-retirement462')
    const women = fileRows(data).filter((row, i) => data.group[i] === 'female' && row.entry! < row.time)
    for (const p of [0.1, 0.25]) expect(medianOf(women, 'log-log', p).lower).toBe(804)
  })
})

test('8. once S is 0 it stays 0, though later units enter', () => {
  const { input } = reference('odd-cases-a').results.kaplan_meier.late_entry
  expect([...curveOf(fileRows(input)).survival]).toEqual([0, 0, 0])
})

describe('9. delayed entry', () => {
  test('at risk when entry < t <= exit; rows at exits only', () => {
    const curve = curveOf([at(3, 1), at(7, 0, 3), at(7, 1, 2)])
    expect([...curve.time]).toEqual([3, 7])
    expect([...curve.atRisk]).toEqual([2, 2])
  })

  test('a row whose entry is its exit is refused with its index', () => {
    expect(checkObservations([at(5, 1), at(5, 1, 5)])).toMatchObject([{ path: 'observations.1.time', kind: 'impossible' }])
  })

  test('conditional on a later start: rows that end before leave, S is 1 there', () => {
    const { data, results } = reference('truncated-retirement462')
    const [first] = results.kaplan_meier.by_group_conditional_on_816
    const late = fileRows(data)
      .filter((row, i) => data.group[i] === first.group && row.entry! < row.time && row.time >= 816)
      .map((row) => ({ ...row, entry: Math.max(row.entry!, 816) }))
    expectClose(curveOf(late.filter((row) => row.time > row.entry)).survival, first.rows.surv, 1e-12, 'S from 816 on')
  })
})

test('10. Nelson-Aalen adds d/n, its variance d/n^2, without a correction for ties', () => {
  const { cumulative, variance } = nelsonAalen(curveOf([at(2, 1), at(2, 1), at(3, 0)]))
  expect([cumulative[0], variance[0]]).toEqual([2 / 3, 2 / 9])
})

describe('11. log-rank', () => {
  const testOf = (rows: TimedObservation[], groups: string[]) => {
    const names = [...new Set(groups)].sort()
    const parts = splitColumns(
      columnsOf(rows),
      groups.map((g) => names.indexOf(g)),
      names.length
    )
    return logRank([parts.map(tallyOf)])!
  }

  test('hypergeometric variance; a time with one unit at risk adds nothing to it', () => {
    const result = testOf([at(1, 1), at(2, 1), at(3, 1)], ['a', 'b', 'b'])
    // 1 of 3, then b alone: 2/9 x (3 - 1)/(3 - 1).
    expect(result.variance[0]![0]).toBeCloseTo(2 / 9, 15)
  })

  test('a group of which nothing is expected leaves the test', () => {
    const { input } = reference('odd-cases-a').results.log_rank.group_left_before_first_event
    expect(testOf(fileRows(input), input.group).degreesOfFreedom).toBe(1)
  })

  test("with ties 'exact', a Cox model's score test is the same (1e-9)", () => {
    for (const name of ['right-remission42', 'right-aml']) {
      const { data, results } = reference(name)
      const { chiSquare } = testOf(fileRows(data), data.group)
      expect(Math.abs(chiSquare / results.cox.unstratified.exact.score_chisq - 1)).toBeLessThan(1e-9)
    }
  })
})

test('12. restricted mean: the term of a time at which all at risk fail is 0; past the last time while S is above 0 it is unknown', () => {
  expect(restrictedMean(curveOf([at(2, 1), at(4, 1)]), 4)).toMatchObject({ estimate: 3, standardError: Math.sqrt(1 / 2) })
  expect(restrictedMean(curveOf([at(2, 1), at(4, 0)]), 5).estimate).toBeNull()
})

test('13. intervals are open on the left; an exact time begins before intervals end and others begin there', () => {
  const cells = (rows: Observation[]) => {
    const { left, right } = turnbull(spansOf(rows))
    return [...left].map((l, k) => [l, right[k]])
  }
  expect(
    cells([
      { lower: 0, upper: 5 },
      { lower: 5, upper: 7 }
    ])
  ).toEqual([
    [0, 5],
    [5, 7]
  ])
  expect(cells([at(5, 1), at(5, 0)])).toEqual([
    [5, 5],
    [5, Infinity]
  ])
  const fit = turnbull(spansOf([{ lower: 1, upper: 3 }, at(9, 1)]))
  expect([1, 2, 3].map((t) => turnbullAt(fit, t))).toEqual([1, null, expect.closeTo(0.5, 12)])
})

test('14. an incidence grows by S(t-) d/n; with the event-free share they add up to 1', () => {
  const rows = [
    { time: 1, event: 'a' },
    { time: 2, event: 'b' },
    { time: 3, event: 'a' },
    { time: 4, event: 0 }
  ]
  const { incidence, eventFree } = aalenJohansen(tallyOf(columnsOf(rows, ['a', 'b'])))
  expectClose(incidence[0]!, [1 / 4, 1 / 4, 1 / 2, 1 / 2], 1e-15, 'a')
  expectClose(incidence[1]!, [0, 1 / 4, 1 / 4, 1 / 4], 1e-15, 'b')
  expectClose(eventFree, [3 / 4, 1 / 2, 1 / 4, 1 / 4], 1e-15, 'event-free')
})

test('15. Weibull: the likelihood is of T, limits normal for the logarithms; an interval from 0 is left-censored', () => {
  const rows: Observation[] = [at(2, 1), at(5, 1), at(9, 1), { lower: 0, upper: 4 }, at(12, 0)]
  const fit = fitWeibull(spansOf(rows))!
  const { shape: k, scale } = fit
  const s = (t: number) => Math.exp(-((t / scale) ** k))
  const density = (t: number) => (k / scale) * (t / scale) ** (k - 1) * s(t)
  const value = Math.log(density(2) * density(5) * density(9) * (1 - s(4)) * s(12))
  expect(fit.logLikelihood).toBeCloseTo(value, 10)
  const { estimate, lower, upper } = weibullQuantile(fit, 0.1)
  expect(lower * upper).toBeCloseTo(estimate ** 2, 10)
})

test('16. exact bounds: none gives a lower limit of 0, all an upper of 1; no failure alpha^(1/n); a mean time by chi-square', () => {
  expect(clopperPearson(0, 10)!.lower).toBe(0)
  expect(clopperPearson(10, 10)!.upper).toBe(1)
  expect(clopperPearson(10, 10, 0.9)!.lower).toBeCloseTo(0.05 ** (1 / 10), 14)
  for (const row of reference('exact-bounds-a').results.mtbf) {
    const { total_time: time, failures: r } = row
    if (r > 0) expect(time / r).toBe(row.mtbf)
    const [lower, upper] = row.two_sided_95_time_truncated
    expect(time / gammaUpperQuantile(0.025, r + 1) / lower - 1).toBeCloseTo(0, 11)
    // 2T/chi2(alpha/2; 2r), without end at r = 0.
    if (r > 0) expect(time / gammaUpperQuantile(0.975, r) / upper - 1).toBeCloseTo(0, 11)
    else expect(upper === null || upper === Infinity).toBe(true)
  }
})

test('17. a unit that failed could have been watched for its own time, the others to the closing date', () => {
  const { ratio } = completeness([
    { time: 4, toClose: 10, isFailed: true },
    { time: 5, toClose: 10, isFailed: false }
  ])
  expect(ratio).toBe(9 / 14)
})

test('18. the silent fail on the day of their last word or just after, or run to the closing date', () => {
  const units = [{ observation: at(5, 0), isSilent: true, toClose: 10 }]
  const worst = (delay: number) => silentBounds(units, 1, delay).worst[0]
  expect(worst(0)).toEqual({ entry: 0, time: 5, event: 1 })
  expect(worst(0.5)).toEqual({ entry: 0, time: 5.5, event: 1 })
  expect(silentBounds(units).best[0]).toEqual({ entry: 0, time: 10, event: 0 })
})
