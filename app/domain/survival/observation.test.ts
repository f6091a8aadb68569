import { describe, expect, test } from 'vitest'
import { checkObservations, type Observation } from './observation'

test.each<[string, Observation[]]>([
  ['none', []],
  [
    'failed and working',
    [
      { time: 3, event: 1 },
      { time: 3.5, event: 0, entry: 0, weight: 2 }
    ]
  ],
  [
    'day 0',
    [
      { time: 0, event: 1 },
      { time: 0, event: 0 }
    ]
  ],
  [
    'causes beside censored rows',
    [
      { time: 3, event: 'board' },
      { time: 4, event: 0 },
      { time: 4, event: 'fitting' }
    ]
  ],
  [
    'intervals',
    [
      { lower: 0, upper: 5 },
      { lower: 5, upper: 5 },
      { lower: 5, upper: null },
      { lower: 1, upper: 6, entry: 2 }
    ]
  ]
])('usable: %s', (_what, rows) => {
  expect(checkObservations(rows)).toEqual([])
})

// The last column stands for input that a type does not stop, such as parsed JSON.
test.each<[string, unknown[], string]>([
  ['negative time', [{ time: -1, event: 0 }], 'observations.0.time'],
  [
    'no number',
    [
      { time: 1, event: 0 },
      { time: NaN, event: 0 }
    ],
    'observations.1.time'
  ],
  ['endless', [{ time: Infinity, event: 0 }], 'observations.0.time'],
  ['text', [{ time: '5', event: 0 }], 'observations.0.time'],
  ['entry = exit', [{ time: 5, event: 0, entry: 5 }], 'observations.0.time'],
  ['entry = exit but for rounding', [{ time: 0.30000000000000004, event: 0, entry: 0.3 }], 'observations.0.time'],
  ['entry after exit', [{ time: 5, event: 1, entry: 6 }], 'observations.0.time'],
  ['negative entry', [{ time: 5, event: 1, entry: -1 }], 'observations.0.entry'],
  ['event 2', [{ time: 5, event: 2 }], 'observations.0.event'],
  ['no event', [{ time: 5 }], 'observations.0.event'],
  ['nameless cause', [{ time: 5, event: ' ' }], 'observations.0.event'],
  ['0 as text', [{ time: 5, event: '0' }], 'observations.0.event'],
  [
    '1 then a name',
    [
      { time: 5, event: 1 },
      { time: 5, event: 'board' }
    ],
    'observations.1.event'
  ],
  [
    'a name then 1',
    [
      { time: 5, event: 'board' },
      { time: 5, event: 1 }
    ],
    'observations.1.event'
  ],
  ['weight 0', [{ time: 5, event: 1, weight: 0 }], 'observations.0.weight'],
  ['weight 1.5', [{ time: 5, event: 1, weight: 1.5 }], 'observations.0.weight'],
  ['interval backwards', [{ lower: 5, upper: 4 }], 'observations.0.upper'],
  ['negative lower end', [{ lower: -5, upper: 4 }], 'observations.0.lower'],
  ['interval over at entry', [{ lower: 2, upper: 4, entry: 4 }], 'observations.0.upper'],
  ['last seen at entry', [{ lower: 4, upper: null, entry: 4 }], 'observations.0.lower']
])('refused with its index: %s', (_what, rows, path) => {
  expect(checkObservations(rows as Observation[]).map((error) => error.path)).toEqual([path])
})

describe('many mistakes', () => {
  test('come in the order of the rows, up to a limit', () => {
    const rows = Array.from({ length: 50 }, () => ({ time: -1, event: 0 }))
    expect(checkObservations(rows, 3).map(({ path }) => path)).toEqual([
      'observations.0.time',
      'observations.1.time',
      'observations.2.time'
    ])
  })
})

test('a wrong value is told from values that cannot be true together', () => {
  const kinds = (rows: Observation[]) => checkObservations(rows).map(({ kind }) => kind)
  expect(
    kinds([
      { time: -1, event: 0 },
      { lower: 5, upper: 4 },
      { time: 5, event: 0, entry: 5 }
    ])
  ).toEqual(['invalid', 'impossible', 'impossible'])
  expect(
    kinds([
      { lower: 2, upper: 5, event: 0 },
      { lower: 2, upper: 5, event: 'board' },
      { lower: 2, upper: 5 }
    ])
  ).toEqual(['impossible'])
})
