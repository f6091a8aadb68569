import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { expectClose, reference, referencesWith, type Reference } from '../../../tests/support/survival-reference'
import { columnsOf } from './columns'
import { kaplanMeier } from './kaplan-meier'
import type { Observation, TimedObservation } from './observation'
import { spansOf } from './spans'
import { tallyOf } from './tally'
import { turnbull, turnbullAt } from './turnbull'

const fitOf = (rows: Observation[]) => turnbull(spansOf(rows))
const support = (rows: Observation[]) => {
  const { left, right, mass } = fitOf(rows)
  return [...left].map((l, k) => [l, right[k], Math.round(mass[k]! * 1e12) / 1e12])
}

describe('worked by hand', () => {
  test.each<[string, Observation[], number[][]]>([
    ['no rows', [], []],
    [
      'touching intervals do not meet',
      [
        { lower: 0, upper: 5 },
        { lower: 5, upper: 7 }
      ],
      [
        [0, 5, 0.5],
        [5, 7, 0.5]
      ]
    ],
    [
      'overlapping ones put all in common',
      [
        { lower: 0, upper: 5 },
        { lower: 3, upper: 7 }
      ],
      [[3, 5, 1]]
    ],
    [
      'an exact 5 and one still working at 5',
      [
        { time: 5, event: 1 },
        { time: 5, event: 0 }
      ],
      [
        [5, 5, 0.5],
        [5, Infinity, 0.5]
      ]
    ],
    [
      'an exact 5 closes (3, 5]',
      [
        { lower: 3, upper: 5 },
        { time: 5, event: 1 }
      ],
      [[5, 5, 1]]
    ],
    [
      'failed on day 0',
      [
        { time: 0, event: 1 },
        { lower: 0, upper: 4 }
      ],
      [
        [0, 0, 0.5],
        [0, 4, 0.5]
      ]
    ],
    [
      'inspection counts are plain shares',
      [
        { lower: 0, upper: 2, weight: 3 },
        { lower: 2, upper: 4, weight: 5 },
        { lower: 4, upper: null, weight: 2 }
      ],
      [
        [0, 2, 0.3],
        [2, 4, 0.5],
        [4, Infinity, 0.2]
      ]
    ],
    // One unit seen whole: 1/2 of it by 4; the late one says nothing about the time before 4 and fails by 6.
    [
      'a late entry tells only of the time after it',
      [
        { lower: 0, upper: 4 },
        { time: 8, event: 0 },
        { entry: 4, lower: 4, upper: 6 }
      ],
      [
        [0, 4, 0.5],
        [4, 6, 0.25],
        [8, Infinity, 0.25]
      ]
    ]
  ])('%s', (_what, rows, expected) => {
    expect(support(rows)).toEqual(expected)
  })

  test('S is known between the cells with mass, unknown inside and past the end', () => {
    const fit = fitOf([
      { lower: 1, upper: 3 },
      { time: 5, event: 1 },
      { time: 9, event: 0 }
    ])
    const s = (t: number) => turnbullAt(fit, t)
    expect([s(0), s(1), s(2)]).toEqual([1, 1, null])
    expectClose([s(3), s(4.9), s(5), s(9)], [2 / 3, 2 / 3, 1 / 3, 1 / 3], 1e-12, 'S')
    expect(s(9.5)).toBeNull()
  })
})

type Case = { name: string; rows: Observation[]; expected: Reference }

function cases(): Case[] {
  return referencesWith('turnbull').flatMap((name) => {
    const { data, results } = reference(name)
    return Object.entries<Reference>(results.turnbull).map(([label, expected]) => {
      const input = expected.input ?? data
      const rows = input.left.flatMap((left: number | null, i: number): Observation[] =>
        expected.input || label === 'pooled' || data.group[i] === label
          ? [{ lower: left ?? 0, upper: input.right[i], weight: input.count?.[i] ?? 1 }]
          : []
      )
      return { name: `${name} ${label}`, rows, expected }
    })
  })
}

describe('fully converged estimates of published data sets (tests/fixtures/survival: log-likelihood 1e-10, masses 1e-8)', () => {
  test('there are some', () => expect(cases().length).toBeGreaterThan(9))
  test.each(cases())('$name', ({ rows, expected }) => {
    const fit = fitOf(rows)
    expect(fit.units).toBe(expected.n)
    expectClose(fit.left, expected.support.left, 0, 'left')
    expectClose(
      fit.right.map((right) => (right === Infinity ? NaN : right)),
      expected.support.right.map((right: number) => (right === Infinity ? null : right)),
      0,
      'right'
    )
    expectClose(fit.mass, expected.support.mass, 1e-8, 'mass')
    expectClose(fit.survivalAfter, expected.support.surv_after, 1e-8, 'S after')
    expect(Math.abs(fit.logLikelihood - expected.loglik)).toBeLessThan(1e-10 * Math.max(1, Math.abs(expected.loglik)))
    expect(fit.gap).toBeLessThan(1e-8)
    expect(fit.isConverged).toBe(true)
    // survfit stops early: good to about 2e-3.
    const coarse: (number | null)[] = expected.r_survfit.surv_at_support_right ?? []
    coarse.forEach((s, k) => expect(Math.abs((s ?? fit.survivalAfter[k]!) - fit.survivalAfter[k]!)).toBeLessThan(2e-3))
  })
})

const row = fc.record({
  entry: fc.integer({ min: 0, max: 8 }),
  start: fc.integer({ min: 0, max: 20 }),
  length: fc.integer({ min: 1, max: 12 }),
  kind: fc.constantFrom('exact', 'censored', 'interval')
})
const toObservation =
  (isDelayed: boolean) =>
  ({ entry, start, length, kind }: { entry: number; start: number; length: number; kind: string }): Observation => {
    const from = isDelayed ? entry : 0
    if (kind === 'interval') return { entry: from, lower: from + start, upper: from + start + length }
    return { entry: from, time: from + start + 1, event: kind === 'exact' ? 1 : 0 }
  }
const rowsOf = (isDelayed: boolean) => fc.array(row.map(toObservation(isDelayed)), { minLength: 1, maxLength: 40 })

describe('properties', () => {
  test.each([false, true])('no unit of mass moved anywhere would gain 1e-8 (delayed entry: %s)', (isDelayed) => {
    fc.assert(
      fc.property(rowsOf(isDelayed), (rows) => {
        const fit = fitOf(rows)
        expect(fit.isConverged).toBe(true)
        expect(fit.gap).toBeLessThan(1e-8)
        expect(fit.mass.reduce((sum, m) => sum + m, 0)).toBeCloseTo(1, 12)
        fit.survivalAfter.forEach((s, k) => expect(s >= 0 && s <= (fit.survivalAfter[k - 1] ?? 1)).toBe(true))
      }),
      { numRuns: 300 }
    )
  })

  test('exact and right-censored times with delayed entry give Kaplan-Meier', () => {
    fc.assert(
      fc.property(rowsOf(true), (all) => {
        const rows = all.filter((one): one is TimedObservation => 'time' in one)
        const curve = kaplanMeier(tallyOf(columnsOf(rows)))
        const fit = fitOf(rows)
        curve.time.forEach((time, i) => {
          // Past the last failure the endless cell begins at the last entry or exit; S up to there is known.
          const ours = turnbullAt(fit, time)
          if (ours !== null) expect(Math.abs(ours - curve.survival[i]!)).toBeLessThan(1e-9)
          else expect(curve.survival[i]).toBeGreaterThan(0)
        })
        const failures = [...curve.time].filter((_, i) => curve.events[i]! > 0)
        for (const time of failures) expect(turnbullAt(fit, time)).not.toBeNull()
      })
    )
  })

  test('narrow intervals tend to Kaplan-Meier', () => {
    fc.assert(
      fc.property(rowsOf(false), (all) => {
        const rows = all.filter((one): one is TimedObservation => 'time' in one)
        const narrow = rows.map((one): Observation => (one.event === 1 ? { lower: one.time - 1e-4, upper: one.time } : one))
        const curve = kaplanMeier(tallyOf(columnsOf(rows)))
        const fit = fitOf(narrow)
        curve.time.forEach((time, i) => {
          if (curve.events[i]! > 0) expect(Math.abs(turnbullAt(fit, time)! - curve.survival[i]!)).toBeLessThan(1e-9)
        })
      })
    )
  })

  test('a weight is a repetition; the order of rows does not matter', () => {
    fc.assert(
      fc.property(rowsOf(true), (rows) => {
        const once = fitOf([...rows, ...rows.map((one) => ({ ...one }))].reverse())
        const weighted = fitOf(rows.map((one) => ({ ...one, weight: 2 })))
        expect(Math.abs(once.logLikelihood - weighted.logLikelihood)).toBeLessThan(1e-9)
      })
    )
  })

  test('splitting a record with delayed entry changes nothing', () => {
    fc.assert(
      fc.property(rowsOf(true), fc.integer({ min: 1, max: 25 }), (rows, cut) => {
        const split = rows.flatMap((one): Observation[] => {
          const first = 'time' in one ? one.time : one.lower
          return one.entry! < cut && cut < first
            ? [
                { entry: one.entry, time: cut, event: 0 },
                { ...one, entry: cut }
              ]
            : [one]
        })
        expect(Math.abs(fitOf(split).logLikelihood - fitOf(rows).logLikelihood)).toBeLessThan(1e-9)
      })
    )
  })

  test('many exact times among intervals (too many cells for a dense matrix) converge as well', () => {
    const rows: Observation[] = Array.from({ length: 4000 }, (_, i) => {
      const time = ((i * 7919) % 4000) + 1
      if (i % 5 === 0) return { lower: time, upper: time + 40 + (i % 90) }
      return { entry: i % 3 === 0 ? time / 4 : 0, time, event: i % 4 === 0 ? 0 : 1 }
    })
    const fit = fitOf(rows)
    expect(fit.isConverged).toBe(true)
    expect([...fit.mass].filter((m) => m > 0).length).toBeGreaterThan(1200)
    expect(fit.gap).toBeLessThan(1e-8)
  })
})
