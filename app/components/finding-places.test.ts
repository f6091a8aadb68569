import { describe, expect, it } from 'vitest'
import { numberPlaces, placeInWords, type BoardPlace } from './finding-places'

/* A board of 40 by 20 mm whose lower left corner lies at 100, 50. */
const extent = { minX: 100, minY: 50, maxX: 140, maxY: 70 }

describe('the numbers of places', () => {
  it('run clockwise from the top left on the top, then on the bottom as seen from below', () => {
    const places: (BoardPlace | null)[] = [
      { x: 105, y: 52, side: null },
      null,
      { x: 130, y: 68, side: 'top' },
      { x: 103, y: 66, side: 'bottom' },
      { x: 138, y: 66, side: 'bottom' },
      { x: 110, y: 69, side: null },
      { x: 135, y: 55, side: null }
    ]
    expect(numberPlaces(places, extent).map((one) => one?.number ?? null)).toEqual([4, null, 2, 6, 5, 1, 3])
  })

  it('lie on the picture of their side, the bottom mirrored', () => {
    const [top, bottom] = numberPlaces(
      [
        { x: 110, y: 55, side: null },
        { x: 110, y: 55, side: 'bottom' }
      ],
      extent
    )
    expect(top).toMatchObject({ side: 'top', x: 10, y: 5 })
    expect(bottom).toMatchObject({ side: 'bottom', x: 30, y: 5 })
  })

  it('are not given to what lies off the picture', () =>
    expect(numberPlaces([{ x: 150, y: 60, side: null }], extent)).toEqual([null]))

  it('are said in the millimetres of the layers', () => {
    expect(placeInWords({ x: 110.5, y: -3, side: 'bottom' })).toBe('x 110.50, y -3.00 mm, bottom side')
    expect(placeInWords({ x: 1, y: 2, side: null })).toBe('x 1.00, y 2.00 mm')
  })
})
