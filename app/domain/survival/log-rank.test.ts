import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { expectClose, reference, referencesWith, type Reference } from '../../../tests/support/survival-reference'
import { columnsOf, splitColumns } from './columns'
import { logRank } from './log-rank'
import type { TimedObservation } from './observation'
import { tallyOf } from './tally'

type Row = TimedObservation & { group: string; stratum?: string }

/** Tallies by stratum and group, both sorted by name. */
function strataOf(rows: Row[]) {
  const groups = [...new Set(rows.map((row) => row.group))].sort()
  const strata = [...new Set(rows.map((row) => row.stratum ?? ''))].sort()
  const cell = rows.map((row) => strata.indexOf(row.stratum ?? '') * groups.length + groups.indexOf(row.group))
  const tallies = splitColumns(columnsOf(rows), cell, strata.length * groups.length).map(tallyOf)
  return strata.map((_, s) => tallies.slice(s * groups.length, (s + 1) * groups.length))
}

const testOf = (rows: Row[]) => logRank(strataOf(rows))

describe('worked by hand', () => {
  const rows: Row[] = [
    { group: 'a', time: 1, event: 1 },
    { group: 'a', time: 3, event: 0 },
    { group: 'b', time: 2, event: 1 },
    { group: 'b', time: 4, event: 0 }
  ]

  test('two failures: risk sets 2 + 2, then 1 + 2', () => {
    const result = testOf(rows)!
    expectClose(result.expected, [1 / 2 + 1 / 3, 1 / 2 + 2 / 3], 1e-15, 'expected')
    const variance = 1 / 4 + 2 / 9
    expectClose(result.variance.flat(), [variance, -variance, -variance, variance], 1e-15, 'variance')
    expect(result.chiSquare).toBeCloseTo((1 / 6) ** 2 / variance, 14)
    expect(result.degreesOfFreedom).toBe(1)
  })

  test('a late entry is not at risk before', () => {
    const late = testOf([...rows, { group: 'a', entry: 1, time: 4, event: 0 }])!
    expectClose(late.expected, [1 / 2 + 2 / 4, 1 / 2 + 2 / 4], 1e-15, 'expected')
  })

  test('nothing to test', () => {
    expect(testOf([])).toBeNull()
    expect(testOf(rows.filter(({ group }) => group === 'a'))).toBeNull()
    expect(testOf(rows.map((row) => ({ ...row, event: 0 })))).toBeNull()
    // Each failure finds its own group alone at risk.
    expect(
      testOf([
        { group: 'a', time: 1, event: 1 },
        { group: 'b', entry: 1, time: 2, event: 1 }
      ])
    ).toBeNull()
  })

  test('strata with other groups are refused', () => {
    const [first] = strataOf(rows)
    expect(() => logRank([first!, first!.slice(1)])).toThrow(RangeError)
  })
})

type Case = { name: string; rows: Row[]; expected: Reference }

function cases(): Case[] {
  return referencesWith('log_rank').flatMap((name) => {
    const { data, results } = reference(name)
    if (name.startsWith('odd-cases'))
      return Object.entries<Reference>(results.log_rank).map(([odd, expected]) => ({
        name: odd,
        rows: rowsOf(expected.input, 'group'),
        expected
      }))
    const blocks: [string, Reference, string][] = [['', results.log_rank, 'group']]
    if (results.two_sample_treatment) blocks.push(['treatment ', results.two_sample_treatment.log_rank, 'treatment'])
    return blocks.flatMap(([label, block, column]) =>
      Object.entries<Reference>(block)
        .filter(([kind]) => kind !== 'peto_peto_rho1')
        .map(([kind, expected]) => ({
          name: `${name} ${label}${kind}`,
          rows: rowsOf(data, column, kind.replace(/^stratified_by_|^unstratified$/, '').replace('celltype', 'group')),
          expected
        }))
    )
  })
}

const rowsOf = (data: Reference, group: string, stratum = ''): Row[] =>
  data.time.map((time: number, i: number) => ({
    time,
    event: data.event[i],
    group: data[group][i],
    stratum: stratum && String(data[stratum][i])
  }))

describe("R's survdiff on published data sets (tests/fixtures/survival, 1e-12)", () => {
  test('there are some', () => expect(cases().length).toBeGreaterThan(10))
  test.each(cases())('$name', ({ rows, expected }) => {
    const result = testOf(rows)!
    expectClose(result.observed, expected.observed, 1e-12, 'observed')
    expectClose(result.expected, expected.expected, 1e-12, 'expected')
    result.variance.forEach((row, g) => expectClose(row, expected.variance[g], 1e-12, 'variance'))
    expectClose([result.chiSquare, result.degreesOfFreedom, result.p], [expected.chisq, expected.df, expected.p], 1e-11, 'test')
    if (expected.p < 1e-3) expect(Math.abs(result.p / expected.p - 1)).toBeLessThan(1e-10)
  })
})

const row = fc.record({
  group: fc.constantFrom('a', 'b', 'c'),
  stratum: fc.constantFrom('x', 'y'),
  entry: fc.integer({ min: 0, max: 20 }),
  length: fc.integer({ min: 1, max: 30 }),
  event: fc.constantFrom(0, 1)
})
const rows = fc.array(
  row.map(({ length, ...rest }): Row => ({ ...rest, time: rest.entry + length })),
  { minLength: 2, maxLength: 60 }
)

test('splitting records with delayed entry changes nothing', () => {
  fc.assert(
    fc.property(rows, fc.integer({ min: 1, max: 50 }), (all, cut) => {
      const split = all.flatMap((one) =>
        one.entry! < cut && cut < one.time
          ? [
              { ...one, time: cut, event: 0 },
              { ...one, entry: cut }
            ]
          : [one]
      )
      expect(testOf(split)).toEqual(testOf(all))
    })
  )
})

test('observed, expected and variance of strata add up', () => {
  fc.assert(
    fc.property(rows, (all) => {
      const [x, y] = ['x', 'y'].map((stratum) => testOf(all.filter((one) => one.stratum === stratum)))
      const both = testOf(all)
      if (!x || !y || !both || x.observed.length < 3 || y.observed.length < 3) return
      expectClose(
        both.expected,
        x.expected.map((e, g) => e + y.expected[g]!),
        1e-12,
        'expected'
      )
      expectClose(
        both.variance.flat(),
        x.variance.flat().map((v, i) => v + y.variance.flat()[i]!),
        1e-12,
        'variance'
      )
    })
  )
})
