import { describe, expect, test } from 'vitest'
import { reference } from '../../../tests/support/survival-reference'
import { bootstrapTurnbull } from './bootstrap'
import type { Observation } from './observation'
import { seededRandom } from './special/seeded-random'
import { spansOf } from './spans'
import { turnbull } from './turnbull'

const cracks = () => {
  const { data } = reference('interval-cracks167')
  return turnbull(
    spansOf(data.left.map((lower: number, i: number): Observation => ({ lower, upper: data.right[i], weight: data.count[i] })))
  )
}

test('the same seed gives the same limits, another seed others', () => {
  const fit = cracks()
  const limits = (seed: number) => bootstrapTurnbull(fit, seededRandom(seed), 0.95, 50)
  expect(limits(1)).toEqual(limits(1))
  expect(limits(2).lower).not.toEqual(limits(1).lower)
})

test('inspection counts resample as a binomial share: limits and errors near those of the binomial', () => {
  const fit = cracks()
  const { time, survival, lower, upper, standardError } = bootstrapTurnbull(fit, seededRandom(7), 0.95, 2000)
  expect([...time]).toEqual(reference('interval-cracks167').data.right.filter((right: number | null) => right !== null))
  survival.forEach((s, k) => {
    const error = Math.sqrt((s * (1 - s)) / 167)
    // 2000 resamples tell an error to about 1.6 %, a limit to some 5 % of it.
    expect(Math.abs(standardError[k]! / error - 1)).toBeLessThan(0.08)
    expect(Math.abs(lower[k]! - (s - 1.96 * error))).toBeLessThan(0.35 * error)
    expect(Math.abs(upper[k]! - (s + 1.96 * error))).toBeLessThan(0.35 * error)
  })
})

describe('edges', () => {
  test('nothing but right-censored units: no row', () => {
    const fit = turnbull(spansOf([{ time: 4, event: 0 }]))
    expect(bootstrapTurnbull(fit, seededRandom(1)).time).toHaveLength(0)
  })

  test('one failure: the limits are the estimate', () => {
    const fit = turnbull(spansOf([{ lower: 2, upper: 4 }]))
    expect(bootstrapTurnbull(fit, seededRandom(1))).toMatchObject({ lower: Float64Array.of(0), upper: Float64Array.of(0) })
  })

  test('delayed entry resamples without a hitch', () => {
    const rows = Array.from({ length: 40 }, (_, i): Observation => ({
      entry: i % 7,
      lower: (i % 7) + (i % 5),
      upper: i % 4 === 0 ? null : (i % 7) + (i % 5) + 6
    })).map((row) =>
      row.entry === ('lower' in row ? row.lower : 0) && 'upper' in row && row.upper === null
        ? { ...row, lower: row.lower + 1 }
        : row
    )
    const { lower, upper, survival } = bootstrapTurnbull(turnbull(spansOf(rows)), seededRandom(3), 0.9, 100)
    survival.forEach((_, k) => expect(lower[k]! <= upper[k]! && lower[k]! >= 0 && upper[k]! <= 1).toBe(true))
  })

  test.each([
    [0, 200],
    [1, 200],
    [0.95, 5]
  ])('confidence %s with %s resamples is refused', (confidence, resamples) => {
    expect(() => bootstrapTurnbull(cracks(), seededRandom(1), confidence, resamples)).toThrow(RangeError)
  })
})
