import { describe, expect, it } from 'vitest'
import { findOutline } from './outline-contours'
import type { Stroke } from './gerber-canvas'

const stroke = (...points: number[]): Stroke => ({ points, aperture: { diameter: 0.1 } as Stroke['aperture'] })
const size = (strokes: Stroke[]) => {
  const { box } = findOutline(strokes, [])
  return box ? [box.maxX - box.minX, box.maxY - box.minY] : null
}
/** The four sides of a rectangle, each as a stroke of its own. */
const sides = (x: number, y: number, w: number, h: number) => [
  stroke(x, y, x + w, y),
  stroke(x + w, y + h, x + w, y),
  stroke(x + w, y + h, x, y + h),
  stroke(x, y, x, y + h)
]

describe('the outline', () => {
  it('closes whatever the order and direction of its strokes', () => {
    const [a, b, c, d] = sides(0, 0, 30, 20)
    for (const order of [
      [a, b, c, d],
      [c, a, d, b],
      [d, c, b, a]
    ])
      expect(size(order as Stroke[])).toEqual([30, 20])
  })

  it.each([0.008, 0.02, 0.09, 0.29])('closes over gaps of %s mm', (gap) => {
    const strokes = [stroke(0, 0, 30 - gap, 0), stroke(30, 0, 30, 20), stroke(30, 20, 0, 20), stroke(0, 20 - gap, 0, gap / 2)]
    expect(findOutline(strokes, []).open).toBeNull()
    expect(size(strokes)![0]).toBeCloseTo(30, 6)
  })

  it('stays open over 0.5 mm, and says how wide the gap is', () => {
    const outline = findOutline([stroke(0, 0, 29.5, 0), stroke(30, 0, 30, 20), stroke(30, 20, 0, 20), stroke(0, 20, 0, 0)], [])
    expect(outline).toMatchObject({ contour: null, box: null })
    expect(outline.open!.gap).toBeCloseTo(0.5, 9)
  })

  it('is open over a single small gap where all other joints are exact', () => {
    const outline = findOutline([...sides(0, 0, 30, 20).slice(0, 3), stroke(0, 0, 0, 19.75)], [])
    expect(outline).toMatchObject({ contour: null, open: { gap: expect.closeTo(0.25, 9) } })
    expect(Math.hypot(outline.open!.x, outline.open!.y - 19.9)).toBeLessThan(0.2)
  })

  it('passes over a step of a coarse grid', () => {
    expect(size([...sides(0, 0, 30, 20).slice(0, 3), stroke(0, 0, 0, 20 - 0.0254)])).toEqual([30, 20])
  })

  it('is open where a single opening inside it is, by a side or by a little', () => {
    const edge = sides(0, 0, 30, 20)
    const side = findOutline([...edge, ...sides(10, 5, 4, 4), ...sides(20, 5, 2, 4).slice(0, 3)], [])
    expect(size(edge)).toEqual([30, 20])
    expect(side.open!.gap).toBeCloseTo(4, 9)
    const little = [...sides(10, 5, 4, 4).slice(0, 3), stroke(10, 5, 10, 8.9)]
    expect(findOutline([...edge, ...little], []).open!.gap).toBeCloseTo(0.1, 9)
  })

  it('is not open where a drawing of a part touches its edge, nor where there are letters', () => {
    const edge = sides(0, 0, 30, 20)
    const part = [stroke(10, 0, 10, 5), stroke(10, 5, 14, 5), stroke(14, 5, 14, 0)]
    expect(findOutline([...edge, ...part], []).open).toBeNull()
    const letters = [3, 6].flatMap((x) => [stroke(x, 8, x, 5), stroke(x, 5, x + 2, 5), stroke(x + 2, 5, x + 2, 8)])
    expect(findOutline([...edge, ...letters], []).open).toBeNull()
  })

  it('is the largest closed contour, beside cut-outs, titles and dimensions', () => {
    const text = [stroke(40, 0, 41, 3), stroke(41, 3, 42, 0), stroke(40.4, 1.2, 41.6, 1.2)]
    const dimension = [stroke(0, -5, 30, -5)]
    const strokes = [...sides(10, 5, 4, 4), ...text, ...sides(0, 0, 30, 20), ...dimension]
    const outline = findOutline(strokes, [])
    expect(size(strokes)).toEqual([30, 20])
    expect(outline.others).toHaveLength(1)
  })

  it('is open when only a hole in it closes', () => {
    expect(findOutline([...sides(10, 5, 4, 4), ...sides(0, 0, 30, 20).slice(0, 3)], []).open).not.toBeNull()
  })

  it('may be a filled area', () => {
    expect(findOutline([], [[0, 0, 30, 0, 30, 20, 0, 20, 0, 0]]).box).toEqual({ minX: 0, minY: 0, maxX: 30, maxY: 20 })
  })

  it('without any stroke is open', () => {
    expect(findOutline([], []).open).toMatchObject({ gap: null })
  })
})
