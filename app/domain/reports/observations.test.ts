import { describe, expect, it } from 'vitest'
import { kaplanMeier } from '~/domain/survival/kaplan-meier'
import { columnsOf } from '~/domain/survival/columns'
import { tallyOf } from '~/domain/survival/tally'
import { allReports, countsAgainstBoard, observationOf, type LifeHistory } from './observations'

const all = allReports
const asOf = '2026-12-01'

/** Fitted 2025-01-01, filed the day after, nothing said since. */
const life = (change: Partial<LifeHistory> = {}): LifeHistory => ({
  reportId: 'r',
  releaseId: 'v',
  revisionId: 'c',
  batchId: null,
  method: null,
  evidence: 'measured',
  firstPower: 'works',
  installedOn: '2025-01-01',
  filedOn: '2025-01-02',
  exclusion: null,
  statements: [],
  failure: null,
  ...change
})
const said = (statement: 'running' | 'parted', statedOn: string, filedOn = statedOn) => ({ statement, statedOn, filedOn })
const failed = (foundOn: string, lastRunningOn: string | null = null, filedOn = foundOn) =>
  ({ foundOn, lastRunningOn, cause: 'board', filedOn }) as const
const observe = (change: Partial<LifeHistory>, on = asOf, filters = all) => observationOf(life(change), on, filters)

describe('rule 1: a unit that never worked fails on day 0', () => {
  for (const firstPower of ['partly', 'no-change', 'worse'] as const)
    it(`${firstPower} at first power`, () => {
      expect(observe({ firstPower, failure: failed('2025-01-01', null, '2025-01-02') })).toEqual({
        kind: 'observed',
        entry: 0,
        time: 0,
        cause: 'board',
        interval: null,
        isFirstPowerCounted: true,
        worksAtFirstPower: false
      })
    })
  it('whatever is said of it later, and with an unknown cause where none was stored', () => {
    expect(observe({ firstPower: 'worse', statements: [said('running', '2026-01-01')] })).toMatchObject({
      time: 0,
      cause: 'unknown'
    })
  })
  it('a unit that worked and died the same evening fails on day 0 too, but worked at first power', () => {
    expect(observe({ failure: failed('2025-01-01', null, '2025-01-02') })).toMatchObject({
      time: 0,
      cause: 'board',
      worksAtFirstPower: true
    })
  })
})

describe('rule 2: running up to the last statement only', () => {
  it('the report itself is the first statement, on the day it was filed', () => {
    expect(observe({ filedOn: '2025-01-11' })).toMatchObject({ entry: 0, time: 10, cause: null })
  })
  it('is censored at the latest check-in, in whatever order they are stored', () => {
    const statements = [said('running', '2026-01-01'), said('running', '2025-06-01')]
    expect(observe({ statements })).toMatchObject({ time: 365, cause: null })
  })
  it('leaves on the day it was parted with', () => {
    expect(observe({ statements: [said('running', '2025-02-01'), said('parted', '2025-03-02')] })).toMatchObject({
      time: 60,
      cause: null
    })
  })
  it('a filing day before the installation (another zone) counts as day 0', () => {
    expect(observe({ filedOn: '2024-12-31' })).toMatchObject({ entry: 0, time: 0, cause: null })
  })
})

describe('rule 3: late reports', () => {
  it('filed on day 14 enters on day 0, filed on day 15 enters on day 15', () => {
    const statements = [said('running', '2025-07-01')]
    expect(observe({ filedOn: '2025-01-15', statements })).toMatchObject({ entry: 0, time: 181, isFirstPowerCounted: true })
    expect(observe({ filedOn: '2025-01-16', statements })).toMatchObject({ entry: 15, time: 181, isFirstPowerCounted: false })
  })
  it('a failure before its own late report is listed and stays out, on the filing day as well', () => {
    for (const foundOn of ['2025-03-01', '2025-06-01'])
      expect(observe({ filedOn: '2025-06-01', failure: failed(foundOn, null, '2025-06-02') })).toEqual({
        kind: 'failed-before-registration',
        cause: 'board'
      })
  })
  it('so does a unit that never worked and was reported late', () => {
    expect(observe({ firstPower: 'no-change', filedOn: '2025-06-01' })).toEqual({
      kind: 'failed-before-registration',
      cause: 'unknown'
    })
  })
  it('filed late and silent since was never at risk', () => {
    expect(observe({ filedOn: '2025-06-01' })).toEqual({ kind: 'not-followed' })
    expect(observe({ filedOn: '2025-06-01', statements: [said('running', '2025-05-01', '2025-06-02')] })).toEqual({
      kind: 'not-followed'
    })
  })
  it('a failure before a report filed in time is an ordinary failure', () => {
    expect(observe({ filedOn: '2025-01-13', failure: failed('2025-01-06', null, '2025-01-13') })).toMatchObject({
      entry: 0,
      time: 5,
      cause: 'board'
    })
  })
  it('filed late, failed afterwards: at risk from the filing day, and running on it', () => {
    expect(observe({ filedOn: '2025-06-01', failure: failed('2025-06-10') })).toMatchObject({
      entry: 151,
      time: 160,
      interval: null
    })
    expect(observe({ filedOn: '2025-06-01', failure: failed('2025-08-01') })).toMatchObject({
      entry: 151,
      time: 212,
      interval: { lower: 151, upper: 212 }
    })
  })
})

describe('rule 4: failures found at a check-in', () => {
  const statements = [said('running', '2025-04-01')]
  it('known to within 14 days is exact at the upper end', () => {
    expect(observe({ statements, failure: failed('2025-04-15') })).toMatchObject({ time: 104, interval: null })
  })
  it('15 days apart keeps both ends', () => {
    expect(observe({ statements, failure: failed('2025-04-16') })).toMatchObject({
      time: 105,
      interval: { lower: 90, upper: 105 }
    })
  })
  it('the last working day that its owner names narrows it', () => {
    expect(observe({ statements, failure: failed('2025-10-01', '2025-09-25') })).toMatchObject({ time: 273, interval: null })
    expect(observe({ statements, failure: failed('2025-10-01', '2025-05-01') })).toMatchObject({
      interval: { lower: 120, upper: 273 }
    })
  })
  it('without a check-in or a named day it lies after the filing day', () => {
    expect(observe({ failure: failed('2025-10-01') })).toMatchObject({ time: 273, interval: { lower: 1, upper: 273 } })
  })
  it('a check-in later than the day found does not move the lower end past it', () => {
    expect(observe({ filedOn: '2025-01-13', failure: failed('2025-01-06', null, '2025-01-13') })).toMatchObject({
      time: 5,
      interval: null
    })
  })
})

describe('rule 5: causes', () => {
  it('go along with the failure', () => {
    const failure = { ...failed('2025-01-20'), cause: 'accident' } as const
    expect(observe({ failure, statements: [said('running', '2025-01-19')] })).toMatchObject({ time: 19, cause: 'accident' })
  })
  it('unknown counts against the board, as the board itself does and nothing else', () => {
    const against = (['board', 'fitting', 'other-fault', 'wrong-diagnosis', 'accident', 'unknown'] as const).filter(
      countsAgainstBoard
    )
    expect(against).toEqual(['board', 'unknown'])
  })
})

describe('rule 6 and exclusions', () => {
  const exclusion = { kind: 'duplicate', on: '2025-05-01' } as const
  it('an excluded report is out, with its kind, whatever its history', () => {
    expect(observe({ exclusion, failure: failed('2025-03-01') })).toEqual({ kind: 'excluded', exclusion: 'duplicate' })
  })
  it('and counts in figures as of a day before its exclusion', () => {
    expect(observe({ exclusion }, '2025-04-30')).toMatchObject({ kind: 'observed' })
    expect(observe({ exclusion }, '2025-05-01')).toMatchObject({ kind: 'excluded' })
  })
  it('an excluded report outside the filter is not counted among the excluded', () => {
    expect(observe({ exclusion }, asOf, { ...all, evidence: ['code-read'] })).toEqual({ kind: 'filtered' })
  })
})

describe('rule 8: as of a day', () => {
  it('a report filed later is not known yet', () => {
    expect(observe({}, '2025-01-01')).toEqual({ kind: 'not-yet' })
  })
  it('what was filed later is not known yet even when it tells of an earlier day', () => {
    const change = {
      statements: [said('running', '2025-03-01', '2025-09-01')],
      failure: failed('2025-04-01', null, '2025-09-01')
    }
    expect(observe(change, '2025-08-31')).toMatchObject({ time: 1, cause: null })
    expect(observe(change, '2025-09-01')).toMatchObject({ time: 90, cause: 'board' })
  })
})

describe('filters', () => {
  it('keeps the evidence grades asked for', () => {
    expect(observe({}, asOf, { ...all, evidence: ['measured', 'code-read'] })).toMatchObject({ kind: 'observed' })
    expect(observe({ evidence: 'none' }, asOf, { ...all, evidence: ['measured', 'code-read'] })).toEqual({ kind: 'filtered' })
  })
  it('can set aside what did not work at first power', () => {
    expect(observe({ firstPower: 'partly' }, asOf, { ...all, worksAtFirstPowerOnly: true })).toEqual({ kind: 'filtered' })
  })
})

describe('the rules together', () => {
  it('six lives give the curve worked out by hand', () => {
    // Days: A fails at 0; B censored 10; C fails 20 (exact); D late from 15, censored 30; E late, failed before registration; F excluded.
    const lives: Partial<LifeHistory>[] = [
      { firstPower: 'worse', failure: failed('2025-01-01', null, '2025-01-02') },
      { statements: [said('running', '2025-01-11')] },
      { statements: [said('running', '2025-01-12')], failure: failed('2025-01-21') },
      { filedOn: '2025-01-16', statements: [said('running', '2025-01-31')] },
      { filedOn: '2025-02-01', failure: failed('2025-01-20', null, '2025-02-01') },
      { exclusion: { kind: 'other-board', on: '2025-02-01' } }
    ]
    const observed = lives.map((l) => observe(l)).filter((o) => o.kind === 'observed')
    const curve = kaplanMeier(
      tallyOf(columnsOf(observed.map((o) => ({ entry: o.entry, time: o.time, event: o.cause === null ? 0 : 1 }))))
    )
    expect([...curve.time]).toEqual([0, 10, 20, 30])
    // At 20 are at risk: C (since 0) and D (since 15). S = 2/3 * 1/2.
    expect([...curve.atRisk]).toEqual([3, 2, 2, 1])
    expect([...curve.survival].map((s) => s.toFixed(12))).toEqual([2 / 3, 2 / 3, 1 / 3, 1 / 3].map((s) => s.toFixed(12)))
  })
})
