import { clockwise } from './balloons'
import type { Extent } from './layer-view'

export type BoardPlace = { x: number; y: number; side: 'top' | 'bottom' | null }

/** A place with its balloon's number, and where it lies on the picture of its side: mm from the lower left, as seen. */
export type NumberedPlace = { number: number; place: BoardPlace; side: 'top' | 'bottom'; x: number; y: number }

/**
 * Numbers places as balloons are: clockwise from the top left, first those of the top and of both sides, then those of the bottom as seen
 * from below.
 *
 * @param places one for each finding, null where it points nowhere; what lies far off the board gets no number
 * @param extent what the pictures show, in mm as the layers count
 */
export function numberPlaces(places: readonly (BoardPlace | null)[], extent: Extent): (NumberedPlace | null)[] {
  const { minX, minY, maxX, maxY } = extent
  const slack = 2
  const onPicture = places.flatMap((place, at) => {
    if (!place || place.x < minX - slack || place.x > maxX + slack || place.y < minY - slack || place.y > maxY + slack) return []
    const isBelow = place.side === 'bottom'
    return [{ at, place, isBelow, x: isBelow ? maxX - place.x : place.x - minX, y: place.y - minY }]
  })
  const of = (isBelow: boolean) =>
    clockwise(
      onPicture.filter((one) => one.isBelow === isBelow),
      maxY - minY
    )
  const numbered: (NumberedPlace | null)[] = places.map(() => null)
  for (const [i, { at, place, isBelow, x, y }] of [...of(false), ...of(true)].entries())
    numbered[at] = { number: i + 1, place, side: isBelow ? 'bottom' : 'top', x, y }
  return numbered
}

/** "x 12.30, y 4.50 mm, bottom side". */
export const placeInWords = ({ x, y, side }: BoardPlace): string =>
  `x ${x.toFixed(2)}, y ${y.toFixed(2)} mm${side === null ? '' : `, ${side} side`}`
