import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { kaplanMeierCases } from '../../../tests/support/survival-cases'
import { expectClose } from '../../../tests/support/survival-reference'
import { columnsOf } from './columns'
import { kaplanMeier } from './kaplan-meier'
import type { TimedObservation } from './observation'
import { tallyOf } from './tally'

const curveOf = (rows: TimedObservation[]) => kaplanMeier(tallyOf(columnsOf(rows)))

describe('worked by hand', () => {
  test('no observation: no row', () => {
    expect(curveOf([]).time).toHaveLength(0)
  })

  test('a unit censored on the day of a failure is still at risk', () => {
    const curve = curveOf([
      { time: 5, event: 1 },
      { time: 5, event: 0 },
      { time: 8, event: 1 },
      { time: 9, event: 0 }
    ])
    expect([...curve.time]).toEqual([5, 8, 9])
    expect([...curve.atRisk]).toEqual([4, 2, 1])
    expect([...curve.survival]).toEqual([3 / 4, 3 / 8, 3 / 8])
    expect([...curve.greenwood]).toEqual([1 / 12, 1 / 12 + 1 / 2, 1 / 12 + 1 / 2])
  })

  test('failed on day 0 counts; entered late does not count at the entry', () => {
    const curve = curveOf([
      { time: 0, event: 1 },
      { time: 6, event: 0 },
      { entry: 3, time: 6, event: 0 },
      { time: 3, event: 1 },
      { entry: 3, time: 4, event: 1 }
    ])
    expect([...curve.time]).toEqual([0, 3, 4, 6])
    expect([...curve.atRisk]).toEqual([3, 2, 3, 2])
    expect([...curve.survival]).toEqual([2 / 3, 1 / 3, (2 / 3) * (1 / 2) * (2 / 3), (2 / 3) * (1 / 2) * (2 / 3)])
  })

  test('once 0, S stays 0 though later units enter', () => {
    const curve = curveOf([
      { time: 2, event: 1 },
      { entry: 5, time: 9, event: 0 }
    ])
    expect([...curve.survival]).toEqual([0, 0])
    expect([...curve.greenwood]).toEqual([Infinity, Infinity])
  })
})

describe("R's survival package on published data sets (tests/fixtures/survival, 1e-12)", () => {
  test.each(kaplanMeierCases())('$name', ({ rows, expected }) => {
    const curve = curveOf(rows)
    const want = expected.rows
    expect(curve.units).toBe(expected.n)
    expect(curve.failures).toBe(expected.events)
    expectClose(curve.time, want.time, 0, 'time')
    expectClose(curve.atRisk, want.n_risk, 0, 'at risk')
    expectClose(curve.events, want.n_event, 0, 'events')
    expectClose(curve.censored, want.n_censor, 0, 'censored')
    expectClose(curve.survival, want.surv, 1e-12, 'survival')
    expectClose(curve.greenwood, want.greenwood_sum, 1e-12, 'greenwood')
    expectClose(curve.greenwood.map(Math.sqrt), want.se_log_surv, 1e-12, 'standard error of ln S')
  })
})

const observation = fc
  .record({
    entry: fc.integer({ min: 0, max: 40 }),
    length: fc.integer({ min: 1, max: 60 }),
    event: fc.constantFrom(0, 1),
    weight: fc.integer({ min: 1, max: 4 })
  })
  .map(({ entry, length, event, weight }): TimedObservation => ({ entry, time: entry + length, event, weight }))
const observations = fc.array(observation, { minLength: 1, maxLength: 40 })
const steps = (rows: TimedObservation[]) => {
  const { time, atRisk, events, censored, survival, greenwood } = curveOf(rows)
  return {
    time: [...time],
    atRisk: [...atRisk],
    events: [...events],
    censored: [...censored],
    survival: [...survival],
    greenwood: [...greenwood]
  }
}

describe('properties', () => {
  test('a weight is a repetition', () => {
    fc.assert(
      fc.property(observations, (rows) => {
        const repeated = rows.flatMap((row) => Array.from({ length: row.weight! }, () => ({ ...row, weight: 1 })))
        expect(steps(rows)).toEqual(steps(repeated))
      })
    )
  })

  test('the order of the rows does not matter', () => {
    fc.assert(
      fc.property(
        observations.chain((rows) => fc.tuple(fc.constant(rows), fc.shuffledSubarray(rows, { minLength: rows.length }))),
        ([rows, shuffled]) => {
          expect(steps(shuffled)).toEqual(steps(rows))
        }
      )
    )
  })

  test('S starts at or below 1 and never rises; the variance never falls', () => {
    fc.assert(
      fc.property(observations, (rows) => {
        const { survival, greenwood } = steps(rows)
        survival.forEach((s, i) => expect(s >= 0 && s <= (survival[i - 1] ?? 1)).toBe(true))
        greenwood.forEach((v, i) => expect(v >= (greenwood[i - 1] ?? 0)).toBe(true))
      })
    )
  })

  test('splitting a record at any time with delayed entry changes nothing at the failures', () => {
    fc.assert(
      fc.property(observations, fc.integer({ min: 1, max: 100 }), (rows, cut) => {
        const split = rows.flatMap((row) =>
          row.entry! < cut && cut < row.time
            ? [
                { ...row, time: cut, event: 0 },
                { ...row, entry: cut }
              ]
            : [row]
        )
        const atFailures = (all: ReturnType<typeof steps>) =>
          all.time.flatMap((time, i) =>
            all.events[i]! > 0 ? [[time, all.atRisk[i], all.events[i], all.survival[i], all.greenwood[i]]] : []
          )
        expect(atFailures(steps(split))).toEqual(atFailures(steps(rows)))
      })
    )
  })

  test('whole days and the same times in other units give the same curve (table and sort agree)', () => {
    fc.assert(
      fc.property(observations, (rows) => {
        const scaled = rows.map((row) => ({ ...row, entry: row.entry! / 7, time: row.time / 7 }))
        const { time, ...rest } = steps(rows)
        const { time: scaledTime, ...scaledRest } = steps(scaled)
        expect(scaledRest).toEqual(rest)
        expectClose(
          scaledTime,
          time.map((t) => t / 7),
          1e-15,
          'time'
        )
      })
    )
  })
})
