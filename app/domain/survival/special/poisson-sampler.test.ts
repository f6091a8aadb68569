import { describe, expect, test } from 'vitest'
import { chiSquareQuantile } from './chi-square'
import { incompleteGamma, poissonFactor } from './gamma'
import { poissonSampler } from './poisson-sampler'
import { seededRandom } from './seeded-random'

const n = 40_000
const draws = (mean: number, seed: number) => {
  const next = poissonSampler(mean, seededRandom(seed))
  return Array.from({ length: n }, () => next())
}

// Both methods on both sides of where they meet; P(X <= k) = Q(k + 1, mean), DLMF 8.4.10.
describe.each([0.05, 1, 3, 30, 400, 500, 501])('mean %s', (mean) => {
  test('the counts are as the distribution has them (chi-square of the counts, 1 in 10,000)', () => {
    const counts = new Map<number, number>()
    for (const k of draws(mean, 11)) counts.set(k, (counts.get(k) ?? 0) + 1)
    // Numbers of which fewer than 20 are expected are taken together, on either side.
    const isCommon = (k: number) => n * (k === 0 ? Math.exp(-mean) : poissonFactor(k, mean)) >= 20
    let low = Math.floor(mean)
    let high = low
    while (low > 0 && isCommon(low - 1)) low--
    while (isCommon(high + 1)) high++
    const below = low > 0 ? incompleteGamma(low, mean).upper : 0
    const groups = [{ from: 0, to: low - 1, p: below }]
    for (let k = low; k <= high; k++) groups.push({ from: k, to: k, p: k === 0 ? Math.exp(-mean) : poissonFactor(k, mean) })
    groups.push({ from: high + 1, to: Infinity, p: incompleteGamma(high + 1, mean).lower })
    let chiSquare = 0
    for (const { from, to, p } of groups) {
      let observed = 0
      for (const [k, count] of counts) if (k >= from && k <= to) observed += count
      if (p > 0) chiSquare += (observed - n * p) ** 2 / (n * p)
      else expect(observed).toBe(0)
    }
    expect(chiSquare).toBeLessThan(chiSquareQuantile(0.9999, groups.length - 1))
  })
})

test.each([1e4, 3e6, 1e9])('mean %s: mean and variance within five of their errors', (mean) => {
  const sample = draws(mean, 5)
  const average = sample.reduce((sum, k) => sum + k, 0) / n
  const variance = sample.reduce((sum, k) => sum + (k - average) ** 2, 0) / (n - 1)
  expect(Math.abs(average - mean)).toBeLessThan(5 * Math.sqrt(mean / n))
  expect(Math.abs(variance / mean - 1)).toBeLessThan(5 * Math.sqrt(2 / n))
})

test('a mean of 0 gives 0; the same seed gives the same numbers; no mean below 0 or without end', () => {
  expect(new Set(draws(0, 1))).toEqual(new Set([0]))
  expect(draws(25, 3)).toEqual(draws(25, 3))
  for (const mean of [-1, NaN, Infinity]) expect(() => poissonSampler(mean, Math.random)).toThrow(RangeError)
})
