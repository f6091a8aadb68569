import { describe, expect, test } from 'vitest'
import { expectClose, reference, referencesNamed } from '../../../tests/support/survival-reference'
import { columnsOf } from './columns'
import { kaplanMeier } from './kaplan-meier'
import type { TimedObservation } from './observation'
import { isSilent, silentBounds, type SilentUnit } from './silent-bounds'
import { survivalAt } from './survival-at'
import { tallyOf } from './tally'

const curveOf = (rows: TimedObservation[]) => kaplanMeier(tallyOf(columnsOf(rows)))

describe('worked by hand', () => {
  test.each([
    ['2026-03-01', '2026-03-31', false],
    ['2026-03-01', '2026-04-01', true],
    ['2026-05-01', '2026-04-01', false]
  ])('due on %s, as of %s: silent is %s', (due, asOf, expected) => {
    expect(isSilent(due, asOf)).toBe(expected)
  })

  test('worst: failed the day after; best: still running', () => {
    const units: SilentUnit[] = [
      { observation: { time: 10, event: 1 }, isSilent: false, toClose: 100 },
      { observation: { entry: 5, time: 20, event: 0, weight: 3 }, isSilent: true, toClose: 90 },
      { observation: { time: 80, event: 0 }, isSilent: false, toClose: 85 }
    ]
    const { worst, best } = silentBounds(units)
    expect(worst[1]).toEqual({ entry: 5, time: 21, event: 1, weight: 3 })
    expect(best[1]).toEqual({ entry: 5, time: 90, event: 0, weight: 3 })
    for (const i of [0, 2]) expect([worst[i], best[i]]).toEqual([units[i]!.observation, units[i]!.observation])
    expect(silentBounds(units, 'board').worst[1]!.event).toBe('board')
  })

  test('a failed unit is not silent; nobody is heard of after the as-of date', () => {
    expect(() => silentBounds([{ observation: { time: 1, event: 1 }, isSilent: true, toClose: 9 }])).toThrow(RangeError)
    expect(() => silentBounds([{ observation: { time: 10, event: 0 }, isSilent: false, toClose: 9 }])).toThrow(RangeError)
  })
})

describe('ten units worked by hand and the published heart transplant list (tests/fixtures/survival, 1e-12)', () => {
  test.each(referencesNamed('followup'))('%s', (name) => {
    const { data, results } = reference(name)
    const units: SilentUnit[] = data.start.map((start: number, i: number) => ({
      observation: { time: data.last_contact[i] - start, event: data.event[i] },
      isSilent: data.event[i] === 0 && data.last_contact[i] < data.closing_day,
      toClose: data.closing_day - start
    }))
    expect(units.flatMap((unit, i) => (unit.isSilent ? [i + 1] : []))).toEqual(results.silent_rows)
    const compare = (rows: TimedObservation[], expected: { rows: Record<string, number[]> }) => {
      const curve = curveOf(rows)
      expectClose(curve.time, expected.rows.time!, 0, 'time')
      expectClose(curve.atRisk, expected.rows.n_risk!, 0, 'at risk')
      expectClose(curve.survival, expected.rows.surv!, 1e-12, 'survival')
      expectClose(curve.greenwood, expected.rows.greenwood_sum!, 1e-12, 'greenwood')
    }
    compare(
      units.map(({ observation }) => observation),
      results.as_observed
    )
    compare(silentBounds(units, 1, 0).worst, results.worst_tied)
    compare(silentBounds(units).best, results.best)
    // An instant later, after that day's failures and censorings: half a day, where all times are whole.
    const after = curveOf(silentBounds(units, 1, 0.5).worst)
    const { time, surv_after: expected } = results.worst_just_after
    expectClose(
      time.map((t: number) => survivalAt(after, Math.min(t + 0.5, after.time.at(-1)!)).survival),
      expected,
      1e-12,
      'just after'
    )
  })
})
