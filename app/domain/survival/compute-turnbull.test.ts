import { describe, expect, test } from 'vitest'
import { computeTurnbullGroup, resamplingLimits } from './compute-turnbull'
import type { Observation } from './observation'
import { spansOf } from './spans'

const groupOf = (observations: Observation[], units = 100, groups = 1) => {
  const options = { confidence: 0.95, seed: 1, tau: null, ...resamplingLimits(units, groups) }
  return computeTurnbullGroup('A', spansOf(observations), options, null)
}

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

test('where S is 0 there are no limits and no error, nor an upper limit of the median that only they could give', () => {
  const one = groupOf([{ lower: 2, upper: 4 }])
  expect(one.curve).toMatchObject([{ time: 4, survival: 0, standardError: null, lower: null, upper: null }])
  expect(one.median).toEqual({ estimate: 4, lower: null, upper: null })
  const { curve, median } = groupOf([
    { lower: 0, upper: 3, weight: 5 },
    { lower: 3, upper: 9, weight: 20 }
  ])
  expect(curve.map(({ lower, upper }) => [lower !== null, upper !== null])).toEqual([
    [true, true],
    [false, false]
  ])
  expect(median).toEqual({ estimate: 9, lower: null, upper: null })
})

describe('limits by the size of the group', () => {
  const counts = (weight: number): Observation[] => [
    { lower: 0, upper: 5, weight },
    { lower: 5, upper: null, weight }
  ]

  test.each([
    ['refitted', 75, 150],
    ['refitted in a large request', 75, 100_000],
    ['refitted', 500, 3_000],
    ['by one step in a large request', 500, 3_001],
    ['by one step', 500_000_000, 1_000_000_000]
  ])('%s: %s units twice, about the binomial error', (_how, weight, units) => {
    const [row] = groupOf(counts(weight), units).curve
    const error = Math.sqrt(0.25 / (2 * weight))
    // 200 resamples tell an error to 5 %, a limit to 19 % of it.
    expect(Math.abs(row!.standardError! / error - 1)).toBeLessThan(0.2)
    expect(Math.abs(row!.lower! - (0.5 - 1.96 * error))).toBeLessThan(0.75 * error)
    expect(Math.abs(row!.upper! - (0.5 + 1.96 * error))).toBeLessThan(0.75 * error)
  })

  test('the two ways differ', () => {
    const lower = (units: number) => groupOf(counts(400), units).curve[0]!.lower
    expect(lower(800)).toBe(lower(3_000))
    expect(lower(3_001)).not.toBe(lower(3_000))
  })

  test('none with more cells than a step can take, which are fewer the more groups there are', () => {
    const many = Array.from({ length: 400 }, (_, i): Observation => ({ time: i + 1, event: i < 399 ? 1 : 0, weight: 3 }))
    const hasLimits = (groups: number) =>
      groupOf(many, 5_000, groups).curve.map(({ lower, upper }) => lower !== null && upper !== null)
    expect(new Set(hasLimits(4))).toEqual(new Set([true]))
    expect(new Set(hasLimits(64))).toEqual(new Set([false]))
  })
})
