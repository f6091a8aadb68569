import { expect, test } from 'vitest'
import { chooseEstimator } from './choose-estimator'
import type { Observation } from './observation'

const rows: Observation[] = [
  { time: 5, event: 'board' },
  { entry: 3, lower: 10, upper: 24, event: 'fitting', weight: 2 },
  { lower: 30, upper: 31 },
  { lower: 40, upper: null }
]

test('every failure known to within 14 days: Kaplan-Meier at the upper ends', () => {
  expect(chooseEstimator(rows)).toEqual({
    method: 'kaplan-meier',
    widest: 14,
    observations: [
      { time: 5, event: 'board' },
      { entry: 3, time: 24, event: 'fitting', weight: 2 },
      { time: 31, event: 1 },
      { time: 40, event: 0 }
    ]
  })
})

test('one failure known less well: Turnbull for all', () => {
  const wider = [...rows, { lower: 10, upper: 24.5 }]
  expect(chooseEstimator(wider)).toEqual({ method: 'turnbull', widest: 14.5, observations: wider })
})

test('a long silence without a failure is no interval', () => {
  expect(chooseEstimator([{ lower: 0, upper: null }])).toMatchObject({ method: 'kaplan-meier', widest: 0 })
})
