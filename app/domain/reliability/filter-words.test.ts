import { describe, expect, it } from 'vitest'
import { filtersInForce, queryWith, selectionHeading, selectionLabel } from './filter-words'
import { readFilters } from './reliability-filters'

const today = '2026-12-01'
const read = (query: string) => readFilters(new URLSearchParams(query), today).filters

describe('selectionHeading', () => {
  it.each([
    ['', 'How long Buttress lasts'],
    ['release=1.1.1', 'How long Buttress 1.1.1 lasts'],
    ['release=1.1.1&revision=TM-3', 'How long Buttress 1.1.1 lasts in TM-3'],
    ['board-revision=B', 'How long Buttress board revision B lasts'],
    ['board-revision=B&release=1.1.1', 'How long Buttress 1.1.1 lasts'],
    ['batch=1.1.1/2024-09&revision=TM-3', 'How long Buttress 1.1.1, batch 2024-09, lasts in TM-3']
  ])('%s', (query, heading) => {
    expect(selectionHeading('Buttress', read(query))).toBe(heading)
  })
})

it('names the selection in a trail', () => {
  expect(selectionLabel('Buttress', read('cause=board'))).toBeNull()
  expect(selectionLabel('Buttress', read('batch=1.1.1/2024-09&revision=TM-3'))).toBe('Buttress 1.1.1, batch 2024-09 in TM-3')
})

describe('filtersInForce', () => {
  it('names nothing when nothing is narrowed', () => {
    expect(filtersInForce(read('evidence=any&as-of=2026-12-01'), today)).toEqual([])
  })
  it('says each filter in words and gives the address without it', () => {
    const every =
      'release=1.1.1&board-revision=B&revision=TM-3&batch=1.1.1%2F2024-09&cause=board&evidence=established&method=untold&first-power=set-aside&since=2024-01-01&silent=bounds&as-of=2025-01-01'
    const inForce = filtersInForce(read(every), today)
    expect(inForce.map(({ words }) => words)).toEqual([
      'release 1.1.1',
      'board revision B',
      'console revision TM-3',
      'batch 1.1.1, 2024-09',
      'failures by the board, or unexplained',
      'fault measured or read from a code',
      'fitted by a method not told',
      'given it worked on the bench',
      'fitted on 2024-01-01 or later',
      'with what the silent could hide',
      'as known on 2025-01-01'
    ])
    for (const { name, without } of inForce) {
      const expected = new URLSearchParams(every)
      expected.delete(name)
      expect(Object.fromEntries(new URLSearchParams(without)), name).toEqual(Object.fromEntries(expected))
    }
  })
})

describe('queryWith', () => {
  it('names the as-of day only when it is not today', () => {
    expect(queryWith(read(''), { revision: 'TM-3' }, today)).toBe('revision=TM-3')
    expect(queryWith(read('as-of=2025-01-01'), { revision: 'TM-3' }, today)).toBe('revision=TM-3&as-of=2025-01-01')
  })
  it('leaves the filters it was given as they were', () => {
    const filters = read('cause=board')
    queryWith(filters, { cause: null }, today)
    expect(filters.cause).toBe('board')
  })
})
