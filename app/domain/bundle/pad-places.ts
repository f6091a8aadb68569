import { emptyBox, growBox, type Box } from './geometry'
import type { Placed } from './read-placement'

/** How far past the box of its pads, in mm, a part's place still counts as on them: lists name the middle, the first pin or the body. */
const onPads = 0.5
/** How far past it a place is certainly off. */
const farOff = 3
/** Parts from which on a common shift can be told from chance, and a common unit or any mirror line. */
const leastShifted = 3
const leastParts = 4

/** A placed part and the box of the pads that carry its name, in mm. */
export type PlacedPads = { part: Placed; box: Box }

/**
 * What the parts' pads say of their places: they lie on them after a common shift (0, 0 where none is needed), or the bottom side only does
 * with X turned round, or all of them only do in another unit. Null where none of it holds.
 */
export type PlacesVerdict =
  | { kind: 'fit'; x: number; y: number }
  | { kind: 'mirrored'; x: number; y: number; parts: Placed[]; by: string }
  | { kind: 'unit'; is: string }
  | null

/** Units in which a list may really be written, as the factor to what was read. */
export const otherUnits = [
  { scale: 0.0254, is: 'mils' },
  { scale: 25.4, is: 'inches' },
  { scale: 1 / 0.0254, is: 'millimetres, though it says mils' },
  { scale: 1 / 25.4, is: 'millimetres, though it says inches' }
]
const otherInches = [
  { scale: 0.001, is: 'mils, though it says inches' },
  { scale: 1000, is: 'inches, though it says mils' }
]

const middleX = ({ minX, maxX }: Box) => (minX + maxX) / 2
const middleY = ({ minY, maxY }: Box) => (minY + maxY) / 2

/** The diagonal of the box around some places, in mm. */
export function spreadOf(places: [number, number][]): number {
  const box = emptyBox()
  for (const [x, y] of places) growBox(box, x, y)
  return Math.hypot(box.maxX - box.minX, box.maxY - box.minY)
}

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.floor(sorted.length / 2)] ?? 0
}

/** The share of parts whose place, put through `moved`, lies on their pads or at most `slack` mm beside them. */
function shareOn(all: PlacedPads[], slack: number, moved: (part: Placed) => [number, number]): number {
  const on = all.filter(({ part, box }) => isOn(box, slack, ...moved(part)))
  return all.length === 0 ? 0 : on.length / all.length
}

const isOn = ({ minX, minY, maxX, maxY }: Box, slack: number, x: number, y: number) =>
  x >= minX - slack && x <= maxX + slack && y >= minY - slack && y <= maxY + slack

/** The shift from places to pads that most parts have; none where none does as well. */
function commonShift(all: PlacedPads[]): { x: number; y: number } {
  const tries = [all, all.filter(({ part }) => part.side === 'top'), all.filter(({ part }) => part.side === 'bottom')]
    .filter((some) => some.length >= leastShifted)
    .map((some) => ({
      x: median(some.map(({ part, box }) => middleX(box) - part.x)),
      y: median(some.map(({ part, box }) => middleY(box) - part.y))
    }))
  let best = { x: 0, y: 0 }
  let bestShare = shareOn(all, onPads, (part) => [part.x, part.y])
  for (const shift of tries) {
    const share = shareOn(all, onPads, (part) => [part.x + shift.x, part.y + shift.y])
    if (share <= bestShare) continue
    best = shift
    bestShare = share
  }
  return best
}

/** Whether the parts' places fit their pads as they are, mirrored or in another unit. `board` is the outline's box, where there is one. */
export function judgePlaces(all: PlacedPads[], board: Box | null): PlacesVerdict {
  const top = all.filter(({ part }) => part.side === 'top')
  const bottom = all.filter(({ part }) => part.side === 'bottom')
  const shift = commonShift(top.length >= leastShifted ? top : all)
  const mirrored = judgeBottom(top, bottom, shift, board)
  if (mirrored) return mirrored
  const common = commonShift(all)
  const share = shareOn(all, onPads, (part) => [part.x + common.x, part.y + common.y])
  if (share >= 0.8) return { kind: 'fit', ...common }
  return share < 0.5 ? judgeUnit(all) : null
}

function judgeBottom(top: PlacedPads[], bottom: PlacedPads[], shift: { x: number; y: number }, board: Box | null): PlacesVerdict {
  const asWritten = (by: { x: number; y: number }) => (part: Placed) => [part.x + by.x, part.y + by.y] as [number, number]
  const off = bottom.filter(({ part, box }) => !isOn(box, onPads, ...asWritten(shift)(part)))
  if (off.length * 2 <= bottom.length) return null
  if (!bottom.some(({ part, box }) => !isOn(box, farOff, ...asWritten(shift)(part)))) return null
  if (top.length > 0 && shareOn(top, onPads, asWritten(shift)) < 0.8) return null
  // The bottom side may count from a corner of its own.
  if (bottom.length > 1 && shareOn(bottom, onPads, asWritten(commonShift(bottom))) >= 0.5) return null

  const lines = [{ sum: shift.x, y: shift.y, by: 'with X negated' }]
  if (board) lines.push({ sum: board.minX + board.maxX - shift.x, y: shift.y, by: "mirrored about the board's middle" })
  if (bottom.length >= leastParts) {
    const sum = median(bottom.map(({ part, box }) => middleX(box) + part.x))
    lines.push({ sum, y: median(bottom.map(({ part, box }) => middleY(box) - part.y)), by: 'with X turned round' })
  }
  const line = lines.find(({ sum, y }) => shareOn(bottom, onPads, (part) => [sum - part.x, part.y + y]) >= 0.8)
  return line ? { kind: 'mirrored', ...shift, parts: off.map(({ part }) => part), by: line.by } : null
}

function judgeUnit(all: PlacedPads[]): PlacesVerdict {
  if (all.length < leastParts) return null
  const pads = spreadOf(all.map(({ box }) => [middleX(box), middleY(box)]))
  for (const { scale, is } of [...otherUnits, ...otherInches]) {
    const scaled = all.map(({ part, box }) => ({ part: { ...part, x: part.x * scale, y: part.y * scale }, box }))
    // Places that shrink to a heap would lie on anything large.
    const spread = spreadOf(scaled.map(({ part }) => [part.x, part.y]))
    if (!(spread > pads * 0.5 && spread < pads * 2)) continue
    const shift = commonShift(scaled)
    if (shareOn(scaled, onPads, (part) => [part.x + shift.x, part.y + shift.y]) >= 0.8) return { kind: 'unit', is }
  }
  return null
}
