import { describe, expect, it } from 'vitest'
import { causes, type Cause } from '../reports/report-words'
import { comparison } from './comparison'
import { columnsOfCounts, tallyOfCounts } from './counts-tally'
import { addDay, type Counter, type DayCounts } from './group-counts'

const days = (...counts: [Counter, number, number][]): DayCounts => {
  const of: DayCounts = new Map()
  for (const [counter, day, count] of counts) {
    addDay(of, counter, day, count)
    if (counter.startsWith('failed:')) addDay(of, counter.replace('failed', 'ran') as Counter, day, count)
  }
  return of
}
type Group = { name: string; n: number; days: DayCounts }
const group = (name: string, of: DayCounts): Group => ({ name, n: of.get('entered')?.get(0) ?? 0, days: of })
function compare(by: 'revision' | 'release', groups: readonly Group[], counted: readonly Cause[]) {
  const columns = columnsOfCounts(groups.map(({ days: of }) => of))
  return comparison(
    by,
    groups.map(({ name, n }, i) => ({ name, n, tally: tallyOfCounts(columns[i]!, counted) }))
  )
}

// The guide's two groups, each unit six times over, so that five are followed.
const old = days(
  ['entered', 0, 24],
  ['failed:board', 20, 6],
  ['failed:unknown', 50, 6],
  ['failed:board', 80, 6],
  ['left', 100, 6]
)
const young = days(['entered', 0, 24], ['failed:board', 60, 6], ['left', 90, 6], ['left', 110, 6], ['left', 120, 6])

describe('comparison', () => {
  it('tests all together and each pair, and has the difference of mean days as far as both are followed', () => {
    const found = compare('revision', [group('old', old), group('new', young)], causes)!
    expect(found).toMatchObject({ by: 'revision', groups: ['old', 'new'], leftOut: [], tooMany: [] })
    const [pair] = found.pairs
    expect(pair!.logRank).toMatchObject({ ...found.logRank, adjustedP: found.logRank!.p })
    // By hand, of 24 each: expected of old 6 * 24/48 + 6 * 18/42 + 6 * 12/36 + 6 * 12/30, variance as d(n-d)/(n-1) * share * (1 - share).
    const steps: [old: number, all: number][] = [
      [24, 48],
      [18, 42],
      [12, 36],
      [12, 30]
    ]
    const expected = steps.reduce((sum, [o, n]) => sum + (6 * o) / n, 0)
    const variance = steps.reduce((sum, [o, n]) => sum + ((6 * (n - 6)) / (n - 1)) * (o / n) * (1 - o / n), 0)
    expect(found.logRank!.chiSquare).toBeCloseTo((18 - expected) ** 2 / variance, 9)
    // Mean days up to 100, as far as six of old were followed: 20 + 30 * 3/4 + 30 * 1/2 + 20 * 1/4, and 60 + 40 * 3/4.
    expect(pair!.meanDifference).toMatchObject({ tau: 100 })
    expect(pair!.meanDifference!.estimate).toBeCloseTo(90 - 62.5, 9)
  })

  it('counts one cause alone where one is asked for', () => {
    const found = compare('release', [group('old', old), group('new', young)], ['unknown'])!
    // Of 12 and 18 still followed on day 50; the others have left on the days they were last known to run.
    expect(found.logRank!.chiSquare).toBeCloseTo((6 - (6 * 18) / 42) ** 2 / (((6 * 36) / 41) * (18 / 42) * (24 / 42)), 9)
    // Nothing of the kind failed in the new ones: there is no spread to give the difference limits.
    expect(found.pairs[0]!.meanDifference).toBeNull()
    const none = compare('release', [group('old', old), group('new', young)], ['accident'])!
    expect([none.logRank, none.pairs[0]!.logRank, none.pairs[0]!.meanDifference]).toEqual([null, null, null])
  })

  it('leaves out and names who was hardly followed', () => {
    const few = days(['entered', 0, 4], ['left', 300, 4])
    const fresh = days(['entered', 0, 90], ['left', 0, 90])
    const late = days(['entered', 500, 90], ['left', 800, 90])
    const found = compare(
      'revision',
      [group('old', old), group('few', few), group('fresh', fresh), group('late', late), group('new', young)],
      causes
    )!
    expect(found.groups).toEqual(['old', 'new'])
    expect(found.leftOut).toEqual(['few', 'fresh', 'late'])
    expect(compare('revision', [group('old', old)], causes)).toBeNull()
    expect(compare('revision', [group('few', few), group('fresh', fresh)], causes)).toMatchObject({
      groups: [],
      pairs: [],
      logRank: null
    })
  })

  it('raises the p of each pair by how many there are, after Holm, and stops at twelve groups', () => {
    const more = Array.from({ length: 15 }, (_, i) =>
      group(`g${i}`, days(['entered', 0, 100 + i], ['failed:board', 30 + i, 10 + 2 * i], ['left', 400, 90 - i]))
    )
    const found = compare('release', more, causes)!
    expect(found.groups).toHaveLength(12)
    expect(found.tooMany).toEqual(['g0', 'g1', 'g2'])
    expect(found.pairs).toHaveLength(66)
    const least = found.pairs.reduce((a, b) => (a.logRank!.p < b.logRank!.p ? a : b)).logRank!
    expect(least.adjustedP).toBeCloseTo(Math.min(1, 66 * least.p), 12)
  })
})
