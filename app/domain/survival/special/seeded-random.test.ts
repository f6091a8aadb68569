import { expect, test } from 'vitest'
import { seededRandom } from './seeded-random'

test('equal seeds, equal numbers; numbers fill [0, 1) evenly', () => {
  const numbers = (seed: number) => Array.from({ length: 20_000 }, seededRandom(seed))
  expect(numbers(5)).toEqual(numbers(5))
  expect(numbers(5)).not.toEqual(numbers(6))
  const counts = new Array<number>(10).fill(0)
  for (const u of numbers(5)) {
    expect(u >= 0 && u < 1).toBe(true)
    counts[Math.floor(10 * u)]! += 1
  }
  // Chi-square with 9 degrees of freedom: 27.9 is exceeded once in a thousand seeds; this seed is fixed.
  expect(counts.reduce((sum, c) => sum + (c - 2000) ** 2 / 2000, 0)).toBeLessThan(27.9)
})
