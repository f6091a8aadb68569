import fc from 'fast-check'
import { describe, expect, it, test } from 'vitest'
import { blockDays, blockOf, counterOf, dayInBlock, decodeBlock, encodeBlock, slotOf } from './day-block'
import { counters } from './group-counts'

const slots = counters.length * blockDays
const hex = (bytes: Uint8Array) => Buffer.from(bytes).toString('hex')
const bytes = (text: string) => Uint8Array.from(Buffer.from(text, 'hex'))

/** Blocks as a board has them: mostly small counts, here and there one as large as a number can be exactly. */
const anyBlock = fc
  .array(
    fc.tuple(
      fc.nat(slots - 1),
      fc.oneof(
        fc.integer({ min: 1, max: 300 }),
        fc.maxSafeInteger().map((n) => Math.max(1, Math.abs(n)))
      )
    ),
    { maxLength: 120 }
  )
  .map((pairs) => new Map(pairs))

describe('a block of day counts', () => {
  it('comes back as it was, and is the same bytes in whatever order it was made', () => {
    fc.assert(
      fc.property(anyBlock, (block) => {
        const encoded = encodeBlock(block)
        const decoded = decodeBlock(encoded)
        expect(decoded).toEqual(block)
        expect([...decoded.keys()]).toEqual([...block.keys()].sort((a, b) => a - b))
        expect(encodeBlock(new Map([...block].reverse()))).toEqual(encoded)
      })
    )
  })

  it('gives a day its place, also one long past or before the installation', () => {
    fc.assert(
      fc.property(fc.integer({ min: -100_000, max: 100_000 }), fc.constantFrom(...counters), (day, counter) => {
        const slot = slotOf(counter, day)
        expect(slot).toBeGreaterThanOrEqual(0)
        expect(slot).toBeLessThan(slots)
        expect([counterOf(slot), blockOf(day) * blockDays + dayInBlock(slot)]).toEqual([counter, day])
      })
    )
  })

  // By hand: distance of the slot from the one before, less one, then the count; 300 is 44 and twice 128.
  test.each([
    ['nothing', [], ''],
    ['one unit that entered on day 0', [['entered', 0, 1]], '0001'],
    [
      'two days in a row',
      [
        ['entered', 0, 5],
        ['entered', 1, 300]
      ],
      '000500ac02'
    ],
    ['one that left on day 33 of the second block', [['left', 33, 1]], '2101']
  ] as [string, [(typeof counters)[number], number, number][], string][])(
    'is written as worked out by hand: %s',
    (_what, counts, text) => {
      const block = new Map(counts.map(([counter, day, count]) => [slotOf(counter, day), count]))
      expect(hex(encodeBlock(block))).toBe(text)
      expect(decodeBlock(bytes(text))).toEqual(block)
    }
  )

  test.each([
    ['a slot without its count', '00', 'cut off'],
    ['a number that goes on past the end', '0080', 'cut off'],
    ['a count of 0', '0000', 'count is 0'],
    ['a slot past the end', 'ff7f01', 'past the end'],
    ['slots that add up past the end', 'b70301b70301', 'past the end'],
    ['a number written longer than needed', '008100', 'longer than needed'],
    ['a count that is not exact', '00ffffffffffffff7f', 'too large']
  ])('is refused when it is broken: %s', (_what, text, reason) => {
    expect(() => decodeBlock(bytes(text))).toThrow(reason)
  })

  it('never comes of any bytes but its own', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 40 }), (some) => {
        let block
        try {
          block = decodeBlock(some)
        } catch (error) {
          expect((error as Error).message).toContain('broken')
          return
        }
        expect(hex(encodeBlock(block))).toBe(hex(some))
      }),
      { numRuns: 2000 }
    )
  })

  test.each([
    [slots, 1],
    [-1, 1],
    [0.5, 1],
    [0, 0],
    [0, -1],
    [0, 1.5],
    [0, 2 ** 53]
  ])('is not made of slot %d with count %d', (slot, count) => {
    expect(() => encodeBlock(new Map([[slot, count]]))).toThrow('block')
  })
})
