import { expect, test } from 'vitest'
import { reference } from '../../../tests/support/survival-reference'
import { columnsOf, splitColumns } from './columns'
import { logRank } from './log-rank'
import { pairwiseLogRank } from './pairwise-log-rank'
import { tallyOf } from './tally'

test('three groups of a published trial: each pair as tested alone, adjusted by Holm by hand', () => {
  const { data } = reference('right-transplant137')
  const groups = ['1-ALL', '2-AML-low', '3-AML-high']
  const rows = data.time.map((time: number, i: number) => ({ time, event: data.event[i] }))
  const tallies = splitColumns(
    columnsOf(rows),
    data.group.map((group: string) => groups.indexOf(group)),
    3
  ).map(tallyOf)
  const pairs = pairwiseLogRank([tallies])
  expect(pairs.map(({ first, second }) => [first, second])).toEqual([
    [0, 1],
    [0, 2],
    [1, 2]
  ])
  const p = pairs.map(({ first, second, test: result }) => {
    expect(result).toEqual(logRank([[tallies[first]!, tallies[second]!]]))
    return result!.p
  })
  const [small, middle, large] = [...p].sort((a, b) => a - b)
  const adjusted = new Map([
    [small, 3 * small!],
    [middle, Math.max(3 * small!, 2 * middle!)],
    [large, Math.max(3 * small!, 2 * middle!, large!)]
  ])
  pairs.forEach(({ adjustedP }, i) => expect(adjustedP).toBeCloseTo(Math.min(1, adjusted.get(p[i])!), 14))
})

test('a pair without failures carries null and costs the others nothing', () => {
  const group = [0, 0, 1, 1, 2]
  const rows = [
    [3, 1],
    [9, 0],
    [4, 1],
    [5, 1],
    [1, 0]
  ].map(([time, event]) => ({ time: time!, event: event! }))
  const pairs = pairwiseLogRank([splitColumns(columnsOf(rows), group, 3).map(tallyOf)])
  expect(pairs[1]).toMatchObject({ first: 0, second: 2, test: null, adjustedP: null })
  expect(pairs[0]!.adjustedP).toBe(pairs[0]!.test!.p)
})
