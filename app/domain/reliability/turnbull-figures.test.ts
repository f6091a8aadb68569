import { describe, expect, it } from 'vitest'
import type { Observation } from '../survival/observation'
import { spansOf } from '../survival/spans'
import { turnbullFigures } from './turnbull-figures'

const of = (rows: Observation[], day = 365) => turnbullFigures(spansOf(rows), day)
const running = (time: number, weight: number): Observation => ({ time, event: 0, weight })

describe('turnbullFigures', () => {
  // One failure in (100, 200] of ten units, nine followed to day 400: S falls from 1 to 0.9 somewhere between.
  const one = [{ lower: 100, upper: 200 }, running(400, 9)]

  it('has a row at each end of what is known, and none inside', () => {
    const { curve, support } = of(one)
    expect(support).toEqual([
      { lower: 100, upper: 200, mass: expect.closeTo(0.1, 9) },
      { lower: 400, upper: null, mass: expect.closeTo(0.9, 9) }
    ])
    expect(curve.map(({ time, atRisk, survival }) => [time, atRisk, survival])).toEqual([
      [100, 10, 1],
      [200, 10, expect.closeTo(0.9, 9)],
      [400, 9, expect.closeTo(0.9, 9)]
    ])
  })

  it('has a row on each day of a last word where S is known, so that those at risk can be read', () => {
    // Three that ran on day 150 narrow the place of the failure to (150, 200]; until then only they and the later ones surely run.
    const { curve } = of([...one, running(50, 2), running(150, 3), running(300, 5)])
    expect(curve.map(({ time, atRisk }) => [time, atRisk])).toEqual([
      [50, 20],
      [150, 17],
      [200, 15],
      [300, 14],
      [400, 9]
    ])
  })

  it('bounds S exactly while it is 1, by the units surely running', () => {
    // Clopper and Pearson 1934: 0.05^(1/10)
    expect(of(one).curve[0]).toMatchObject({
      lower: expect.closeTo(Math.pow(0.05, 1 / 10), 12),
      upper: 1,
      bound: 'exact-one-sided'
    })
    expect(of(one, 80).atOneYear).toMatchObject({
      survival: 1,
      atRisk: 10,
      lower: expect.closeTo(Math.pow(0.05, 1 / 10), 12),
      open: null
    })
    // The unit that may have failed since day 40 is not surely running on day 100, although the estimate puts its failure later.
    const { atOneYear } = of([{ lower: 40, upper: 200 }, ...one], 100)
    expect(atOneYear).toMatchObject({ survival: 1, atRisk: 10 })
  })

  it('leaves S open between two days and then gives the lower one, with limits that hold both', () => {
    const { atOneYear } = of(one, 150)
    expect(atOneYear).toMatchObject({ time: 150, atRisk: 10, upper: 1, bound: null, open: { from: 100, to: 200, before: 1 } })
    expect(atOneYear.survival).toBeCloseTo(0.9, 9)
    expect(atOneYear.lower).toBe(of(one, 200).atOneYear.lower)
    expect(of(one, 200).atOneYear).toMatchObject({ open: null })
  })

  it('says nothing inside a stretch at whose end nobody is left, nor of days past the last word', () => {
    const alone = of([{ lower: 10, upper: 800 }])
    expect(alone.atOneYear).toMatchObject({ survival: null, lower: null, upper: null, open: { from: 10, to: 800, before: 1 } })
    expect(of([{ lower: 10, upper: 800 }], 900).atOneYear).toMatchObject({ survival: 0, lower: null, upper: null, open: null })
    expect(of(one, 500).atOneYear).toMatchObject({ survival: null, atRisk: 0, open: null })
  })

  it('falls on a known day at once', () => {
    const { curve, support } = of([{ time: 0, event: 1 }, { lower: 100, upper: 200 }, running(400, 8)])
    expect(support!.slice(0, 2)).toMatchObject([
      { lower: 0, upper: 0 },
      { lower: 100, upper: 200 }
    ])
    expect(curve.map(({ time, survival }) => [time, Number(survival.toFixed(6))])).toEqual([
      [0, 0.9],
      [100, 0.9],
      [200, 0.8],
      [400, 0.8]
    ])
  })

  it('never has limits tighter than those of known days, nor an estimate at a limit', () => {
    // One failure of n: Greenwood of a known day is 1/(n(n - 1)), log-log exp(-exp(ln(-ln S) +/- z/(|ln S|) sqrt(1/(n(n-1)))))
    for (const n of [2, 5, 40, 400]) {
      const { curve } = of([{ lower: 100, upper: 200 }, running(400, n - 1)])
      const s = 1 - 1 / n
      const width = (1.959963984540054 * Math.sqrt(1 / (n * (n - 1)))) / -Math.log(s)
      const at = curve.find(({ time }) => time === 200)!
      expect(at.lower!).toBeLessThanOrEqual(Math.exp(Math.log(s) * Math.exp(width)) + 1e-9)
      expect(at.upper!).toBeGreaterThanOrEqual(Math.exp(Math.log(s) * Math.exp(-width)) - 1e-9)
      // With up to three failures a resample in 40 has none of them: up to there S may have stayed what it was.
      expect(at.upper).toBe(1)
    }
  })

  it('gives the same limits every time, also by single steps for many units', () => {
    const many: Observation[] = [
      { lower: 50, upper: 150, weight: 40 },
      { lower: 120, upper: 300, weight: 30 },
      { entry: 60, lower: 200, upper: 260, weight: 10 },
      running(400, 600)
    ]
    expect(of(many)).toEqual(of(many))
    const { atOneYear } = of(many)
    // 80 of 680: a share known to about 1.2 in 100 where every day is known.
    expect(atOneYear.upper! - atOneYear.lower!).toBeGreaterThan(0.04)
    expect(atOneYear.upper! - atOneYear.lower!).toBeLessThan(0.08)
  })

  it('has the median at the first day on which a half have surely failed', () => {
    const rows = [
      { lower: 0, upper: 30 },
      { lower: 20, upper: 60 },
      { lower: 40, upper: 90 },
      { lower: 40, upper: 90 },
      running(60, 1),
      running(120, 1)
    ]
    // The guide's example: S is 75, 50 and 25 percent after (20, 30], (40, 60] and (60, 90].
    const { median, curve } = of(rows)
    expect(curve.filter(({ time }) => [30, 60, 90].includes(time)).map(({ survival }) => survival.toFixed(4))).toEqual([
      '0.7500',
      '0.5000',
      '0.2500'
    ])
    expect(median.estimate).toBeGreaterThanOrEqual(60)
    expect(median.estimate).toBeLessThanOrEqual(90)
  })
})
