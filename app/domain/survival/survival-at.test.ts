import { describe, expect, test } from 'vitest'
import { kaplanMeierCases } from '../../../tests/support/survival-cases'
import { expectClose } from '../../../tests/support/survival-reference'
import { columnsOf } from './columns'
import { kaplanMeier } from './kaplan-meier'
import type { TimedObservation } from './observation'
import { survivalAt, type SurvivalAt } from './survival-at'
import { tallyOf } from './tally'

const curveOf = (rows: TimedObservation[]) => kaplanMeier(tallyOf(columnsOf(rows)))
const half = { confidence: 0.75, interval: 'log-log' as const }

describe('worked by hand', () => {
  const curve = curveOf([
    { time: 10, event: 1 },
    { time: 20, event: 0 },
    { entry: 15, time: 40, event: 0 }
  ])

  test.each([
    ['at the start', 0, 1, 2],
    ['before the first row: the exact bound', 5, 1, 2],
    ['at a failure', 10, 0.5, 2],
    ['between rows', 12, 0.5, 1],
    ['at an entry, who is not yet at risk', 15, 0.5, 1],
    ['after it', 16, 0.5, 2],
    ['at the last row', 40, 0.5, 1]
  ])('%s', (_what, time, survival, atRisk) => {
    expect(survivalAt(curve, time)).toMatchObject({ time, survival, atRisk })
  })

  test('before any failure the lower limit is the exact bound of those at risk', () => {
    expect(survivalAt(curve, 5, half)).toEqual({
      time: 5,
      survival: 1,
      standardError: 0,
      atRisk: 2,
      lower: 0.5,
      upper: 1,
      bound: 'exact-one-sided'
    })
  })

  test('past the last row nothing is known, unless all had failed', () => {
    expect(survivalAt(curve, 41)).toEqual({
      time: 41,
      survival: null,
      standardError: null,
      atRisk: 0,
      lower: null,
      upper: null,
      bound: null
    })
    expect(survivalAt(curveOf([{ time: 3, event: 1 }]), 9)).toMatchObject({ survival: 0, atRisk: 0, lower: null })
    expect(survivalAt(curveOf([]), 1)).toMatchObject({ survival: null, atRisk: 0 })
  })
})

describe("R's summary(survfit, times) (tests/fixtures/survival, 1e-12, limits 1e-9)", () => {
  const cases = kaplanMeierCases().filter(({ expected }) => expected.at_times)
  test('there are some', () => expect(cases.length).toBeGreaterThan(5))
  test.each(cases)('$name', ({ rows, expected: { at_times: want } }) => {
    const curve = curveOf(rows)
    const at: SurvivalAt[] = want.time.map((time: number) => survivalAt(curve, time))
    const survival = at.map((one) => one.survival)
    expectClose(survival, want.surv, 1e-12, 'survival')
    // While S is 1 R has [1, 1] or nothing; the exact bound stands there.
    const withoutBound = (values: (number | null)[]) => values.filter((_, i) => survival[i] !== 1)
    expectClose(withoutBound(at.map((one) => one.lower)), withoutBound(want.lower_loglog), 1e-9, 'lower')
    expectClose(withoutBound(at.map((one) => one.upper)), withoutBound(want.upper_loglog), 1e-9, 'upper')
    // R prints the risk set of the next row, which with delayed entry already holds units that enter in between; ours holds entry < t <= exit.
    const nextRow = want.time.map((time: number) => curve.atRisk[curve.time.findIndex((t) => t >= time)])
    expectClose(nextRow, want.n_risk, 0, 'at risk in the next row')
    const counted = want.time.map((time: number) => rows.filter((row) => row.entry! < time && time <= row.time).length)
    expectClose(
      at.map((one) => one.atRisk),
      counted,
      0,
      'at risk'
    )
  })
})
