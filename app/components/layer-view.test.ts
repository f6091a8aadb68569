import { describe, expect, it } from 'vitest'
import {
  fitScale,
  gridLines,
  gridStep,
  lookAt,
  mostZoom,
  paneFor,
  panBy,
  pictureBox,
  rulerLength,
  toPane,
  toPlace,
  wholeBoard,
  within,
  zoomAbout,
  type Sight,
  type View
} from './layer-view'

/* A board of 40 by 20 mm whose lower left corner lies at 100, 50; 436 px wide leaves 400 for it: 10 px a millimetre. */
const extent = { minX: 100, minY: 50, maxX: 140, maxY: 70 }
const above: Sight = { extent, pane: { width: 436, height: 236 }, isFromBelow: false }
const below: Sight = { ...above, isFromBelow: true }
const whole: View = { x: 120, y: 60, zoom: 1 }

describe('the whole board', () => {
  it('fits its pane with a margin of 18 px and lies in the middle', () => {
    expect(fitScale(above)).toBe(10)
    expect(wholeBoard(above)).toEqual(whole)
    expect(toPane({ x: 100, y: 70 }, whole, above)).toEqual({ x: 18, y: 18 })
    expect(toPane({ x: 140, y: 50 }, whole, above)).toEqual({ x: 418, y: 218 })
    expect(pictureBox(whole, above)).toEqual({ x: 18, y: 18, width: 400, height: 200 })
  })

  it('is turned over left to right when seen from below', () => {
    expect(toPane({ x: 100, y: 70 }, whole, below)).toEqual({ x: 418, y: 18 })
    expect(toPane({ x: 140, y: 50 }, whole, below)).toEqual({ x: 18, y: 218 })
    expect(pictureBox(whole, below)).toEqual({ x: 18, y: 18, width: 400, height: 200 })
  })

  it.each([
    ['above', above],
    ['below', below]
  ])('gives every pixel its place and back, seen from %s', (_, sight) => {
    const view = { x: 113.5, y: 58.25, zoom: 3.7 }
    for (const place of [
      { x: 100, y: 50 },
      { x: 131.27, y: 69.9 }
    ]) {
      const back = toPlace(toPane(place, view, sight), view, sight)
      expect(back.x).toBeCloseTo(place.x, 9)
      expect(back.y).toBeCloseTo(place.y, 9)
    }
  })
})

describe('zooming and panning', () => {
  it.each([
    ['above', above],
    ['below', below]
  ])('keeps the place under the pointer, seen from %s', (_, sight) => {
    const about = { x: 117, y: 63 }
    const before = toPane(about, whole, sight)
    const view = zoomAbout(whole, 4, about, sight)
    expect(view.zoom).toBe(4)
    const after = toPane(about, view, sight)
    expect(after.x).toBeCloseTo(before.x, 9)
    expect(after.y).toBeCloseTo(before.y, 9)
  })

  it('goes no further out than the whole board and no further in than 400 px a millimetre', () => {
    expect(mostZoom(above)).toBe(40)
    expect(zoomAbout(whole, 1000, whole, above).zoom).toBe(40)
    expect(zoomAbout({ x: 101, y: 51, zoom: 8 }, 0.001, { x: 101, y: 51 }, above)).toEqual(whole)
  })

  it('moves by pixels, and to the left on the board where it is seen from below', () => {
    const view = { x: 120, y: 60, zoom: 4 }
    expect(panBy(view, 40, 0, above)).toEqual({ x: 121, y: 60, zoom: 4 })
    expect(panBy(view, 40, 0, below)).toEqual({ x: 119, y: 60, zoom: 4 })
    expect(panBy(view, 0, 40, above)).toEqual({ x: 120, y: 59, zoom: 4 })
  })

  it('stops at the edges of the board, and does not move what is seen whole', () => {
    expect(panBy(whole, 500, 500, above)).toEqual(whole)
    // At 40 px a millimetre 5 mm are seen to each side: an edge may stand in the middle.
    expect(within({ x: 0, y: 1000, zoom: 4 }, above)).toEqual({ x: 100, y: 70, zoom: 4 })
    // At 12.5 px a millimetre 16 mm are seen to each side of 20: the board fills the pane 4 mm to each side, and may go 4 mm further.
    expect(within({ x: 0, y: 1000, zoom: 1.25 }, above)).toEqual({ x: 112, y: 64, zoom: 1.25 })
  })

  it('looks closely at a place: 12 mm across, never less closely than before', () => {
    expect(lookAt({ x: 120, y: 60 }, whole, above).zoom).toBeCloseTo(436 / 12 / 10, 9)
    expect(lookAt({ x: 120, y: 60 }, { ...whole, zoom: 20 }, above).zoom).toBe(20)
    expect(lookAt({ x: 0, y: 0 }, whole, above).x).toBeLessThan(110)
  })
})

describe('grid and ruler', () => {
  it.each([
    [10, 1],
    [7.5, 1],
    [7.4, 5],
    [1.4, 10],
    [74, 1],
    [75, 0.1],
    [400, 0.1],
    [0.001, 100]
  ])('at %d px a millimetre a line stands every %d mm', (scale, step) => expect(gridStep(scale).step).toBe(step))

  it('counts its lines from 0, 0 of the layers, every fifth millimetre heavier', () => {
    // 436 px at 10 px a millimetre: from 98.2 to 141.8 mm, and from 48.2 to 71.8 mm.
    const { across, down } = gridLines(whole, above)
    expect(across).toHaveLength(43)
    expect(across[0]).toEqual({ at: 8, isHeavy: false })
    expect(across[1]).toEqual({ at: 18, isHeavy: true })
    expect(down).toHaveLength(23)
    expect(gridLines(whole, below).across[1]).toEqual({ at: 418, isHeavy: true })
  })

  it.each([
    [10, 100, 10],
    [10, 99, 5],
    [10, 51, 5],
    [10, 49, 2],
    [400, 100, 0.2],
    [0.5, 100, 200]
  ])('at %d px a millimetre a ruler of at most %d px is %d mm long', (scale, most, length) =>
    expect(rulerLength(scale, most)).toBe(length)
  )

  it('makes the pane as high as the board asks for within limits', () => {
    expect(paneFor(extent, 436, 100, 500)).toEqual({ width: 436, height: 236 })
    expect(paneFor(extent, 436, 300, 500).height).toBe(300)
    expect(paneFor(extent, 436, 100, 200).height).toBe(200)
  })
})
