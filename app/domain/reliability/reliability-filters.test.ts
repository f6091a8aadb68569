import { describe, expect, it } from 'vitest'
import { filtersQuery, observationFilters, readFilters, unknownNames } from './reliability-filters'

const today = '2026-12-01'
const read = (query: string) => readFilters(new URLSearchParams(query), today)

describe('readFilters', () => {
  it('stands at the defaults, as of today', () => {
    for (const query of ['', 'release=&revision=all&evidence=&as-of='])
      expect(read(query)).toEqual({
        filters: { release: null, revision: null, evidence: 'any', firstPower: 'counted', asOf: today },
        errors: []
      })
  })
  it('reads each filter, and its query gives the same again', () => {
    const query = 'release=1.1.0-beta.2&revision=TM-3&evidence=established&first-power=set-aside&as-of=2025-06-30'
    const { filters, errors } = read(query)
    expect(errors).toEqual([])
    expect(filters).toEqual({
      release: '1.1.0-beta.2',
      revision: 'TM-3',
      evidence: 'established',
      firstPower: 'set-aside',
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
    [`release=${'9'.repeat(65)}`, 'release']
  ])('refuses %s', (query, path) => {
    expect(read(query).errors.map((e) => e.path)).toEqual([path])
  })
  it('names what the board does not have', () => {
    const { filters } = read('release=9.9.9&revision=ZZ-1')
    expect(unknownNames(filters, ['1.0.0'], ['TM-1']).map((e) => e.path)).toEqual(['release', 'revision'])
    expect(unknownNames(read('release=1.0.0&revision=TM-1').filters, ['1.0.0'], ['TM-1'])).toEqual([])
  })
  it('takes measured and code-read for established', () => {
    expect(observationFilters(read('evidence=established').filters).evidence).toEqual(['measured', 'code-read'])
    expect(observationFilters(read('evidence=none').filters).evidence).toEqual(['none'])
  })
})
