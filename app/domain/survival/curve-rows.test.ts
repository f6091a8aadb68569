import { expect, test } from 'vitest'
import { columnsOf } from './columns'
import { curveLimits } from './confidence-limits'
import { curveRows } from './curve-rows'
import { kaplanMeier } from './kaplan-meier'
import { tallyOf } from './tally'

test('rows carry null, never NaN or Infinity, where nothing exists', () => {
  const curve = kaplanMeier(
    tallyOf(
      columnsOf([
        { time: 3, event: 0 },
        { time: 4, event: 1 }
      ])
    )
  )
  expect(curveRows(curve, curveLimits(curve, { confidence: 0.75, interval: 'log-log' }))).toEqual([
    { time: 3, atRisk: 2, events: 0, censored: 1, survival: 1, standardError: 0, lower: 0.5, upper: 1, bound: 'exact-one-sided' },
    { time: 4, atRisk: 1, events: 1, censored: 0, survival: 0, standardError: null, lower: null, upper: null, bound: null }
  ])
})

test('no observation: no row', () => {
  const curve = kaplanMeier(tallyOf(columnsOf([])))
  expect(curveRows(curve, curveLimits(curve))).toEqual([])
})
