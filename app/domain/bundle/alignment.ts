import type { Flashes } from './gerber-canvas'
import type { Hole } from './drill-file.types'

/** Slack in mm when asking whether a hole falls on a pad: rounding of the drill file's coordinates. */
const slack = 0.05
const cellSize = 2

/** Flashes sorted into cells of a grid, to ask quickly which cover a place. Flashes larger than `cellSize` * 5 are kept apart. */
export type FlashIndex = { cells: Map<number, number[]>; large: number[]; flashes: Flashes; count: number }

const key = (cx: number, cy: number) => (cx + 32_768) * 65_536 + (cy + 32_768)

export function indexFlashes(flashes: Flashes): FlashIndex {
  const cells = new Map<number, number[]>()
  const large: number[] = []
  for (let i = 0; i < flashes.x.length; i++) {
    const { x, y, halfX, halfY } = { x: flashes.x[i]!, y: flashes.y[i]!, halfX: flashes.halfX[i]!, halfY: flashes.halfY[i]! }
    if (Math.max(halfX, halfY) > cellSize * 5) {
      large.push(i)
      continue
    }
    for (let cx = Math.floor((x - halfX - slack) / cellSize); cx <= Math.floor((x + halfX + slack) / cellSize); cx++) {
      for (let cy = Math.floor((y - halfY - slack) / cellSize); cy <= Math.floor((y + halfY + slack) / cellSize); cy++) {
        const cell = cells.get(key(cx, cy))
        if (cell) cell.push(i)
        else cells.set(key(cx, cy), [i])
      }
    }
  }
  return { cells, large, flashes, count: flashes.x.length }
}

/** The flash that a place falls on; undefined where there is none. */
function flashUnder(index: FlashIndex, x: number, y: number): number | undefined {
  const { flashes } = index
  const covers = (i: number) =>
    Math.abs(x - flashes.x[i]!) <= flashes.halfX[i]! + slack && Math.abs(y - flashes.y[i]!) <= flashes.halfY[i]! + slack
  return index.cells.get(key(Math.floor(x / cellSize), Math.floor(y / cellSize)))?.find(covers) ?? index.large.find(covers)
}

/** Whether a place falls on a flash. */
export const isOnFlash = (index: FlashIndex, x: number, y: number): boolean => flashUnder(index, x, y) !== undefined

/** The middle of a hole or slot. */
export const holeCentre = (hole: Hole): [number, number] => [
  hole.toX === null ? hole.x : (hole.x + hole.toX) / 2,
  hole.toY === null ? hole.y : (hole.y + hole.toY) / 2
]

/** Whether a hole is plated, by itself or by its file's function. */
export const isPlated = (hole: Hole, fn: string) => (hole.plating === null ? fn !== 'drill-nonplated' : hole.plating === 'plated')

/** So many tell as well as all: a share of 4,000 is known to within 2 %. Without a bound, dense nonsense would cost flashes times openings. */
const enough = 4000

/** At most `enough` of a list, evenly over it. */
function evenly<T>(list: readonly T[]): readonly T[] {
  if (list.length <= enough) return list
  return Array.from({ length: enough }, (_, i) => list[Math.floor((i * list.length) / enough)]!)
}

/** The share (0 to 1) of holes whose middle, scaled about the origin, falls on a flash. 1 where there are no holes. */
export function shareOnFlashes(index: FlashIndex, all: readonly Hole[], scale = 1): number {
  const holes = evenly(all)
  if (holes.length === 0) return 1
  let hits = 0
  for (const hole of holes) {
    const [x, y] = holeCentre(hole)
    if (isOnFlash(index, x * scale, y * scale)) hits++
  }
  return hits / holes.length
}

/** On how many different flashes the holes fall that fall on any, as a share of these (0 to 1). */
export function spreadOnFlashes(index: FlashIndex, holes: readonly Hole[], scale = 1): number {
  const hit = new Set<number>()
  let hits = 0
  for (const hole of holes) {
    const [x, y] = holeCentre(hole)
    const flash = flashUnder(index, x * scale, y * scale)
    if (flash === undefined) continue
    hits++
    hit.add(flash)
  }
  return hits === 0 ? 0 : hit.size / hits
}

/** Whether a flash's middle lies at a place, to within `by` mm. */
export function isCentred(index: FlashIndex, x: number, y: number, by = 0.15): boolean {
  const { flashes } = index
  const isAt = (i: number) => Math.abs(x - flashes.x[i]!) <= by && Math.abs(y - flashes.y[i]!) <= by
  return (index.cells.get(key(Math.floor(x / cellSize), Math.floor(y / cellSize))) ?? []).some(isAt) || index.large.some(isAt)
}

/**
 * Which of a mask's or stencil's openings lie over nothing of the board: neither over the middle of a pad, nor over a part of a much larger pad (as
 * the panes of a heat pad's stencil do), nor over the middle of a drilled hole. Of very many, an even choice is looked at.
 *
 * @returns the share (0 to 1) that lies over something, and the index of the first that does not
 */
export function openingsOver(pads: FlashIndex, holes: FlashIndex, openings: Flashes): { share: number; firstOff: number | null } {
  const looked = evenly([...openings.x.keys()])
  const off = looked.filter((i) => {
    const [x, y] = [openings.x[i]!, openings.y[i]!]
    return !(isCentred(pads, x, y) || isCentred(holes, x, y) || isOnLarger(pads, x, y, openings.halfX[i]!, openings.halfY[i]!))
  })
  return { share: looked.length === 0 ? 1 : 1 - off.length / looked.length, firstOff: off[0] ?? null }
}

/** Drilled holes as flashes of their size, to ask what lies over them. */
export function indexHoles(holes: readonly Hole[]): FlashIndex {
  const flashes: Flashes = { x: [], y: [], halfX: [], halfY: [], aperture: [] }
  for (const hole of holes) {
    const [x, y] = holeCentre(hole)
    flashes.x.push(x)
    flashes.y.push(y)
    flashes.halfX.push(hole.diameter / 2)
    flashes.halfY.push(hole.diameter / 2)
    flashes.aperture.push(null)
  }
  return indexFlashes(flashes)
}

/** Whether a small opening lies within a flash at least half as large again both ways. */
function isOnLarger({ cells, large, flashes }: FlashIndex, x: number, y: number, halfX: number, halfY: number): boolean {
  const covers = (i: number) =>
    flashes.halfX[i]! >= 1.5 * halfX &&
    flashes.halfY[i]! >= 1.5 * halfY &&
    Math.abs(x - flashes.x[i]!) + halfX <= flashes.halfX[i]! + slack &&
    Math.abs(y - flashes.y[i]!) + halfY <= flashes.halfY[i]! + slack
  return (cells.get(key(Math.floor(x / cellSize), Math.floor(y / cellSize))) ?? []).some(covers) || large.some(covers)
}

/**
 * The shift that most holes share against the middles of their pads, in mm; null when they sit in the middle, or each is off its own way
 * (as the half-holes of opposite edges are). Median of the offsets, shared by at least 70 % of five or more holes.
 *
 * @param isSparse only some holes have a pad on the layer: 90 % of those that have one must share the shift
 */
export function commonShift(index: FlashIndex, holes: readonly Hole[], isSparse = false): [number, number] | null {
  const offsets: [number, number][] = []
  for (const hole of holes) {
    const [x, y] = holeCentre(hole)
    const offset = nearestMiddle(index, x, y)
    if (offset) offsets.push(offset)
  }
  if (offsets.length < 5) return null
  const median = (axis: 0 | 1) => offsets.map((offset) => offset[axis]).sort((a, b) => a - b)[Math.floor(offsets.length / 2)]!
  const [dx, dy] = [median(0), median(1)]
  if (Math.hypot(dx, dy) < 0.15) return null
  const sharing = offsets.filter((offset) => Math.hypot(offset[0] - dx, offset[1] - dy) < 0.05)
  return sharing.length >= (isSparse ? 0.9 * offsets.length : 0.7 * holes.length) ? [dx, dy] : null
}

/** How far a place is from the middle of the nearest flash that covers it. */
function nearestMiddle({ cells, flashes }: FlashIndex, x: number, y: number): [number, number] | null {
  let nearest: [number, number] | null = null
  for (const i of cells.get(key(Math.floor(x / cellSize), Math.floor(y / cellSize))) ?? []) {
    const [dx, dy] = [x - flashes.x[i]!, y - flashes.y[i]!]
    const isCovering = Math.abs(dx) <= flashes.halfX[i]! + slack && Math.abs(dy) <= flashes.halfY[i]! + slack
    if (isCovering && (!nearest || Math.hypot(dx, dy) < Math.hypot(...nearest))) nearest = [dx, dy]
  }
  return nearest
}
