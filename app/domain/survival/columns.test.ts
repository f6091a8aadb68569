import { expect, test } from 'vitest'
import { columnsOf, lastAtOrBefore, mergeNearTimes, splitColumns } from './columns'

const columns = (time: number[], entry: number[] | null = null) => ({
  time: Float64Array.from(time),
  event: new Uint16Array(time.length).fill(1),
  entry: entry && Float64Array.from(entry),
  weight: null,
  causes: []
})

test('times that differ by rounding become the smallest of them', () => {
  expect([...mergeNearTimes(columns([0.1 + 0.2, 0.3, 0.5])).time]).toEqual([0.3, 0.3, 0.5])
})

test('nearness is relative to the mean distinct time', () => {
  expect([...mergeNearTimes(columns([1e9 + 0.5, 1e9, 3e9])).time]).toEqual([1e9, 1e9, 3e9])
  expect([...mergeNearTimes(columns([1, 1 + 1e-7, 2])).time]).toEqual([1, 1 + 1e-7, 2])
})

test('entries and exits are merged together', () => {
  const merged = mergeNearTimes(columns([0.3, 0.9], [0, 0.1 + 0.2]))
  expect([...merged.entry!]).toEqual([0, 0.3])
})

test('causes are numbered in their sorted order or the one given', () => {
  const rows = [
    { time: 1, event: 'fitting' },
    { time: 2, event: 'board' },
    { time: 3, event: 0 }
  ]
  expect(columnsOf(rows)).toMatchObject({
    causes: ['board', 'fitting'],
    event: Uint16Array.of(2, 1, 0),
    entry: null,
    weight: null
  })
  expect(columnsOf(rows, ['fitting', 'other', 'board']).event).toEqual(Uint16Array.of(1, 3, 0))
  expect(() => columnsOf(rows, ['board'])).toThrow(RangeError)
})

test('groups keep their rows in order', () => {
  const parts = splitColumns(
    columnsOf([
      { time: 1, event: 1 },
      { time: 2, event: 0, weight: 3 },
      { time: 3, entry: 2, event: 1 }
    ]),
    [1, 0, 1],
    3
  )
  expect(parts.map((part) => [...part.time])).toEqual([[2], [1, 3], []])
  expect([...parts[0]!.weight!]).toEqual([3])
  expect([...parts[1]!.entry!]).toEqual([0, 2])
})

test.each([
  [-1, -1],
  [0, 0],
  [1.5, 0],
  [2, 1],
  [99, 2]
])('last at or before %s', (value, index) => {
  expect(lastAtOrBefore([0, 2, 4], value)).toBe(index)
})
