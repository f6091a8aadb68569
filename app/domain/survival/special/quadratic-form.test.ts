import { expect, test } from 'vitest'
import { quadraticForm } from './quadratic-form'

test.each([
  ['one dimension', [[4]], [6], 9, 1],
  [
    'diagonal',
    [
      [2, 0],
      [0, 5]
    ],
    [2, 5],
    7,
    2
  ],
  [
    'correlated: (1, 1) over [[2, 1], [1, 2]] is 2/3',
    [
      [2, 1],
      [1, 2]
    ],
    [1, 1],
    2 / 3,
    2
  ],
  [
    'singular: the second direction is the first again',
    [
      [2, -2],
      [-2, 2]
    ],
    [2, -2],
    2,
    1
  ],
  [
    'nothing varies',
    [
      [0, 0],
      [0, 0]
    ],
    [0, 0],
    0,
    0
  ],
  ['empty', [], [], 0, 0]
])('%s', (_what, matrix, vector, value, rank) => {
  const ours = quadraticForm(matrix, vector)
  expect(ours.value).toBeCloseTo(value, 14)
  expect(ours.rank).toBe(rank)
})
