import fc from 'fast-check'
import { expect, test } from 'vitest'
import { columnsOf } from './columns'
import { possiblyAtRisk } from './possibly-at-risk'
import { spansOf } from './spans'
import { atRiskAt, tallyOf } from './tally'

test('by hand: entered before, not known to have failed or left before', () => {
  const spans = spansOf([
    { lower: 0, upper: 5 },
    { entry: 3, lower: 4, upper: 9, weight: 2 },
    { entry: 5, lower: 6, upper: 9 },
    { lower: 7, upper: null }
  ])
  // The last was seen working at 7 only.
  expect(possiblyAtRisk(spans, Float64Array.of(0, 3, 4, 5, 6, 9, 10))).toEqual([2, 2, 4, 4, 4, 3, 0])
})

test('for exact and right-censored times it is the number at risk', () => {
  const row = fc
    .record({ entry: fc.integer({ min: 0, max: 9 }), length: fc.integer({ min: 1, max: 9 }), event: fc.constantFrom(0, 1) })
    .map(({ entry, length, event }) => ({ entry, time: entry + length, event }))
  fc.assert(
    fc.property(fc.array(row, { maxLength: 20 }), (rows) => {
      const times = Float64Array.from({ length: 20 }, (_, t) => t)
      const tally = tallyOf(columnsOf(rows))
      expect(possiblyAtRisk(spansOf(rows), times)).toEqual([...times].map((t) => atRiskAt(tally, t)))
    })
  )
})

test('a few times are told as many are', () => {
  const row = fc
    .record({ entry: fc.nat(6), from: fc.nat(6), width: fc.option(fc.nat(5)), weight: fc.integer({ min: 1, max: 3 }) })
    .map(({ entry, from, width, weight }) => ({
      entry,
      lower: entry + from + 1,
      upper: width === null ? null : entry + from + 1 + width,
      weight
    }))
  fc.assert(
    fc.property(fc.array(row, { maxLength: 20 }), (rows) => {
      const spans = spansOf(rows)
      const times = Float64Array.from({ length: 20 }, (_, t) => t)
      expect([...times].flatMap((t) => possiblyAtRisk(spans, Float64Array.of(t)))).toEqual(possiblyAtRisk(spans, times))
    })
  )
})
