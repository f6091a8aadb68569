/**
 * The geometry of the layer viewer. A place is in mm as the layers count: x to the right and y up, seen from the top. A pane is the
 * drawing in px: x to the right and y down. Seen from below, the board is turned over about its upright middle, so that x runs to the left.
 */
export type Extent = { minX: number; minY: number; maxX: number; maxY: number }
export type Pane = { width: number; height: number }
export type Point = { x: number; y: number }

/** The place in the middle of the pane, and how many times larger than the whole board it is shown. */
export type View = { x: number; y: number; zoom: number }

/** What is looked at: the same on every drawing of it. */
export type Sight = { extent: Extent; pane: Pane; isFromBelow: boolean }

/** Left free around the whole board, in px. */
const margin = 18
/** No more px a millimetre than this: a track of 0.1 mm is then as wide as a finger. */
const mostScale = 400
/** How many mm are seen across when the viewer goes to a place. */
const closeUp = 12

const clamp = (value: number, from: number, to: number) => Math.min(Math.max(value, from), to)
const widthOf = ({ minX, maxX }: Extent) => maxX - minX
const heightOf = ({ minY, maxY }: Extent) => maxY - minY

/** The px of a millimetre at which the whole board fits its pane. */
export const fitScale = ({ extent, pane }: Pick<Sight, 'extent' | 'pane'>): number =>
  Math.min((pane.width - 2 * margin) / widthOf(extent), (pane.height - 2 * margin) / heightOf(extent))

export const scaleOf = (view: View, sight: Sight): number => fitScale(sight) * view.zoom

export const mostZoom = (sight: Sight): number => Math.max(1, mostScale / fitScale(sight))

export const wholeBoard = ({ extent }: Pick<Sight, 'extent'>): View => ({
  x: (extent.minX + extent.maxX) / 2,
  y: (extent.minY + extent.maxY) / 2,
  zoom: 1
})

/** @returns px from the pane's upper left corner */
export function toPane({ x, y }: Point, view: View, sight: Sight): Point {
  const scale = scaleOf(view, sight)
  const right = sight.isFromBelow ? view.x - x : x - view.x
  return { x: sight.pane.width / 2 + right * scale, y: sight.pane.height / 2 - (y - view.y) * scale }
}

/** The inverse of `toPane`. @returns mm as the layers count */
export function toPlace({ x, y }: Point, view: View, sight: Sight): Point {
  const scale = scaleOf(view, sight)
  const right = (x - sight.pane.width / 2) / scale
  return { x: sight.isFromBelow ? view.x - right : view.x + right, y: view.y - (y - sight.pane.height / 2) / scale }
}

/**
 * The nearest view whose middle lies on the board and whose zoom is possible. Where all of a direction is seen it stands in the middle;
 * close up an edge may come to the middle, so that what lies just past it is seen too.
 */
export function within(view: View, sight: Sight): View {
  const zoom = clamp(view.zoom, 1, mostZoom(sight))
  const { extent, pane } = sight
  const scale = fitScale(sight) * zoom
  const along = (at: number, from: number, to: number, px: number) => {
    const half = (px / 2 - margin) / scale
    // So far to each side the board fills the pane; from there it may go on until an edge stands in the middle.
    const room = Math.max(0, (to - from) / 2 - half)
    const most = room + Math.min(half, room)
    return clamp(at, (from + to) / 2 - most, (from + to) / 2 + most)
  }
  return {
    x: along(view.x, extent.minX, extent.maxX, pane.width),
    y: along(view.y, extent.minY, extent.maxY, pane.height),
    zoom
  }
}

/** Zooms by a factor while the place stays under the pointer, as far as the board's edges allow. */
export function zoomAbout(view: View, factor: number, about: Point, sight: Sight): View {
  const zoom = clamp(view.zoom * factor, 1, mostZoom(sight))
  const part = view.zoom / zoom
  return within({ x: about.x + (view.x - about.x) * part, y: about.y + (view.y - about.y) * part, zoom }, sight)
}

/** Moves what is seen by px of the pane: a positive `right` brings in what lies further to the right. */
export function panBy(view: View, right: number, down: number, sight: Sight): View {
  const scale = scaleOf(view, sight)
  const x = sight.isFromBelow ? view.x - right / scale : view.x + right / scale
  return within({ ...view, x, y: view.y - down / scale }, sight)
}

/** A close look at a place; never less close than now. */
export function lookAt(place: Point, view: View, sight: Sight): View {
  const wanted = sight.pane.width / closeUp / fitScale(sight)
  return within({ x: place.x, y: place.y, zoom: Math.max(view.zoom, wanted) }, sight)
}

/** The rectangle of the pane that a picture of the whole extent covers. */
export function pictureBox(view: View, sight: Sight): { x: number; y: number; width: number; height: number } {
  const { extent } = sight
  const scale = scaleOf(view, sight)
  const corner = toPane({ x: sight.isFromBelow ? extent.maxX : extent.minX, y: extent.maxY }, view, sight)
  return { ...corner, width: widthOf(extent) * scale, height: heightOf(extent) * scale }
}

/** Distances of grid lines in mm, and how many of them make a heavier one. */
const gridSteps = [
  { step: 0.1, heavy: 10 },
  { step: 1, heavy: 5 },
  { step: 5, heavy: 2 },
  { step: 10, heavy: 5 },
  { step: 50, heavy: 2 },
  { step: 100, heavy: 5 }
] as const

/** The finest grid whose lines stand at least 7.5 px apart. */
export const gridStep = (scale: number): { step: number; heavy: number } =>
  gridSteps.find(({ step }) => step * scale >= 7.5) ?? gridSteps.at(-1)!

/** The grid's lines in the pane, counted from 0, 0 of the layers: their px across and down. */
export function gridLines(view: View, sight: Sight): { across: GridLine[]; down: GridLine[] } {
  const { pane } = sight
  const { step, heavy } = gridStep(scaleOf(view, sight))
  const [a, b] = [toPlace({ x: 0, y: pane.height }, view, sight), toPlace({ x: pane.width, y: 0 }, view, sight)]
  const between = (one: number, other: number, at: (mm: number) => number) => {
    const [first, last] = [Math.ceil(Math.min(one, other) / step), Math.floor(Math.max(one, other) / step)]
    return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => ({
      at: at((first + i) * step),
      isHeavy: (first + i) % heavy === 0
    }))
  }
  return {
    across: between(a.x, b.x, (x) => toPane({ x, y: 0 }, view, sight).x),
    down: between(a.y, b.y, (y) => toPane({ x: 0, y }, view, sight).y)
  }
}
type GridLine = { at: number; isHeavy: boolean }

/** The longest round length, 1, 2 or 5 times a power of ten, in mm, that is no longer than `most` px. */
export function rulerLength(scale: number, most: number): number {
  const longest = most / scale
  const power = 10 ** Math.floor(Math.log10(longest) + 1e-9)
  const length = [5, 2, 1].find((n) => n * power <= longest * (1 + 1e-9))! * power
  return Number(length.toPrecision(1))
}

/** A pane as wide as its column, and as high as the board asks for within limits. */
export function paneFor(extent: Extent, width: number, least: number, most: number): Pane {
  const height = ((width - 2 * margin) / widthOf(extent)) * heightOf(extent) + 2 * margin
  return { width, height: Math.round(clamp(height, least, most)) }
}
