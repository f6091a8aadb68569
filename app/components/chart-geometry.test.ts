import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  atRiskAt,
  axisFloor,
  censorTicks,
  linear,
  percentTicks,
  pointAt,
  roundTicks,
  spreadLabels,
  stepArea,
  stepPath,
  timeAxis,
  unitFor,
  visibleRuns,
  type SurvivalPoint
} from './chart-geometry'

const point = (time: number, survival: number, atRisk: number, censored = 0): SurvivalPoint => ({
  time,
  survival,
  lower: survival - 0.05,
  upper: Math.min(1, survival + 0.05),
  atRisk,
  censored
})

describe('visibleRuns', () => {
  it('is full from 10 at risk, faint from 5, and gone below', () => {
    const runs = visibleRuns([point(10, 0.9, 11), point(20, 0.8, 10), point(30, 0.7, 9), point(40, 0.6, 5), point(50, 0.5, 4)])
    expect(runs.map((r) => [r.weight, r.steps.map((s) => s.time)])).toEqual([
      ['full', [0, 10, 20]],
      ['faint', [20, 30, 40]]
    ])
  })
  it('begins each run at the level where the last one ended', () => {
    const [, faint] = visibleRuns([point(10, 0.9, 10), point(20, 0.8, 6)])
    expect(faint!.steps.map((s) => s.survival)).toEqual([0.9, 0.8])
  })
  it('starts below a fall on day 0', () => {
    expect(visibleRuns([point(0, 0.95, 20), point(10, 0.9, 19)])[0]!.steps[0]).toMatchObject({ time: 0, survival: 0.95 })
  })
  it('comes back when late entries fill the risk set again', () => {
    expect(
      visibleRuns([point(5, 1, 4), point(10, 0.9, 12), point(20, 0.8, 4), point(30, 0.7, 10)]).map((r) => r.steps[0]!.time)
    ).toEqual([5, 20])
  })
  it('draws nothing of a curve that never has five at risk', () => {
    expect(visibleRuns([point(1, 0.75, 4), point(2, 0.5, 3)])).toEqual([])
  })
})

describe('reading a curve', () => {
  const points = [point(10, 0.9, 20), point(30, 0.8, 12)]
  it('holds the level of the last point, 1 before the first, and says nothing after the last', () => {
    expect([pointAt(points, 9)?.survival, pointAt(points, 10)?.survival, pointAt(points, 29)?.survival]).toEqual([1, 0.9, 0.9])
    expect(pointAt(points, 31)).toBeNull()
    expect(pointAt([], 1)).toBeNull()
  })
  it('counts at risk by the next point', () => {
    expect([0, 10, 11, 30, 31].map((t) => atRiskAt(points, t))).toEqual([20, 20, 12, 12, 0])
  })
})

describe('paths', () => {
  it('steps level and then down', () => {
    expect(stepPath([[0, 10], [20, 30], [40.04, 50]])).toBe('M0 10H20V30H40V50') // prettier-ignore
    expect(stepPath([])).toBe('')
    expect(stepPath([[0, 10], [20, 10], [30, 10.04], [40, 30], [50, 30]]), 'a level that stays is one stroke').toBe('M0 10H40V30H50V30') // prettier-ignore
  })
  it('closes a band between two step lines, back along the lower levels', () => {
    expect(stepArea([[0, 1, 5], [10, 2, 8], [20, 3, 9]])).toBe('M0 1H10V2H20V3V8H10V5H0Z') // prettier-ignore
    expect(stepArea([[0, 1, 5]])).toBe('')
    expect(stepArea([[0, 1, 5], [10, 1, 5], [15, 1, 8], [20, 3, 8]])).toBe('M0 1H20V3V8H15V5H0Z') // prettier-ignore
  })
  it('sets one tick a place on a grid of four pixels, none where the curve is gone', () => {
    const scale = linear(0, 100, 0, 100)
    const ticks = censorTicks(
      [point(7, 0.9, 20, 1), point(9, 0.9, 19, 2), point(30, 0.8, 18), point(40, 0.7, 4, 1)],
      scale,
      (s) => s * 100
    )
    expect(ticks).toEqual([{ x: 8, y: 90 }])
  })
})

describe('spreadLabels', () => {
  it('leaves labels that do not meet', () => expect(spreadLabels([10, 60, 35], 20, 0, 100)).toEqual([10, 60, 35]))
  it('moves a pair apart by the same amount', () => expect(spreadLabels([50, 50], 20, 0, 100)).toEqual([40, 60]))
  it('keeps within the drawing', () => expect(spreadLabels([98, 99], 20, 0, 100)).toEqual([80, 100]))
  it('keeps order and gap, and stays inside when there is room', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 300 }), { minLength: 1, maxLength: 6 }), (wanted) => {
        const places = spreadLabels(wanted, 22, 0, 300)
        const sorted = [...places].sort((a, b) => a - b)
        sorted.slice(1).forEach((at, i) => expect(at - sorted[i]!).toBeGreaterThanOrEqual(22 - 1e-9))
        expect(sorted[0]!).toBeGreaterThanOrEqual(-1e-9)
        expect(sorted.at(-1)!).toBeLessThanOrEqual(300 + 1e-9)
        wanted.forEach((a, i) => wanted.forEach((b, j) => a < b && expect(places[i]!).toBeLessThan(places[j]!)))
      })
    )
  })
})

describe('axes', () => {
  it.each([
    [0.8, 70],
    [0.79, 70],
    [0.85, 80],
    [0.849, 70],
    [0.999, 90],
    [0.36, 30],
    [0.34, 0],
    [0, 0]
  ])('lowest %d starts at %d', (lowest, floor) => expect(axisFloor(lowest)).toBe(floor))
  it('ends at 100 and names its floor', () => {
    expect(percentTicks(70)).toEqual([70, 75, 80, 85, 90, 95, 100])
    expect(percentTicks(70, true)).toEqual([70, 80, 90, 100])
    expect(percentTicks(0)).toEqual([0, 20, 40, 60, 80, 100])
    expect(percentTicks(30)).toEqual([30, 40, 60, 80, 100])
  })
  it('counts in whole units with at most six steps', () => {
    expect(timeAxis(1400, 'year').ticks.map((t) => t.label)).toEqual(['0', '1', '2', '3', '4'])
    expect(timeAxis(450, 'month').ticks.map((t) => t.label)).toEqual(['0', '3', '6', '9', '12', '15'])
    expect(timeAxis(30, 'day').ticks.at(-1)).toEqual({ label: '30', days: 30 })
    expect(timeAxis(1, 'year').days).toBeCloseTo(365.25)
  })
  it('picks the unit by the length of follow-up', () => expect([30, 200, 900].map(unitFor)).toEqual(['day', 'month', 'year']))
  it('takes round steps', () => {
    expect(roundTicks(10.1, 3)).toEqual([0, 5, 10, 15])
    expect(roundTicks(0.7, 3)).toEqual([0, 0.5, 1])
  })
})
