import { describe, expect, test } from 'vitest'
import { expectClose, reference, referencesNamed } from '../../../tests/support/survival-reference'
import { columnsOf } from './columns'
import { curveLimits } from './confidence-limits'
import { completeness } from './follow-up'
import { kaplanMeier } from './kaplan-meier'
import { quantile } from './quantile'
import { tallyOf } from './tally'

describe('worked by hand', () => {
  test('a failure counts its own time, a unit lost half-way half', () => {
    const units = [
      { time: 10, toClose: 40, isFailed: true },
      { time: 20, toClose: 40, isFailed: false },
      { time: 40, toClose: 40, isFailed: false, weight: 2 }
    ]
    expect(completeness(units)).toEqual({ observed: 110, potential: 130, ratio: 110 / 130, units: 4, completeUnits: 3 })
  })

  test('time before a delayed entry counts in neither', () => {
    expect(completeness([{ entry: 10, time: 20, toClose: 30, isFailed: false }])).toMatchObject({
      observed: 10,
      potential: 20,
      ratio: 0.5
    })
  })

  test('nobody, or all on day 0: no ratio', () => {
    expect(completeness([]).ratio).toBeNull()
    expect(completeness([{ time: 0, toClose: 9, isFailed: true }])).toMatchObject({ potential: 0, ratio: null })
  })

  test('a unit watched past the as-of date is refused', () => {
    expect(() => completeness([{ time: 5, toClose: 4, isFailed: false }])).toThrow(RangeError)
    expect(() => completeness([{ entry: 6, time: 5, toClose: 9, isFailed: false }])).toThrow(RangeError)
  })
})

describe('ten units worked by hand and the published heart transplant list (tests/fixtures/survival, 1e-12)', () => {
  test.each(referencesNamed('followup'))('%s', (name) => {
    const { data, results } = reference(name)
    const units = data.start.map((start: number, i: number) => ({
      time: data.last_contact[i] - start,
      toClose: data.closing_day - start,
      isFailed: data.event[i] === 1
    }))
    const ours = completeness(units)
    expectClose(
      [ours.observed, ours.potential, ours.ratio],
      [results.observed_person_time, results.potential_person_time_c, results.completeness_c],
      1e-12,
      name
    )
    expect(ours.units).toBe(results.units)
    const failures = units.filter(({ isFailed }: { isFailed: boolean }) => isFailed).length
    expect([failures, ours.units - ours.completeUnits]).toEqual([results.events, results.silent])
    expect((ours.completeUnits - failures) / (ours.units - failures)).toBeCloseTo(results.fraction_of_nonevents_complete, 12)
    expect(Math.abs(ours.completeUnits / ours.units - results.fraction_of_units_complete)).toBeLessThan(1e-12)
  })

  test.each(referencesNamed('followup'))(
    '%s: follow-up by the reverse Kaplan-Meier (failures and censorings change places)',
    (name) => {
      const { data, results } = reference(name)
      const rows = data.start.map((start: number, i: number) => ({
        time: data.last_contact[i] - start,
        event: 1 - data.event[i]
      }))
      const curve = kaplanMeier(tallyOf(columnsOf(rows)))
      const { probs, value, lower_loglog: lower, upper_loglog: upper } = results.reverse_km_follow_up
      const ours = probs.map((p: number) => quantile(curve, curveLimits(curve), p))
      expect(ours).toEqual(probs.map((_: number, i: number) => ({ estimate: value[i], lower: lower[i], upper: upper[i] })))
    }
  )
})
