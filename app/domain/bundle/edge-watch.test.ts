import { describe, expect, it } from 'vitest'
import { BoardArea } from './board-area'
import { EdgeWatch } from './edge-watch'
import type { Path } from './geometry'
import { defineAperture, upright, type Aperture } from './gerber-apertures'
import { defaultLimits } from './limits'
import { findOutline } from './outline-contours'

const round = (diameter: number): Aperture => defineAperture(`D10C,${diameter}`, 1, new Map(), null, defaultLimits).aperture
const contour = (...points: Path) => ({ points, aperture: round(0.1) })
const box = (x: number, y: number, w: number, h: number) => contour(x, y, x + w, y, x + w, y + h, x, y + h, x, y)
const circle = (r: number) =>
  contour(...Array.from({ length: 361 }, (_, i) => [r * Math.cos((i * Math.PI) / 180), r * Math.sin((i * Math.PI) / 180)]).flat())
const watch = (...outline: ReturnType<typeof contour>[]) => new EdgeWatch(BoardArea.of(findOutline(outline, []))!)
const notched = contour(0, 0, 30, 0, 30, 20, 20, 20, 20, 10, 10, 10, 10, 20, 0, 20, 0, 0)

/** Worked by hand: distances are to the nearest point of the edge. */
describe('copper at the edge', () => {
  it('inside, up to the edge and a little over it is none', () => {
    const w = watch(box(0, 0, 30, 20))
    w.flash(1, 10, round(2), upright, true)
    w.stroke([0.5, 0.5, 29.5, 19.5], round(1), true)
    w.region([0, 0, 30, 0, 30, 20, 0, 20, 0, 0], true)
    w.stroke([0.1, 10, 5, 10], round(0.29), true)
    expect(w.spots).toEqual([])
  })

  it('past a straight edge, into a notch and past a round one is told with how far', () => {
    const straight = watch(box(0, 0, 30, 20))
    straight.flash(29.5, 10, round(2), upright, true)
    expect(straight.spots).toMatchObject([{ by: expect.closeTo(0.5, 6), side: 'right' }])
    const notch = watch(notched)
    notch.stroke([5, 15, 25, 15], round(0.2), true)
    expect(Math.max(...notch.spots.map((spot) => spot.by))).toBeCloseTo(5.1, 1)
    const disc = watch(circle(10))
    disc.flash(7, 7, round(1), upright, true)
    expect(disc.spots).toMatchObject([{ by: expect.closeTo(Math.hypot(7, 7) + 0.5 - 10, 2) }])
    expect(disc.spots[0]!.side).toBe('edge')
  })

  it('in a cut-out is told, whether it crosses the cut-out or covers it', () => {
    const crossing = watch(box(0, 0, 30, 20), box(10, 5, 4, 4))
    crossing.stroke([5, 7, 20, 7], round(0.5), true)
    expect(crossing.spots).toMatchObject([{ side: 'cut-out', by: expect.closeTo(2, 6) }])
    const pour = watch(box(0, 0, 30, 20), box(10, 5, 4, 4))
    pour.region([2, 2, 28, 2, 28, 18, 2, 18, 2, 2], true)
    expect(pour.spots).toMatchObject([{ side: 'cut-out', by: expect.closeTo(2, 1) }])
  })

  it('around a slot that one pad covers marks it as plated', () => {
    const w = watch(box(0, 0, 30, 20), box(10, 5, 1, 2))
    w.flash(10.5, 6, round(4), upright, true)
    expect([...w.covered]).toEqual([1])
  })

  it('that is taken away again does not count', () => {
    const w = watch(box(0, 0, 30, 20))
    w.flash(31, 10, round(1), upright, true)
    expect(w.spots).toHaveLength(1)
    w.region([30, 0, 40, 0, 40, 20, 30, 20, 30, 0], false)
    expect(w.spots).toEqual([])
  })

  it('is told without looking along the whole of strokes that run for metres', () => {
    const area = BoardArea.of(findOutline([box(0, 0, 30, 20)], []))!
    const w = new EdgeWatch(area)
    for (let i = 0; i < 200; i++) {
      const [x, y] = [4900 * Math.cos(i), 4900 * Math.sin(i)]
      w.stroke([-x, -y, x, y], round(0.1), true)
    }
    expect(Math.max(...w.spots.map((spot) => spot.by))).toBeGreaterThan(4800)
    expect(area.work).toBeLessThan(200 * 20_000)
  })

  it('does not mean the thin line of the edge itself', () => {
    const w = watch(box(0, 0, 30, 20))
    w.stroke([0, 0, 30, 0], round(0.2), true)
    expect(w.spots).toEqual([])
    w.stroke([5, 0, 25, 0], round(1), true)
    expect(w.spots).toMatchObject([{ by: expect.closeTo(0.5, 6), side: 'lower' }])
  })
})
