import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { arbitraryLives, livesAsOf } from '../../../tests/support/arbitrary-lives'
import { DomainError } from '~/lib/domain-error'
import { countCells } from './count-cells'
import { noCounts } from './group-counts'
import { filtersFor, reliabilityCsv, reliabilityJson, reliabilityTables, tableAsked } from './reliability-export'
import { reliabilityFigures } from './reliability-figures'
import { readFilters } from './reliability-filters'

/** Two hundred lives, always the same, with every table filled. */
const lives = fc.sample(arbitraryLives(200, 200), { numRuns: 1, seed: 4 })[0]!

function figuresUnder(query: string) {
  const { filters } = readFilters(new URLSearchParams(query), livesAsOf)
  const batches = ['a', 'b', 'c'].map((code) => ({
    ...{ id: code, releaseId: 'v1', version: '1.0.0', code, madeOn: '2024-01-01', quantity: 100 },
    counts: { ...noCounts(), lives: null }
  }))
  const cells = countCells(lives, filters, null, batches)
  const named = (names: Record<string, string>) => Object.entries(names).map(([id, name]) => ({ id, name }))
  return reliabilityFigures({
    filters,
    cells,
    grain: 1,
    batches,
    revisions: named({ 'tm-1': 'TM-1', 'tm-2': 'TM-2', 'tm-3': 'TM-3' }),
    releases: named({ v1: '1.0.0', v2: '1.1.0' })
  })
}

const figures = figuresUnder('silent=bounds')
const csvRows = (table: (typeof reliabilityTables)[number], of = figures) =>
  reliabilityCsv('buttress', of, table)
    .trimEnd()
    .split('\r\n')
    .map((line) => line.split(','))
const columns = (table: (typeof reliabilityTables)[number]) => {
  const [head, ...rows] = csvRows(table)
  return rows.map((row) => Object.fromEntries(head!.map((name, i) => [name, row[i]!])))
}

describe('a table as CSV', () => {
  it.each(reliabilityTables)('%s has rows as wide as its head, each naming board, day and filters', (table) => {
    const [head, ...rows] = csvRows(table)
    expect(rows.length).toBeGreaterThan(0)
    expect(new Set(head).size).toBe(head!.length)
    for (const row of rows) {
      expect(row).toHaveLength(head!.length)
      expect([...row.slice(0, 2), row.at(-1)]).toEqual(['buttress', livesAsOf, 'silent=bounds'])
      expect(row.join()).not.toMatch(/NaN|Infinity|undefined|null/)
    }
  })

  it('keeps the columns of the curve first', () => {
    expect(csvRows('curve')[0]!.join()).toBe(
      'board,as_of,by,group,day,at_risk,events,censored,survival,standard_error,lower,upper,bound,estimator,filters'
    )
  })

  it('has the figures themselves', () => {
    const all = columns('groups').find(({ group }) => group === 'all')!
    expect(Number(all.n)).toBe(figures.all.n)
    expect(Number(all.one_year_lower)).toBe(figures.all.atOneYear.lower)
    expect(Number(all.mean_days_in_year)).toBe(figures.all.meanInYear.estimate)
    expect(Number(all.failures_wrong_diagnosis)).toBe(figures.all.failuresByCause['wrong-diagnosis'])
    expect(Number(all.follow_up)).toBe(figures.all.followUp!.ratio)
    const masses = columns('support').filter(({ group }) => group === 'all')
    expect(masses.reduce((sum, { mass }) => sum + Number(mass), 0)).toBeCloseTo(1, 5)
    const pairs = columns('comparison').filter(({ by, first }) => by === 'revision' && first !== 'all')
    expect(pairs.map(({ first, second }) => [first, second])).toEqual([
      ['TM-1', 'TM-2'],
      ['TM-1', 'TM-3'],
      ['TM-2', 'TM-3']
    ])
    expect(Number(pairs[0]!.adjusted_p)).toBe(figures.revisions!.pairs[0]!.logRank!.adjustedP)
    expect(
      columns('batches')
        .map(({ code }) => code)
        .sort()
    ).toEqual(['a', 'b', 'c'])
    expect(new Set(columns('incidence').map(({ cause }) => cause))).toEqual(new Set(figures.all.incidence.map((i) => i.cause)))
  })

  it('names the filters that made it', () => {
    const [, row] = csvRows('curve', figuresUnder('cause=board&since=2024-03-01'))
    expect(row!.at(-1)).toBe('cause=board&since=2024-03-01')
  })

  it('of silent units asks for their bounds, of anything else as the address does', () => {
    const { filters } = readFilters(new URLSearchParams(), livesAsOf)
    expect(filtersFor('silent', filters).silent).toBe('bounds')
    expect(filtersFor('silent-curve', filters).silent).toBe('bounds')
    expect(filtersFor('curve', filters)).toBe(filters)
  })

  it('is the curve unless another is named; there is no other than these', () => {
    const asked = (query: string) => tableAsked(new URLSearchParams(query))
    expect(['', 'table=', 'table=batches'].map(asked)).toEqual(['curve', 'curve', 'batches'])
    for (const query of ['table=everything', 'table=toString']) expect(() => asked(query)).toThrow(DomainError)
  })
})

describe('the figures as JSON', () => {
  const json = reliabilityJson('buttress', figures)
  it('are whole: they come back from their text as they were', () => {
    expect(JSON.parse(JSON.stringify(json))).toEqual(json)
  })
  it('have the group objects of METHODS', () => {
    const all = json.groups[0]!
    expect(all).toMatchObject({ by: 'all', group: 'all', method: 'turnbull', n: figures.all.n, rmst: { tau: 365 } })
    expect(Object.keys(all)).toEqual(
      expect.arrayContaining(['curve', 'median', 'rmst', 'hazard', 'weibull', 'support', 'incidence', 'silent', 'followUp'])
    )
    expect(all.weibull).toMatchObject({ shape: figures.all.shape!.estimate, b10: figures.all.shape!.b10 })
    expect(json.groups.map(({ by, group }) => `${by} ${group}`)).toEqual([
      'all all',
      'revision TM-1',
      'revision TM-2',
      'revision TM-3',
      'release 1.0.0',
      'release 1.1.0'
    ])
    expect(json.comparisons.map(({ by }) => by)).toEqual(['revision', 'release'])
    expect(json.batches.total).toBe(3)
  })
  it('leave out what was not asked for', () => {
    const board = reliabilityJson('buttress', figuresUnder('cause=board')).groups[0]!
    expect(board).not.toHaveProperty('incidence')
    expect(board).not.toHaveProperty('silent')
  })
})
