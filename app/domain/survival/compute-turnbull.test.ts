import { describe, expect, test } from 'vitest'
import { computeTurnbullGroup } from './compute-turnbull'
import type { Observation } from './observation'
import { spansOf } from './spans'

const groupOf = (observations: Observation[], isLarge = false) =>
  computeTurnbullGroup('A', spansOf(observations), { confidence: 0.95, seed: 1, tau: null, isLarge }, null)

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

describe('limits by the size of the group', () => {
  const counts = (weight: number): Observation[] => [
    { lower: 0, upper: 5, weight },
    { lower: 5, upper: null, weight }
  ]

  test.each([
    ['refitted', 150, false],
    ['refitted in a large request', 150, true],
    ['refitted', 1_500, false],
    ['by one step in a large request', 1_500, true],
    ['by one step', 500_000_000, false]
  ])('%s: %s units twice, about the binomial error', (_how, weight, isLarge) => {
    const [row] = groupOf(counts(weight), isLarge).curve
    const error = Math.sqrt(0.25 / (2 * weight))
    // 200 resamples tell an error to 5 %, a limit to 19 % of it.
    expect(Math.abs(row!.standardError! / error - 1)).toBeLessThan(0.2)
    expect(Math.abs(row!.lower! - (0.5 - 1.96 * error))).toBeLessThan(0.75 * error)
    expect(Math.abs(row!.upper! - (0.5 + 1.96 * error))).toBeLessThan(0.75 * error)
  })

  test('the two ways differ', () => {
    expect(groupOf(counts(400), true).curve[0]!.lower).not.toBe(groupOf(counts(400), false).curve[0]!.lower)
  })

  test('none with more cells than a step can take', () => {
    const many = Array.from({ length: 1_600 }, (_, i): Observation => ({ time: i + 1, event: 1, weight: 2 }))
    expect(
      groupOf(many).curve.every(({ lower, upper, standardError }) => lower === null && upper === null && standardError === null)
    ).toBe(true)
  })
})
