import { expect, test } from 'vitest'
import { parseSurvivalRequest } from './compute-survival.schema'
import { computeTurnbullGroup } from './compute-turnbull'
import type { Observation } from './observation'
import { spansOf } from './spans'

const groupOf = (observations: Observation[]) =>
  computeTurnbullGroup('A', spansOf(observations), parseSurvivalRequest({ observations }), null)

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

test('limits need units by the thousand at most; beyond, they are null', () => {
  const many = [
    { lower: 0, upper: 5, weight: 150_000 },
    { lower: 5, upper: null, weight: 150_000 }
  ]
  expect(groupOf(many).curve).toMatchObject([{ time: 5, lower: null, upper: null, standardError: null }])
})
