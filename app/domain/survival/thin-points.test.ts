import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { thinPoints, type ThinRow } from './thin-points'

type Row = ThinRow & { survival: number; atRisk: number; censored: number }

/** A falling curve with a row on each of the days given by their distances. */
const curveOf = (gaps: readonly number[]): Row[] => {
  let [time, atRisk] = [0, gaps.length * 2]
  return gaps.map((gap, i) => ({
    time: (time += gap),
    survival: 1 - (i + 1) / (gaps.length + 1),
    atRisk: (atRisk -= 2),
    censored: i % 3
  }))
}
const inForce = (rows: readonly Row[], t: number) => rows.findLast((row) => row.time <= t)
const next = (rows: readonly Row[], t: number) => rows.find((row) => row.time >= t)
/** The level at which the line is drawn. */
const drawn = (rows: readonly Row[], t: number) => rows.findLast((row) => (row.since ?? row.time) <= t)?.survival ?? 1

describe('thinPoints', () => {
  it('leaves curves alone that are short enough', () => {
    const curve = curveOf(Array.from({ length: 300 }, () => 3))
    expect(thinPoints([curve, []])).toEqual({ curves: [curve, []], grain: null })
  })

  it('keeps value and risk set at each multiple of the grain and at the times named, and never draws higher than the truth', () => {
    const gaps = fc.array(fc.integer({ min: 1, max: 4 }), { minLength: 301, maxLength: 2_500 })
    fc.assert(
      fc.property(
        gaps,
        fc.constantFrom(1, 0.01, 7.3),
        fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 4 }),
        (all, scale, shares) => {
          const whole = curveOf(all.map((gap) => gap * scale))
          const last = whole.at(-1)!.time
          const named = shares.map((share) => share * last)
          const { curves, grain } = thinPoints([whole], named)
          const thin = curves[0]!
          expect(thin.length).toBeLessThanOrEqual(802 + 2 * named.length)
          for (const row of thin)
            expect(whole.some((r) => r.time === row.time && r.survival === row.survival && r.atRisk === row.atRisk)).toBe(true)
          for (let k = 0; k * grain! <= last; k++) {
            expect(inForce(thin, k * grain!)?.survival).toBe(inForce(whole, k * grain!)?.survival)
            expect(next(thin, k * grain!)?.atRisk).toBe(next(whole, k * grain!)?.atRisk)
          }
          for (const t of named) {
            expect(inForce(thin, t)?.survival).toBe(inForce(whole, t)?.survival)
            expect(next(thin, t)?.atRisk).toBe(next(whole, t)?.atRisk)
          }
          for (const { time, survival } of whole) {
            expect(drawn(thin, time)).toBeLessThanOrEqual(survival)
            expect(drawn(thin, time)).toBeGreaterThanOrEqual(inForce(whole, time + grain!)!.survival)
          }
          const sum = (rows: Row[]) => rows.reduce((total, row) => total + row.censored, 0)
          expect(sum(thin)).toBe(sum(whole))
        }
      ),
      { numRuns: 25 }
    )
  })

  it('cuts curves that are drawn together alike', () => {
    const long = curveOf(Array.from({ length: 1_800 }, () => 1))
    const short = curveOf(Array.from({ length: 300 }, () => 1))
    const { curves, grain } = thinPoints([long, short])
    // 1,800 days in at most 150 stretches
    expect(grain).toBe(20)
    expect(curves[0]!.slice(0, 5).map((row) => row.time)).toEqual([1, 19, 20, 39, 40])
    expect(curves[0]!.slice(0, 5).map((row) => row.since)).toEqual([undefined, 1, undefined, 20, undefined])
    expect(curves[1]).toBe(short)
  })

  it('makes one undetermined stretch of those that it joins', () => {
    const cells = Array.from({ length: 1_000 }, (_, i) => ({
      time: i + 1,
      from: i + 0.5,
      survival: 1 - (i + 1) / 1_001,
      atRisk: 5,
      censored: 0
    }))
    const { curves } = thinPoints<Row>([cells])
    expect(curves[0]!.slice(0, 4)).toMatchObject([
      { time: 1, from: 0.5 },
      { time: 9, from: 1 },
      { time: 10, from: 9.5 },
      { time: 19, from: 10 }
    ])
  })
})
