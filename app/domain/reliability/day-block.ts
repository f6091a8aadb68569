import { counters, type Counter } from './group-counts'

/** Days of one stored block. */
export const blockDays = 32

/** The block that a day lies in, and its place there. Any whole day has one, also before the installation. */
export const blockOf = (day: number): number => Math.floor(day / blockDays)
export const slotOf = (counter: Counter, day: number): number =>
  counterIndex.get(counter)! * blockDays + (day - blockOf(day) * blockDays)

const counterIndex = new Map(counters.map((counter, i) => [counter, i]))
const slots = counters.length * blockDays

/** The counts of a block by slot; a slot is the counter's index times 32, plus the day's place. None is 0. */
export type DayBlock = Map<number, number>

/**
 * A block as bytes: its slots in ascending order, each as the distance from the one before (the first from -1, less one) and the count, both as
 * little-endian base 128 with the high bit for "more follows". The same counts give the same bytes, so that blocks are compared as bytes.
 * @throws Error for a slot or count that no block can have
 */
export function encodeBlock(block: DayBlock): Uint8Array {
  const bytes: number[] = []
  let next = 0
  for (const slot of [...block.keys()].sort((a, b) => a - b)) {
    const count = block.get(slot)!
    if (!(Number.isInteger(slot) && slot >= 0 && slot < slots)) throw new Error(`A block has no slot ${slot}`)
    if (!(Number.isSafeInteger(count) && count > 0)) throw new Error(`A block cannot count ${count}`)
    push(bytes, slot - next)
    push(bytes, count)
    next = slot + 1
  }
  return Uint8Array.from(bytes)
}

function push(bytes: number[], value: number): void {
  for (; value >= 128; value = Math.floor(value / 128)) bytes.push((value % 128) + 128)
  bytes.push(value)
}

/**
 * Reads a block's bytes.
 * @throws Error when they are no block: cut off, a slot past the end, a count of 0 or past what is exact, or a number written longer than needed
 */
export function decodeBlock(bytes: Uint8Array): DayBlock {
  const block: DayBlock = new Map()
  readBlock(bytes, (slot, count) => void block.set(slot, count))
  return block
}

/** As `decodeBlock`, told slot by slot in ascending order. */
export function readBlock(bytes: Uint8Array, tell: (slot: number, count: number) => void): void {
  let at = 0
  const next = (): number => {
    let value = 0
    for (let scale = 1; ; scale *= 128) {
      const byte = bytes[at++]
      if (byte === undefined) throw broken('it is cut off')
      value += (byte & 127) * scale
      if (value > Number.MAX_SAFE_INTEGER) throw broken('a number is too large')
      if (byte < 128) {
        if (byte === 0 && scale > 1) throw broken('a number is written longer than needed')
        return value
      }
    }
  }
  let slot = -1
  while (at < bytes.length) {
    slot += next() + 1
    if (slot >= slots) throw broken('a slot lies past the end')
    const count = next()
    if (count === 0) throw broken('a count is 0')
    tell(slot, count)
  }
}

const broken = (what: string) => new Error(`A stored block of day counts is broken: ${what}. \`fettle recount\` mends it.`)

/** The counter of a slot, and its day within the block. */
export const counterOf = (slot: number): Counter => counters[Math.floor(slot / blockDays)]!
export const dayInBlock = (slot: number): number => slot % blockDays
