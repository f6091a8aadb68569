import { expect, test } from 'vitest'
import { columnsOf } from './columns'
import { atRiskAt, failuresIn, tallyForCause, tallyOf, unitsIn } from './tally'

const rows = [
  { time: 0, event: 'board' },
  { time: 4, event: 'fitting', weight: 2 },
  { entry: 2, time: 4, event: 'board' },
  { entry: 4, time: 9, event: 0 }
]

test.each([1, 1 / 3])('counts by time, whole or not (times %s)', (unit) => {
  const tally = tallyOf(columnsOf(rows.map((row) => ({ ...row, time: row.time * unit, entry: (row.entry ?? 0) * unit }))))
  expect([...tally.time]).toEqual([0, 2, 4, 9].map((t) => t * unit))
  expect([...tally.entered]).toEqual([3, 1, 1, 0])
  expect([...tally.failed]).toEqual([1, 0, 3, 0])
  expect([...tally.censored]).toEqual([0, 0, 0, 1])
  expect(tally.causes).toEqual(['board', 'fitting'])
  expect(tally.failedBy.map((by) => [...by])).toEqual([
    [1, 0, 1, 0],
    [0, 0, 2, 0]
  ])
})

test('other causes leave as censored', () => {
  const board = tallyForCause(tallyOf(columnsOf(rows)), 'board')
  expect([...board.failed]).toEqual([1, 0, 1, 0])
  expect([...board.censored]).toEqual([0, 0, 2, 1])
  const none = tallyForCause(tallyOf(columnsOf(rows)), 'accident')
  expect(failuresIn(none)).toBe(0)
  expect([...none.censored]).toEqual([1, 0, 3, 1])
})

test('at risk: entered before (or at 0), neither failed nor left before', () => {
  const tally = tallyOf(columnsOf(rows))
  expect([0, 1, 2, 3, 4, 5, 9, 10].map((t) => atRiskAt(tally, t))).toEqual([3, 2, 2, 3, 3, 1, 1, 0])
  expect([unitsIn(tally), failuresIn(tally)]).toEqual([5, 4])
})

test('many uneven times are counted as one by one', () => {
  const rows = Array.from({ length: 500 }, (_, i) => ({ time: ((i * 37) % 211) ** 3 / 7, event: i % 2 }))
  const tally = tallyOf(columnsOf(rows))
  const distinct = [...new Set(rows.map(({ time }) => time))].sort((a, b) => a - b)
  expect([...tally.time]).toEqual(distinct)
  expect([...tally.failed]).toEqual(distinct.map((time) => rows.filter((row) => row.time === time && row.event === 1).length))
  expect([...tally.censored]).toEqual(distinct.map((time) => rows.filter((row) => row.time === time && row.event === 0).length))
})
