import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { expectClose, reference, referencesWith, type Reference } from '../../../tests/support/survival-reference'
import { aalenJohansen, incidenceLimits } from './aalen-johansen'
import { columnsOf } from './columns'
import type { IntervalKind } from './confidence-limits'
import { kaplanMeier } from './kaplan-meier'
import type { TimedObservation } from './observation'
import { tallyForCause, tallyOf } from './tally'

const incidencesOf = (rows: TimedObservation[], causes?: string[]) => aalenJohansen(tallyOf(columnsOf(rows, causes)))

describe('worked by hand', () => {
  const rows = [
    { time: 1, event: 'a' },
    { time: 2, event: 'b' },
    { time: 2, event: 0 },
    { time: 3, event: 'a' }
  ]

  test('1/4, then 3/4 x 1/3, then 1/2 x 1', () => {
    const result = incidencesOf(rows)
    expect(result.causes).toEqual(['a', 'b'])
    expect([...result.time]).toEqual([1, 2, 3])
    expectClose(result.eventFree, [3 / 4, 1 / 2, 0], 1e-15, 'event-free')
    expectClose(result.incidence[0]!, [1 / 4, 1 / 4, 3 / 4], 1e-15, 'a')
    expectClose(result.incidence[1]!, [0, 1 / 4, 1 / 4], 1e-15, 'b')
  })

  test('without censoring the incidence is a plain proportion, and so is its error', () => {
    const all = [1, 2, 3, 4, 5].map((time) => ({ time, event: time % 2 ? 'a' : 'b' }))
    const result = incidencesOf(all)
    expectClose(result.incidence[0]!, [0.2, 0.2, 0.4, 0.4, 0.6], 1e-15, 'a')
    expectClose(
      result.standardError[0]!,
      [0.2, 0.2, 0.4, 0.4, 0.6].map((p) => Math.sqrt((p * (1 - p)) / 5)),
      1e-14,
      'error'
    )
  })

  test('failures without causes are refused', () => {
    expect(() => incidencesOf([{ time: 1, event: 1 }])).toThrow(RangeError)
  })

  test('limits before the first failure of a cause: the exact bound; none when certain or alone', () => {
    const options = { confidence: 0.75, interval: 'log-log' as const }
    expect(incidenceLimits({ estimate: 0, standardError: 0, atRisk: 2 }, options)).toEqual({
      lower: 0,
      upper: 0.5,
      bound: 'exact-one-sided'
    })
    expect(incidenceLimits({ estimate: 0, standardError: 0, atRisk: 0 }, options)).toEqual({
      lower: null,
      upper: null,
      bound: null
    })
    expect(incidenceLimits({ estimate: 1, standardError: 0, atRisk: 2 }, options)).toEqual({
      lower: null,
      upper: null,
      bound: null
    })
  })
})

test('nothing is uncertain where all fail of the same cause: no rounding is left in its place', () => {
  // R's survfit has 7e-17; a difference of variances would leave 1e-9 and more.
  const rows = [0.3, 0.7, 1.1, 1.9, 2.3, 3.1, 4.7].map((time) => ({ time, event: 'a', weight: 3 }))
  const { incidence, standardError } = incidencesOf(rows, ['a', 'b'])
  expect(incidence[0]!.at(-1)).toBeCloseTo(1, 14)
  expect(standardError[0]!.at(-1)).toBeLessThan(1e-15)
  expect([...standardError[1]!]).toEqual(rows.map(() => 0))
})

type Case = { name: string; rows: TimedObservation[]; causes: string[]; expected: Reference }

function cases(): Case[] {
  return referencesWith('competing_risks').flatMap((name) => {
    const { data, results } = reference(name)
    const { pooled, by_group: byGroup } = results.competing_risks
    const causes = Object.keys(pooled.cif)
    const rowsOf = (group: string | null) =>
      data.time.flatMap((time: number, i: number) =>
        group === null || data.group[i] === group ? [{ time, event: data.cause[i] === 0 ? 0 : causes[data.cause[i] - 1] }] : []
      )
    return [
      { name: `${name} pooled`, rows: rowsOf(null), causes, expected: pooled },
      ...Object.entries<Reference>(byGroup).map(([group, expected]) => ({
        name: `${name} ${group}`,
        rows: rowsOf(group),
        causes,
        expected
      }))
    ]
  })
}

describe("R's survfit for competing risks on published data sets (tests/fixtures/survival, 1e-12, limits 1e-9)", () => {
  test('there are some', () => expect(cases().length).toBeGreaterThan(5))
  test.each(cases())('$name', ({ rows, causes, expected }) => {
    const result = incidencesOf(rows, causes)
    expectClose(result.time, expected.time, 0, 'time')
    expectClose(result.atRisk, expected.n_risk, 0, 'at risk')
    expectClose(result.eventFree, expected.event_free, 1e-12, 'event-free')
    const tally = tallyOf(columnsOf(rows, causes))
    const atRows = (counts: Float64Array) => counts.filter((_, j) => tally.failed[j]! + tally.censored[j]! > 0)
    expect(rows).toHaveLength(expected.n)
    expectClose(atRows(tally.censored), expected.n_censor, 0, 'censored')
    causes.forEach((cause, k) => expectClose(atRows(tally.failedBy[k]!), expected.n_event[cause], 0, `failed by ${cause}`))
    const curve = kaplanMeier(tally)
    curve.survival.forEach((s, i) => {
      if (s > 0) expect(Math.abs(s * Math.sqrt(curve.greenwood[i]!) - expected.se_event_free[i])).toBeLessThan(1e-12)
    })
    causes.forEach((cause, k) => {
      const incidence = result.incidence[k]!
      const error = result.standardError[k]!
      expectClose(incidence, expected.cif[cause], 1e-12, cause)
      expectClose(error, expected.se_cif[cause], 1e-12, `error of ${cause}`)
      for (const interval of ['plain', 'log', 'log-log'] as IntervalKind[]) {
        const limits = [...incidence].map((estimate, i) =>
          incidenceLimits({ estimate, standardError: error[i]!, atRisk: result.atRisk[i]! }, { confidence: 0.95, interval })
        )
        // Before the first failure of a cause R has [0, 0] or nothing; the exact bound stands there.
        const seen = (values: (number | null)[]) => values.filter((_, i) => incidence[i]! > 0)
        expectClose(
          seen(limits.map(({ lower }) => lower)),
          seen(expected.ci[interval][cause].lower),
          1e-9,
          `${interval} lower ${cause}`
        )
        expectClose(
          seen(limits.map(({ upper }) => upper)),
          seen(expected.ci[interval][cause].upper),
          1e-9,
          `${interval} upper ${cause}`
        )
      }
    })
  })

  test('treating other causes as censored overstates an incidence: the contrast in the gammopathy data (1e-12)', () => {
    const { data, results } = reference('competing-gammopathy1384')
    const rows = data.time.map((time: number, i: number) => ({ time, event: [0, 'progression', 'death'][data.cause[i]]! }))
    const alone = kaplanMeier(tallyForCause(tallyOf(columnsOf(rows)), 'progression'))
    const naive = results.naive_one_minus_km
    expectClose(alone.time, naive.time, 0, 'time')
    expectClose(
      alone.survival.map((s) => 1 - s),
      naive.one_minus_surv,
      1e-12,
      'one minus Kaplan-Meier'
    )
    expect(1 - alone.survival.at(-1)!).toBeGreaterThan(results.competing_risks.pooled.cif.progression.at(-1))
  })
})

const observation = fc
  .record({
    entry: fc.integer({ min: 0, max: 20 }),
    length: fc.integer({ min: 1, max: 30 }),
    event: fc.constantFrom(0, 'a', 'b', 'c'),
    weight: fc.integer({ min: 1, max: 3 })
  })
  .map(({ length, ...rest }): TimedObservation => ({ ...rest, time: rest.entry + length }))

test('incidences and the event-free share add up to 1; incidences never fall; one cause alone is 1 - Kaplan-Meier', () => {
  fc.assert(
    fc.property(fc.array(observation, { minLength: 1, maxLength: 40 }), (rows) => {
      const result = incidencesOf(rows, ['a', 'b', 'c'])
      result.time.forEach((_, i) => {
        expect(result.incidence.reduce((sum, one) => sum + one[i]!, result.eventFree[i]!)).toBeCloseTo(1, 12)
        if (i > 0) result.incidence.forEach((one) => expect(one[i]! >= one[i - 1]!).toBe(true))
      })
      const merged = rows.map((row) => ({ ...row, event: row.event === 0 ? 0 : 'any' }))
      const single = incidencesOf(merged, ['any'])
      const curve = kaplanMeier(tallyOf(columnsOf(merged, ['any'])))
      expectClose(
        single.incidence[0]!.map((f) => 1 - f),
        curve.survival,
        1e-12,
        'survival'
      )
      const error = curve.survival.map((s, i) => (s > 0 ? s * Math.sqrt(curve.greenwood[i]!) : single.standardError[0]![i]!))
      expectClose(single.standardError[0]!, error, 1e-9, 'error')
    })
  )
})
