import { describe, expect, it } from 'vitest'
import { countedCauses, filtersQuery, observationFilters, readFilters, unknownNames } from './reliability-filters'

const today = '2026-12-01'
const choices = {
  releases: [
    { version: '1.0.0', boardRevision: 'A' },
    { version: '1.1.0', boardRevision: 'B' }
  ],
  revisions: ['TM-1'],
  batches: [{ version: '1.0.0', code: '2024-09' }]
}
const read = (query: string) => readFilters(new URLSearchParams(query), today)

describe('readFilters', () => {
  it('stands at the defaults, as of today', () => {
    for (const query of ['', 'release=&revision=all&evidence=&as-of='])
      expect(read(query)).toEqual({
        filters: {
          release: null,
          boardRevision: null,
          revision: null,
          batch: null,
          cause: 'all',
          evidence: 'any',
          method: 'any',
          firstPower: 'counted',
          since: null,
          silent: 'as-reported',
          asOf: today
        },
        errors: []
      })
  })
  it('reads each filter, and its query gives the same again', () => {
    const query =
      'release=1.1.0-beta.2&board-revision=B&revision=TM-3&batch=1.1.0-beta.2%2F2024-09&cause=fitting&evidence=established&method=hot-air' +
      '&first-power=set-aside&since=2025-01-31&silent=bounds&as-of=2025-06-30'
    const { filters, errors } = read(query)
    expect(errors).toEqual([])
    expect(filters).toEqual({
      release: '1.1.0-beta.2',
      boardRevision: 'B',
      revision: 'TM-3',
      batch: '1.1.0-beta.2/2024-09',
      cause: 'fitting',
      evidence: 'established',
      method: 'hot-air',
      firstPower: 'set-aside',
      since: '2025-01-31',
      silent: 'bounds',
      asOf: '2025-06-30'
    })
    expect(filtersQuery(filters).toString()).toBe(query)
  })
  it.each([
    ['evidence=guess', 'evidence'],
    ['first-power=maybe', 'first-power'],
    ['as-of=2026-12-02', 'as-of'],
    ['as-of=2026-02-30', 'as-of'],
    ['as-of=yesterday', 'as-of'],
    ['cause=ghosts', 'cause'],
    ['method=glue', 'method'],
    ['silent=loud', 'silent'],
    ['since=2026-12-02', 'since'],
    ['since=2026-02-30', 'since'],
    [`release=${'9'.repeat(129)}`, 'release']
  ])('refuses %s', (query, path) => {
    expect(read(query).errors.map((e) => e.path)).toEqual([path])
  })
  it('names what the board does not have', () => {
    const paths = (query: string) => unknownNames(read(query).filters, choices).map((e) => e.path)
    expect(paths('release=9.9.9&board-revision=Z&revision=ZZ-1&batch=2024-09')).toEqual([
      'release',
      'board-revision',
      'revision',
      'batch'
    ])
    expect(paths('release=1.0.0&board-revision=A&revision=TM-1&batch=1.0.0/2024-09')).toEqual([])
  })
  it('tells names that do not go together', () => {
    const paths = (query: string) => unknownNames(read(query).filters, choices).map((e) => e.path)
    expect(paths('release=1.0.0&board-revision=B')).toEqual(['board-revision'])
    expect(paths('release=1.1.0&batch=1.0.0/2024-09')).toEqual(['batch'])
    expect(paths('board-revision=B&batch=1.0.0/2024-09')).toEqual(['batch'])
  })
  it('counts what nobody knows the cause of against the board', () => {
    expect(countedCauses('board')).toEqual(['board', 'unknown'])
    expect(countedCauses('fitting')).toEqual(['fitting'])
    expect(countedCauses('all')).toHaveLength(6)
  })
  it('takes measured and code-read for established', () => {
    expect(observationFilters(read('evidence=established').filters).evidence).toEqual(['measured', 'code-read'])
    expect(observationFilters(read('evidence=none').filters).evidence).toEqual(['none'])
  })
})
