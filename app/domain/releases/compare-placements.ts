import type { Placed } from '~/domain/bundle/read-placement'
import type { MovedGroup, PartMark, Shift } from './what-changed.types'

/** Smaller differences are rounding: of a placement file in mil, or of a tool's last digit. mm, degrees. */
export const leastMove = 0.01
export const leastTurn = 0.05

/** Fewer parts than this that moved alike are parts that moved, not a file that counts from elsewhere. */
const fewestShifted = 3

const order = new Intl.Collator('en', { numeric: true }).compare
/** Takes back what subtracting two decimals adds, far below any file's last digit. */
const tidy = (value: number) => Math.round(value * 1e6) / 1e6 + 0

/**
 * From one rotation to another by the shorter way, in degrees over -180 up to 180, counter-clockwise positive; 0 where it is rounding.
 * Full turns do not count: 360 is 0 and -90 is 270.
 */
export function turnBetween(before: number, after: number): number {
  const turn = tidy((((after - before) % 360) + 360) % 360)
  const shorter = turn > 180 ? turn - 360 : turn
  return Math.abs(shorter) < leastTurn ? 0 : tidy(shorter)
}

const median = (values: number[]) => values.sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? 0

/** What more than half of the parts have in common: seen from the outline's corner all of them lie elsewhere by it. */
function shiftOf(moves: readonly { dx: number; dy: number }[]): Shift | null {
  const [dx, dy] = [median(moves.map((m) => m.dx)), median(moves.map((m) => m.dy))]
  if (Math.hypot(dx, dy) < leastMove) return null
  const parts = moves.filter((m) => Math.hypot(m.dx - dx, m.dy - dy) < leastMove).length
  return parts < fewestShifted || 2 * parts <= moves.length ? null : { dx, dy, parts, of: moves.length }
}

/**
 * Parts that lie elsewhere, are turned, or are on the board's other side; those alike stand in one group. When more than half of all parts moved
 * alike that is said once as a shift, and each part is compared as if the shift had been made.
 * @param before, after places by designator, mm from the outline's lower left corner
 */
export function movesOf(
  before: ReadonlyMap<string, Placed>,
  after: ReadonlyMap<string, Placed>
): { moved: MovedGroup[]; shift: Shift | null; marks: PartMark[] } {
  const pairs = [...after].flatMap(([key, to]) => {
    const from = before.get(key)
    return from ? [{ key, from, to, dx: tidy(to.x - from.x), dy: tidy(to.y - from.y) }] : []
  })
  const shift = shiftOf(pairs)
  const groups = new Map<string, MovedGroup>()
  const marks: PartMark[] = []
  for (const pair of pairs.sort((a, b) => order(a.key, b.key))) {
    const { from, to } = pair
    const [dx, dy] = [tidy(pair.dx - (shift?.dx ?? 0)), tidy(pair.dy - (shift?.dy ?? 0))]
    const distance = Math.hypot(dx, dy)
    const turn = from.rotation === null || to.rotation === null ? null : turnBetween(from.rotation, to.rotation)
    const toSide = from.side === to.side ? null : to.side
    const isMoved = distance >= leastMove
    // the rotation of a part on the other side is counted from there, and says nothing beside the old one
    if (!isMoved && !toSide && !turn) continue
    const move = {
      dx: isMoved ? dx : 0,
      dy: isMoved ? dy : 0,
      distance: isMoved ? tidy(distance) : 0,
      turn: toSide ? null : turn,
      toSide
    }
    const designator = to.designator.trim()
    const key = JSON.stringify([move.dx.toFixed(2), move.dy.toFixed(2), move.turn?.toFixed(1), toSide])
    const group = groups.get(key)
    if (group) group.designators.push(designator)
    else groups.set(key, { designators: [designator], ...move })
    marks.push({
      designator,
      kind: 'moved',
      from: { x: tidy(from.x + (shift?.dx ?? 0)), y: tidy(from.y + (shift?.dy ?? 0)), side: from.side },
      to: { x: tidy(to.x), y: tidy(to.y), side: to.side }
    })
  }
  return { moved: [...groups.values()], shift, marks }
}
