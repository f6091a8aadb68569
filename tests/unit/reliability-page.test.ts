import { describe, expect, it } from 'vitest'
import type { Comparison, GroupFigures, ReliabilityFigures, ShapeFigures } from '~/domain/reliability/figures.types'
import { columnsOfCounts } from '~/domain/reliability/counts-tally'
import { groupFigures } from '~/domain/reliability/group-figures'
import { addDay, noCounts } from '~/domain/reliability/group-counts'
import { countedCauses, readFilters } from '~/domain/reliability/reliability-filters'
import { causes } from '~/domain/reports/report-words'
import { numbering, type Numbering } from '~/routes/reliability/numbering'
import { pageFigures } from '~/routes/reliability/page-figures'
import { pageOf } from '~/routes/reliability/page-of'
import { shownComparison } from '~/routes/reliability/shown-comparison'

/* What the reliability page makes of its figures before anything is drawn. */

const today = '2026-12-01'

/** A group of which so many ran to day 400, and so many failed by the board on day 100. */
function group(name: string, ran: number, failed: number): GroupFigures {
  const counts = noCounts()
  addDay(counts.days, 'entered', 0, ran + failed)
  addDay(counts.days, 'left', 400, ran)
  addDay(counts.days, 'failed:board', 100, failed)
  addDay(counts.days, 'ran:board', 100, failed)
  Object.assign(counts.totals, { fitted: ran + failed, inCurve: ran + failed, promptly: ran + failed, worked: ran + failed })
  const columns = columnsOfCounts([counts.days])[0]!
  return groupFigures(
    name,
    { columns, totals: counts.totals, lives: null },
    { counted: countedCauses('all'), isOneCause: false, asOf: today },
    null
  )
}

function figures(groups: [name: string, ran: number, failed: number][], change: Partial<ReliabilityFigures> = {}) {
  const { filters } = readFilters(new URLSearchParams(), today)
  const sum = (i: 1 | 2) => groups.reduce((all, one) => all + one[i], 0)
  const made: ReliabilityFigures = {
    filters,
    grain: 1,
    all: group('all', sum(1), sum(2)),
    byRevision: groups.map((one) => group(...one)),
    byRelease: [group('1.0.0', sum(1), sum(2))],
    revisions: null,
    releases: null,
    excluded: [],
    batches: { rows: [], total: 0 },
    ...change
  }
  return made
}
const shownOf = (made: ReliabilityFigures, query = '') => pageFigures(made, new URLSearchParams(query))

const isGapless = (numbers: Numbering[keyof Numbering]) => {
  const given = Object.values(numbers).filter((n) => n !== null)
  expect(given).toEqual(given.map((_, i) => i + 1))
}

describe('the numbers of a page', () => {
  const silent = { silent: 3, heardOf: 9, atOneYear: { worst: 0.6, reported: 0.9, best: 0.95 }, worst: [], best: [] }
  const watch = { observed: 9, expected: 2, ratio: 4.5, lower: 2, upper: 8, isFlagged: true, comparedTo: 400 }
  const batch = {
    batch: '1.0.0/a',
    version: '1.0.0',
    code: 'a',
    madeOn: today,
    quantity: 20,
    n: 20,
    observed: 9,
    others: 60,
    watch
  }
  const comparison: Comparison = { by: 'revision', groups: ['A', 'B'], logRank: null, pairs: [], leftOut: [], tooMany: [] }
  const withSilent = (made: ReliabilityFigures) => ({ ...made, all: { ...made.all, silent } })
  const two: [string, number, number][] = [
    ['A', 20, 3],
    ['B', 12, 1]
  ]
  it.each([
    ['one revision', figures([['A', 20, 3]])],
    ['hardly anybody', figures([['A', 3, 0]])],
    ['nothing failed', figures([['A', 20, 0]])],
    ['two revisions', figures(two, { revisions: comparison })],
    ['two releases', figures(two, { byRelease: [group('1.0.0', 20, 2), group('1.1.0', 9, 0)] })],
    ['a flagged batch', figures(two, { batches: { rows: [batch], total: 1 } })],
    ['the silent', withSilent(figures(two))]
  ])('leave no gap: %s', (_what, made) => {
    const numbers = numbering(shownOf(made))
    isGapless(numbers.sections)
    isGapless(numbers.figures)
    isGapless(numbers.tables)
  })
  it('are only of what is there', () => {
    const few = numbering(shownOf(figures([['A', 3, 0]])))
    expect(few.sections).toMatchObject({ revisions: 1, curves: 2, strips: null, releases: null, comparison: null, ageing: null })
    expect(Object.values(few.figures)).toEqual([null, null, null, null, null])
    const many = numbering(shownOf(withSilent(figures(two, { revisions: comparison, batches: { rows: [batch], total: 1 } }))))
    expect(many.sections).toMatchObject({ strips: 3, comparison: 5, followUp: 7, batches: 8, apart: 9, steps: 10 })
    expect(many.figures).toMatchObject({ curves: 1, strips: 2, releases: null, causes: 3, silent: 4 })
    expect(many.tables).toMatchObject({ comparedRevisions: 3, comparedReleases: null })
  })
  it('leave batches out where none was asked for and none stands out', () => {
    const sound = { ...batch, watch: { ...watch, isFlagged: false } }
    const made = figures(two, { batches: { rows: [sound], total: 1 } })
    expect(shownOf(made).batches).toBeNull()
    expect(shownOf({ ...made, filters: { ...made.filters, release: '1.0.0' } }).batches).toMatchObject({
      rows: [sound],
      total: 1
    })
  })
})

describe('what a page shows', () => {
  it('marks the revision with the most units, or the one asked for, with three beside it at most', () => {
    const made = figures([
      ['A', 5, 0],
      ['B', 30, 1],
      ['C', 9, 0],
      ['D', 8, 0],
      ['E', 7, 0]
    ])
    expect(shownOf(made)).toMatchObject({ marked: 'B', beside: ['C', 'D', 'E'] })
    expect(shownOf(made, 'mark=A&beside=B&beside=A&beside=Z')).toMatchObject({ marked: 'A', beside: ['B'] })
    expect(shownOf(made, 'mark=Z')).toMatchObject({ marked: 'B', beside: [] })
  })
  it('reads causes as far as five are followed, and after a year only where five are', () => {
    const { rows, until } = shownOf(figures([['A', 20, 5]])).causes
    expect(until).toBe(400)
    expect(rows).toHaveLength(1)
    // 5 of 25 failed and nobody left before: a fifth, all along
    expect(rows[0]).toMatchObject({ name: 'The board', failures: 5 })
    expect(rows[0]!.atOneYear!.estimate).toBeCloseTo(0.2, 12)
    expect(rows[0]!.last).toMatchObject({ time: 400, atRisk: 20 })
    expect(shownOf(figures([['A', 3, 1]])).causes.rows[0]).toMatchObject({ atOneYear: null, last: null, points: [] })
    expect(causes.length).toBeGreaterThan(1)
  })
  it('states the exact bound for a cause without a failure in the first year', () => {
    const made = figures([['A', 20, 5]])
    const late = made.all.incidence.map((one) => ({ ...one, curve: one.curve.map((row) => ({ ...row, time: 390 })) }))
    const { rows } = shownOf({ ...made, all: { ...made.all, incidence: late } }).causes
    // the 20 still followed after a year: 1 - 0.05^(1/20) = 0.139…
    expect(rows[0]!.atOneYear).toMatchObject({ estimate: 0, bound: 'exact-one-sided' })
    expect(rows[0]!.atOneYear!.upper).toBeCloseTo(0.1391, 4)
  })
  it('lists no shape where fewer than five have failed in each', () => {
    const made = figures([['A', 20, 4]])
    const withFailures = (failures: number) => ({ ...made, all: { ...made.all, shape: { failures } as ShapeFigures } })
    expect(shownOf(withFailures(4)).shapes).toEqual([])
    expect(shownOf(withFailures(5)).shapes).toEqual([{ group: 'all', shape: { failures: 5 } }])
  })
  it('sends no curve, hazard or mass of all together along with the page', () => {
    const { all } = shownOf(figures([['A', 20, 3]]))
    for (const heavy of ['curve', 'hazard', 'support', 'incidence']) expect(all).not.toHaveProperty(heavy)
  })
})

it('pages: nonsense leads to the first, too far to the last', () => {
  const rows = [1, 2, 3, 4, 5]
  for (const asked of [null, '', 'x', '0', '-3', '1.9']) expect(pageOf(rows, asked, 2)).toMatchObject({ rows: [1, 2], page: 1 })
  for (const asked of ['3', '99', '1e9']) expect(pageOf(rows, asked, 2)).toMatchObject({ rows: [5], page: 3, total: 5 })
  expect(pageOf([], '4', 2)).toEqual({ rows: [], page: 1, total: 0 })
})

describe('a comparison seen from one group', () => {
  const pair = (first: string, second: string, estimate: number) => ({
    first,
    second,
    logRank: null,
    meanDifference: { tau: 365, estimate, standardError: 2, lower: estimate - 4, upper: estimate + 4, z: estimate / 2, p: 0.5 }
  })
  const made: Comparison = {
    by: 'revision',
    groups: ['A', 'B', 'C'],
    logRank: null,
    pairs: [pair('A', 'B', 3), pair('A', 'C', -5), pair('B', 'C', -8)],
    leftOut: [],
    tooMany: []
  }
  it('turns each pair so that the other has the days more or less', () => {
    const { reference, beside, others } = shownComparison(made, 'B')!
    expect(reference).toBe('B')
    expect(beside.map((p) => [p.second, p.meanDifference!.estimate, p.meanDifference!.lower, p.meanDifference!.upper])).toEqual([
      ['A', -3, -7, 1],
      ['C', -8, -12, -4]
    ])
    expect(beside[0]!.meanDifference!.z).toBe(-1.5)
    expect(others).toEqual([made.pairs[1]])
  })
  it('takes the first where the wanted one is not compared, and none of fewer than two', () => {
    expect(shownComparison(made, 'Z')!.reference).toBe('A')
    expect(shownComparison({ ...made, groups: ['A'] }, 'A')).toBeNull()
    expect(shownComparison(null, 'A')).toBeNull()
  })
})
