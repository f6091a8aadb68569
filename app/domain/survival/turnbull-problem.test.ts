import { expect, test } from 'vitest'
import { spansOf } from './spans'
import { cellsOf } from './turnbull-cells'
import { loadOf, problemOf } from './turnbull-problem'

const spans = spansOf([
  { lower: 0, upper: 2 },
  { lower: 2, upper: 4, weight: 2 },
  { lower: 2, upper: 4 },
  { lower: 4, upper: null },
  { entry: 2, lower: 4, upper: null }
])

test('failures with the same cells are one term; survivors are counted through the cells they outlived', () => {
  const cells = cellsOf(spans)
  const problem = problemOf(cells, spans)
  expect(problem).toMatchObject({
    size: 3,
    first: Int32Array.of(0, 1),
    last: Int32Array.of(0, 1),
    termOf: Int32Array.of(0, 1, 1, -1, -1)
  })
  const { survived, weight } = loadOf(problem, cells, spans.weight)
  expect([...weight]).toEqual([1, 3])
  // Cell 1, (0, 2]: the three that failed later and one survivor; the late one entered after it. Cell 2: both survivors.
  expect([...survived]).toEqual([4, 2, 0])
})

test('weights of 0 leave a row out', () => {
  const cells = cellsOf(spans)
  const { survived, weight } = loadOf(problemOf(cells, spans), cells, [1, 0, 0, 1, 0])
  expect([...weight]).toEqual([1, 0])
  expect([...survived]).toEqual([1, 1, 0])
})
