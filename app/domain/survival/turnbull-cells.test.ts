import { expect, test } from 'vitest'
import type { Observation } from './observation'
import { spansOf } from './spans'
import { cellsOf } from './turnbull-cells'

const cells = (rows: Observation[]) => {
  const { left, right } = cellsOf(spansOf(rows))
  return [...left].map((l, k) => [l, right[k]])
}

test.each<[string, Observation[], number[][]]>([
  ['none', [], []],
  [
    'disjoint',
    [
      { lower: 0, upper: 2 },
      { lower: 3, upper: 4 }
    ],
    [
      [0, 2],
      [3, 4]
    ]
  ],
  [
    'touching',
    [
      { lower: 0, upper: 5 },
      { lower: 5, upper: 7 }
    ],
    [
      [0, 5],
      [5, 7]
    ]
  ],
  [
    'nested',
    [
      { lower: 0, upper: 10 },
      { lower: 2, upper: 6 },
      { lower: 3, upper: 4 }
    ],
    [[3, 4]]
  ],
  [
    'a chain leaves its common parts',
    [
      { lower: 0, upper: 4 },
      { lower: 2, upper: 6 },
      { lower: 5, upper: 9 }
    ],
    [
      [2, 4],
      [5, 6]
    ]
  ],
  [
    'exact at an end',
    [
      { lower: 3, upper: 5 },
      { time: 5, event: 1 }
    ],
    [[5, 5]]
  ],
  [
    'exact and still working on the same day',
    [
      { time: 5, event: 1 },
      { time: 5, event: 0 }
    ],
    [
      [5, 5],
      [5, Infinity]
    ]
  ],
  [
    'right-censored only',
    [
      { time: 3, event: 0 },
      { time: 5, event: 0 }
    ],
    [[5, Infinity]]
  ],
  [
    'an entry closes a cell',
    [
      { lower: 0, upper: 6 },
      { entry: 3, lower: 4, upper: 8 }
    ],
    [
      [0, 3],
      [4, 6]
    ]
  ]
])('%s', (_what, rows, expected) => {
  expect(cells(rows)).toEqual(expected)
})

test('each row knows its cells and those before its entry', () => {
  const rows: Observation[] = [
    { lower: 0, upper: 6 },
    { entry: 3, lower: 4, upper: 8 },
    { entry: 3, time: 5, event: 0 }
  ]
  // The entry at 3 closes (0, 3]; the unit still working at 5 opens (5, 6].
  expect(cells(rows)).toEqual([
    [0, 3],
    [5, 6]
  ])
  const { first, last, entered } = cellsOf(spansOf(rows))
  expect([...first]).toEqual([0, 1, 1])
  expect([...last]).toEqual([1, 1, 1])
  expect([...entered]).toEqual([0, 1, 1])
})
