import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { bootstrapTurnbull, type BootstrapLimits } from './bootstrap'
import { bootstrapOneStep } from './bootstrap-one-step'
import type { Observation } from './observation'
import { possiblyAtRisk } from './possibly-at-risk'
import { seededRandom } from './special/seeded-random'
import { spansOf, type Spans } from './spans'
import { turnbull } from './turnbull'

const day = 14

/**
 * Units as the reliability pages have them, on a grid of 14 days: some are watched late, two in five failures are known to their day, the others
 * lie between two check-ins some months apart. Lives are Weibull: `survivalOf`.
 */
function simulated(units: number, random: () => number): Spans {
  const up = (t: number) => Math.ceil(t / day) * day
  const weights = new Map<string, { row: Observation; weight: number }>()
  for (let i = 0; i < units; i++) {
    const entry = random() < 0.7 ? 0 : up(200 * random())
    const left = entry + up(30 + 1200 * random())
    const life = up(scale * (-Math.log(1 - random())) ** (1 / shape))
    const isExact = random() < 0.4
    const gap = day * (5 + Math.floor(10 * random()))
    if (life <= entry) continue
    const lower = isExact ? life : entry + Math.floor((life - entry - 1) / gap) * gap
    const upper = isExact ? life : Math.min(left, lower + gap)
    const row: Observation = life > left ? { entry, time: left, event: 0 } : { entry, lower, upper }
    const key = JSON.stringify(row)
    weights.set(key, { row, weight: (weights.get(key)?.weight ?? 0) + 1 })
  }
  return spansOf([...weights.values()].map(({ row, weight }) => ({ ...row, weight })))
}
const shape = 1.3
const scale = 1800
const survivalOf = (t: number) => Math.exp(-((t / scale) ** shape))

/** The last row at or before a time. */
const rowAt = ({ time }: BootstrapLimits, t: number) => time.findLastIndex((at) => at <= t)

describe('beside resampling and refitting', () => {
  // 1500 resamples tell an error to 1.8 % and a limit to 7 % of the error; five of the errors of both, and some percent for the one step.
  test.each([700, 4000])('%s units: the same errors and limits', (units) => {
    const spans = simulated(units, seededRandom(units))
    const fit = turnbull(spans)
    const whole = bootstrapTurnbull(fit, seededRandom(1), 0.95, units > 1000 ? 400 : 1500)
    const step = bootstrapOneStep(fit, seededRandom(2), 0.95, 1500)
    const error = units > 1000 ? 0.2 : 0.15
    expect(step.time).toEqual(whole.time)
    expect(step.survival).toEqual(whole.survival)
    const atRisk = possiblyAtRisk(spans, whole.time)
    let rows = 0
    whole.survival.forEach((s, r) => {
      // A handful of failures, or of units left, make a curve that no step from an estimate follows so closely.
      if (s > 0.97 || atRisk[r]! < 25) return
      rows++
      const se = whole.standardError[r]!
      expect(Math.abs(step.standardError[r]! / se - 1), `error at ${whole.time[r]}`).toBeLessThan(error)
      expect(Math.abs(step.lower[r]! - whole.lower[r]!), `lower at ${whole.time[r]}`).toBeLessThan(0.65 * se)
      expect(Math.abs(step.upper[r]! - whole.upper[r]!), `upper at ${whole.time[r]}`).toBeLessThan(0.65 * se)
    })
    expect(rows).toBeGreaterThan(20)
  })

  test('inspection counts: the error is the binomial one', () => {
    const rows: Observation[] = [30, 50, 70, 40].map((weight, k) => ({ lower: 10 * k, upper: 10 * k + 10, weight }))
    const fit = turnbull(spansOf([...rows, { lower: 40, upper: null, weight: 310 }]))
    const { survival, standardError, lower, upper } = bootstrapOneStep(fit, seededRandom(3), 0.95, 4000)
    survival.forEach((s, r) => {
      const se = Math.sqrt((s * (1 - s)) / 500)
      // 4000 resamples tell an error to 1.1 %, a limit to 4 % of it.
      expect(Math.abs(standardError[r]! / se - 1)).toBeLessThan(0.07)
      expect(Math.abs(lower[r]! - (s - 1.96 * se))).toBeLessThan(0.3 * se)
      expect(Math.abs(upper[r]! - (s + 1.96 * se))).toBeLessThan(0.3 * se)
    })
  })
})

test('95 % limits hold the truth about 95 times in a hundred (200 samples of 500 units with delayed entry, mixed exact and interval)', () => {
  const random = seededRandom(20)
  const days = [180, 365, 730]
  const held = days.map(() => 0)
  const samples = 200
  for (let sample = 0; sample < samples; sample++) {
    const limits = bootstrapOneStep(turnbull(simulated(500, random)), random, 0.95, 100)
    days.forEach((t, k) => {
      const r = rowAt(limits, t)
      const truth = survivalOf(limits.time[r]!)
      if (limits.lower[r]! <= truth && truth <= limits.upper[r]!) held[k]!++
    })
  }
  // 95 % of 200 has an error of 1.5 points; percentile limits of 100 resamples are a little short.
  for (const count of held) {
    expect(count / samples).toBeGreaterThan(0.89)
    expect(count / samples).toBeLessThan(0.995)
  }
})

describe('units do not cost', () => {
  const grown = (spans: Spans, times: number): Spans => ({ ...spans, weight: spans.weight.map((w) => w * times) })
  const spans = simulated(600, seededRandom(8))

  test('as many random numbers for a hundred million units as for some thousands', () => {
    const used = (times: number) => {
      const random = seededRandom(4)
      let count = 0
      bootstrapOneStep(turnbull(grown(spans, times)), () => (count++, random()), 0.95, 20)
      return count
    }
    const few = used(12)
    expect(few).toBeGreaterThanOrEqual(20 * spans.weight.length)
    // One or two numbers by the table, some two and a half by rejection.
    expect(used(200_000)).toBeLessThan(3 * few)
  })

  test('a hundredfold of every row has a tenth of the error', () => {
    const [few, many] = [10, 1000].map((times) =>
      bootstrapOneStep(turnbull(grown(spans, times)), seededRandom(6), 0.95, 1000)
    ) as [BootstrapLimits, BootstrapLimits]
    many.survival.forEach((s, r) => {
      expect(s).toBeCloseTo(few.survival[r]!, 8)
      // 1000 resamples tell each error to 2.2 %.
      expect(Math.abs((10 * many.standardError[r]!) / few.standardError[r]! - 1)).toBeLessThan(0.2)
    })
  })
})

describe('edges', () => {
  const limitsOf = (rows: Observation[], confidence = 0.95) =>
    bootstrapOneStep(turnbull(spansOf(rows)), seededRandom(9), confidence, 500)

  test('the same seed gives the same limits, another seed others', () => {
    const fit = turnbull(simulated(300, seededRandom(1)))
    const limits = (seed: number) => bootstrapOneStep(fit, seededRandom(seed), 0.95, 50)
    expect(limits(1)).toEqual(limits(1))
    expect(limits(2).lower).not.toEqual(limits(1).lower)
  })

  test('one cell: about the binomial error', () => {
    const { time, survival, standardError } = limitsOf([
      { lower: 0, upper: 9, weight: 300 },
      { lower: 9, upper: null, weight: 700 }
    ])
    expect([...time]).toEqual([9])
    expect(survival[0]).toBeCloseTo(0.7, 10)
    // 500 resamples tell it to 3 %.
    expect(Math.abs(standardError[0]! / Math.sqrt((0.7 * 0.3) / 1000) - 1)).toBeLessThan(0.13)
  })

  test('where S reaches 0 it does in every resample with a failure there', () => {
    const { survival, lower, upper } = limitsOf([
      { lower: 0, upper: 9, weight: 300 },
      { time: 12, event: 1, weight: 400 }
    ])
    expect(survival[1]).toBe(0)
    expect([lower[1], upper[1]]).toEqual([0, 0])
    expect(lower[0]! < survival[0]! && survival[0]! < upper[0]!).toBe(true)
  })

  test('one left at the end: S may have reached 0 as far as a resample knows', () => {
    const { lower, upper, survival } = limitsOf([
      { time: 5, event: 1, weight: 500 },
      { time: 8, event: 0 }
    ])
    expect(lower[0]).toBe(0)
    expect(upper[0]).toBeGreaterThan(survival[0]!)
  })

  test('no failure: no row; a cell without end has none', () => {
    expect(limitsOf([{ time: 4, event: 0, weight: 1000 }]).time).toHaveLength(0)
    expect([
      ...limitsOf([
        { time: 4, event: 1, weight: 50 },
        { time: 9, event: 0, weight: 50 }
      ]).time
    ]).toEqual([4])
  })

  test.each([
    [0, 200],
    [1, 200],
    [0.95, 5]
  ])('confidence %s with %s resamples is refused', (confidence, resamples) => {
    const fit = turnbull(spansOf([{ lower: 0, upper: 4 }]))
    expect(() => bootstrapOneStep(fit, seededRandom(1), confidence, resamples)).toThrow(RangeError)
  })

  test('whatever the data, also where the masses are not unique: limits in order, never rising, between 0 and 1', () => {
    const row = fc
      .record({
        entry: fc.integer({ min: 0, max: 6 }),
        start: fc.integer({ min: 0, max: 12 }),
        length: fc.integer({ min: 0, max: 8 }),
        isSeen: fc.boolean(),
        weight: fc.integer({ min: 1, max: 900 })
      })
      .map(({ entry, start, length, isSeen, weight }): Observation => {
        const lower = entry + start + 1
        return { entry, lower, upper: isSeen ? lower + length : null, weight }
      })
    fc.assert(
      fc.property(fc.array(row, { minLength: 1, maxLength: 25 }), (rows) => {
        const { lower, upper, standardError, time } = bootstrapOneStep(turnbull(spansOf(rows)), seededRandom(1), 0.9, 40)
        for (let r = 0; r < time.length; r++) {
          expect(0 <= lower[r]! && lower[r]! <= upper[r]! && upper[r]! <= 1).toBe(true)
          expect(lower[r]! <= (lower[r - 1] ?? 1) && upper[r]! <= (upper[r - 1] ?? 1)).toBe(true)
          expect(Number.isFinite(standardError[r]!)).toBe(true)
        }
      })
    )
  })
})
