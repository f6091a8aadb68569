import { expect, test } from 'vitest'
import { computeTurnbullGroup } from './compute-turnbull'
import type { Observation } from './observation'
import { spansOf } from './spans'

const groupOf = (observations: Observation[], resamples = 40) =>
  computeTurnbullGroup('A', spansOf(observations), { confidence: 0.95, seed: 1, tau: null, resamples }, null)

test('units that may still be at risk: entered before, not known to have failed or left before', () => {
  const { curve } = groupOf([
    { lower: 0, upper: 5 },
    { entry: 3, lower: 4, upper: 9 },
    { entry: 5, lower: 6, upper: 9 },
    { lower: 7, upper: null }
  ])
  // At 5: the first, the second and the last; at 9: the second and third, the last was seen working at 7 only.
  expect(curve.map(({ time, atRisk }) => [time, atRisk])).toEqual([
    [5, 3],
    [9, 2]
  ])
})

test('nothing but right-censored units: no row, one endless cell', () => {
  expect(groupOf([{ lower: 4, upper: null }])).toMatchObject({
    n: 1,
    events: 0,
    curve: [],
    median: { estimate: null, lower: null, upper: null },
    support: [{ lower: 4, upper: null, mass: 1 }]
  })
})

test('without resamples there are no limits', () => {
  const rows = [
    { lower: 0, upper: 5 },
    { lower: 5, upper: null }
  ]
  expect(groupOf(rows, 0).curve).toMatchObject([{ time: 5, lower: null, upper: null, standardError: null }])
  expect(groupOf(rows).curve[0]!.standardError).toBeGreaterThan(0)
})
