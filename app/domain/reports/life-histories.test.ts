import fc from 'fast-check'
import { describe, expect, it, test } from 'vitest'
import { addDays, type Day } from '~/lib/dates'
import { lifeOf, outcomeText } from '../../../tests/factories/life-history'
import { columnsOf } from '../survival/columns'
import { kaplanMeier } from '../survival/kaplan-meier'
import { checkObservations } from '../survival/observation'
import { tallyOf } from '../survival/tally'
import { allReports, observationOf, promptDays, type LifeHistory } from './observations'
import { causes, exclusionKinds, firstPowerResults } from './report-words'

const all = allReports
const asOf = '2026-12-01'
const observe = (life: LifeHistory, on: Day = asOf) => observationOf(life, on, all)

/* Written-out lives of single units: dates in, days out. Day 31 is 2025-02-01, day 59 2025-03-01, day 90 2025-04-01, day 181 2025-07-01. */
const fitted = 'fitted 2025-01-01'
const inTime = `${fitted}; filed 2025-01-02: works`
const late = `${fitted}; filed 2025-03-01: works`

describe('each rule once', () => {
  test.each([
    ['silent since its report', inTime, '0 to 1, running'],
    ['heard of once more', `${inTime}; ran 2025-07-01`, '0 to 181, running'],
    ['late registration', `${late}; ran 2025-07-01`, '59 to 181, running'],
    ['late registration, silent since', late, 'not-followed'],
    ['failure before registration', `${late}; failed 2025-02-01 fitting, told 2025-03-01`, 'apart: fitting'],
    ['first-power failure', `${fitted}; filed 2025-01-02: worse; failed 2025-01-01 fitting, told 2025-01-02`, '0 to 0, fitting'],
    ['failure on the day after a check-in', `${inTime}; ran 2025-07-01; failed 2025-07-02 board`, '0 to 182, board'],
    ['failure found at a check-in', `${inTime}; ran 2025-04-01; failed 2025-07-01 board`, '0 to 181, board after 90'],
    ['failure of which nobody knows the cause', `${inTime}; failed 2025-01-10 unknown`, '0 to 9, unknown'],
    ['parted', `${inTime}; ran 2025-02-01; parted 2025-03-01`, '0 to 59, running'],
    ['excluded', `${inTime}; ran 2025-07-01; excluded 2025-08-01 duplicate`, 'excluded: duplicate'],
    ['filed after the as-of day', `${fitted}; filed 2026-12-02: works`, 'not-yet'],
    ['fitted tomorrow, in a zone where it is that day', 'fitted 2026-12-02; filed 2026-12-01: works', '0 to 0, running']
  ])('%s', (_what, history, expected) => {
    expect(outcomeText(observe(lifeOf(history)))).toBe(expected)
  })
})

describe('late registration with the other rules', () => {
  test.each([
    [
      'a failure whose last running lies before the entry: it ran on the day it was filed',
      `${late}; failed 2025-07-01 board, last ran 2025-02-01`,
      '59 to 181, board after 59'
    ],
    [
      'a check-in that tells of a day before the entry moves nothing',
      `${late}; ran 2025-02-01, told 2025-03-05; failed 2025-07-01 board`,
      '59 to 181, board after 59'
    ],
    ['found within two weeks of its filing: exact', `${late}; failed 2025-03-15 board`, '59 to 73, board'],
    ['found a day later than that: both ends', `${late}; failed 2025-03-16 board`, '59 to 74, board after 59'],
    ['failed on the day it was filed', `${late}; failed 2025-03-01 board`, 'apart: board'],
    [
      'failed before it was filed, told at a check-in long after',
      `${late}; failed 2025-02-01 board, told 2025-09-01`,
      'apart: board'
    ],
    ['never worked', `${fitted}; filed 2025-03-01: no-change; failed 2025-01-01 wrong-diagnosis`, 'apart: wrong-diagnosis'],
    ['parted after it was filed', `${late}; parted 2025-07-01`, '59 to 181, running'],
    ['parted on the day it was filed', `${late}; parted 2025-03-01`, 'not-followed'],
    ['parted before it was filed', `${late}; parted 2025-02-01, told 2025-03-02`, 'not-followed'],
    [
      'failed before it was filed, and excluded',
      `${late}; failed 2025-02-01 board; excluded 2025-08-01 other-board`,
      'excluded: other-board'
    ]
  ])('%s', (_what, history, expected) => {
    expect(outcomeText(observe(lifeOf(history)))).toBe(expected)
  })
})

describe('parted with the other rules', () => {
  test.each([
    [
      'a failure found after it was parted with is not followed',
      `${inTime}; parted 2025-03-01; failed 2025-07-01 board`,
      59,
      null
    ],
    [
      'also when its last running day is named',
      `${inTime}; parted 2025-03-01; failed 2025-03-05 board, last ran 2025-03-04`,
      59,
      null
    ],
    [
      'a failure found the day before counts',
      `${inTime}; failed 2025-02-28 board, last ran 2025-02-27; parted 2025-03-01`,
      58,
      'board'
    ],
    [
      'a failure found on that very day counts',
      `${inTime}; failed 2025-03-01 board, last ran 2025-02-27; parted 2025-03-01`,
      59,
      'board'
    ],
    ['somebody says it ran afterwards', `${inTime}; parted 2025-03-01; ran 2025-07-01`, 59, null],
    [
      'parted before its report was filed in time',
      `${fitted}; filed 2025-01-11: works; parted 2025-01-06, told 2025-01-12`,
      5,
      null
    ],
    ['told twice: the first day', `${inTime}; parted 2025-03-10; parted 2025-03-01`, 59, null],
    ['parted on the day it was fitted', `${inTime}; parted 2025-01-01`, 0, null]
  ])('%s', (_what, history, time, cause) => {
    expect(observe(lifeOf(history))).toMatchObject({ entry: 0, time, cause, interval: null })
  })

  it('a parting that is told later does not undo a failure known on an earlier day', () => {
    const life = lifeOf(`${inTime}; failed 2025-07-01 board, last ran 2025-06-30; parted 2025-03-01, told 2025-09-01`)
    expect(outcomeText(observe(life, '2025-08-31'))).toBe('0 to 181, board')
    expect(outcomeText(observe(life, '2025-09-01'))).toBe('0 to 59, running')
  })
})

describe('first power with the other rules', () => {
  const never = `${fitted}; filed 2025-01-02: no-change; failed 2025-01-01 wrong-diagnosis, told 2025-01-02`
  test.each([
    ['somebody says later that it runs', `${never}; ran 2025-07-01`, '0 to 0, wrong-diagnosis'],
    ['parted afterwards', `${never}; parted 2025-02-01`, '0 to 0, wrong-diagnosis'],
    ['excluded afterwards', `${never}; excluded 2025-02-01 not-plausible`, 'excluded: not-plausible'],
    ['filed on the last day in time', never.replace(/2025-01-02/g, '2025-01-15'), '0 to 0, wrong-diagnosis'],
    ['filed a day too late', never.replace(/2025-01-02/g, '2025-01-16'), 'apart: wrong-diagnosis']
  ])('%s', (_what, history, expected) => {
    expect(outcomeText(observe(lifeOf(history)))).toBe(expected)
  })
  it('counts for the share at first power when filed in time, whatever became of it', () => {
    const counted = (history: string) => {
      const outcome = observe(lifeOf(history))
      return outcome.kind === 'observed' && [outcome.isFirstPowerCounted, outcome.worksAtFirstPower]
    }
    expect(counted(never)).toEqual([true, false])
    expect(counted(`${inTime}; failed 2025-01-01 board, told 2025-01-02`)).toEqual([true, true])
    expect(counted(`${inTime}; parted 2025-02-01`)).toEqual([true, true])
    expect(counted(`${late}; ran 2025-07-01`)).toEqual([false, true])
  })
})

describe('disputed reports', () => {
  it('stay counted: a history holds nothing that a maintainer could say', () => {
    const life = lifeOf(`${inTime}; failed 2025-07-01 board, last ran 2025-06-30`)
    expect(Object.keys(life).sort()).toEqual(
      'batchId evidence exclusion failure filedOn firstPower installedOn method releaseId reportId revisionId statements'.split(
        ' '
      )
    )
    const disputed = { ...life, dispute: { by: 'maintainer', on: '2025-07-02', text: 'It was not the board.' } }
    expect(observe(disputed)).toEqual(observe(life))
  })
  it('leave on the day a steward excludes them, and not before', () => {
    const life = lifeOf(`${inTime}; failed 2025-07-01 board, last ran 2025-06-30; excluded 2025-09-01 other-board`)
    expect(outcomeText(observe(life, '2025-08-31'))).toBe('0 to 181, board')
    expect(outcomeText(observe(life, '2025-09-01'))).toBe('excluded: other-board')
  })
})

describe('a unit that is taken out and fitted anew', () => {
  // One tag, two reports: first in one console, which its owner gave up, then in another of another revision.
  const first = { ...lifeOf(`${inTime}; ran 2025-04-01; parted 2025-07-01`), reportId: 'r1', revisionId: 'tm-1' }
  const second = {
    ...lifeOf('fitted 2025-07-05; filed 2025-07-05: works; ran 2025-09-03; failed 2025-09-13 board'),
    reportId: 'r2',
    revisionId: 'tm-2'
  }
  it('lives two lives, each from its own first day', () => {
    expect([first, second].map((life) => outcomeText(observe(life)))).toEqual(['0 to 181, running', '0 to 70, board'])
  })
  it('counts twice in a curve: both are followed at day 70', () => {
    const rows = [first, second].map((life) => observe(life)).flatMap((o) => (o.kind === 'observed' ? [o] : []))
    const curve = kaplanMeier(tallyOf(columnsOf(rows.map(({ time, cause }) => ({ time, event: cause === null ? 0 : 1 })))))
    expect([[...curve.time], [...curve.atRisk], [...curve.survival]]).toEqual([
      [70, 181],
      [2, 1],
      [0.5, 0.5]
    ])
  })
  it('and a failed one that is mended and fitted anew keeps its first failure', () => {
    const failed = lifeOf(`${inTime}; ran 2025-04-01; failed 2025-04-02 fitting`)
    const again = lifeOf('fitted 2025-05-01; filed 2025-05-01: works; ran 2025-06-30')
    expect([failed, again].map((life) => outcomeText(observe(life)))).toEqual(['0 to 91, fitting', '0 to 60, running'])
  })
})

const day = (max: number) => fc.integer({ min: 0, max }).map((n) => addDays('2025-01-01', n))
const later = (a: Day, b: Day) => (a > b ? a : b)
const anyLife: fc.Arbitrary<LifeHistory> = fc.record({
  reportId: fc.constant('r'),
  releaseId: fc.constant('v'),
  revisionId: fc.constant('c'),
  batchId: fc.constant(null),
  evidence: fc.constant('measured'),
  method: fc.constant(null),
  firstPower: fc.constantFrom('works' as const, ...firstPowerResults),
  installedOn: fc.constant('2025-01-01'),
  filedOn: day(120),
  exclusion: fc.option(fc.record({ kind: fc.constantFrom(...exclusionKinds), on: day(700) }), { freq: 9 }),
  statements: fc.array(
    fc
      .record({ statement: fc.constantFrom('running', 'running', 'parted'), statedOn: day(600), filedOn: day(700) })
      .map((said) => ({ ...said, filedOn: later(said.statedOn, said.filedOn) })),
    { maxLength: 5 }
  ),
  failure: fc.option(
    fc
      .record({
        lastRunningOn: fc.option(day(600)),
        foundOn: day(600),
        cause: fc.constantFrom(...causes),
        filedOn: day(700)
      })
      .map((failure) => ({ ...failure, filedOn: later(failure.foundOn, failure.filedOn) }))
  )
})

describe('whatever is told', () => {
  it('an observation is one that every estimator takes, and its interval lies after the entry and is a wide one', () => {
    fc.assert(
      fc.property(anyLife, day(800), (life, on) => {
        const outcome = observe(life, on)
        if (outcome.kind !== 'observed') return
        const { entry, time, cause, interval } = outcome
        const event = cause ?? 0
        expect(checkObservations([interval === null ? { entry, time, event } : { entry, ...interval, event }])).toEqual([])
        if (interval === null) return
        expect(cause).not.toBeNull()
        expect(interval.upper).toBe(time)
        expect(interval.lower).toBeGreaterThanOrEqual(entry)
        expect(interval.upper - interval.lower).toBeGreaterThan(promptDays)
      }),
      { numRuns: 2000 }
    )
  })

  it('nothing that was filed or happened after the as-of day has a say', () => {
    fc.assert(
      fc.property(anyLife, day(800), (life, on) => {
        fc.pre(life.filedOn <= on)
        const known: LifeHistory = {
          ...life,
          exclusion: life.exclusion !== null && life.exclusion.on <= on ? life.exclusion : null,
          statements: life.statements.filter((s) => s.filedOn <= on && s.statedOn <= on),
          failure: life.failure !== null && life.failure.filedOn <= on && life.failure.foundOn <= on ? life.failure : null
        }
        expect(observe(life, on)).toEqual(observe(known, '2099-01-01'))
      }),
      { numRuns: 2000 }
    )
  })

  it('the order in which check-ins are stored has no say', () => {
    fc.assert(
      fc.property(anyLife, (life) => {
        expect(observe({ ...life, statements: [...life.statements].reverse() })).toEqual(observe(life))
      })
    )
  })

  it('never runs past its last word, its parting or the as-of day', () => {
    fc.assert(
      fc.property(anyLife, day(800), (life, on) => {
        const outcome = observe(life, on)
        if (outcome.kind !== 'observed') return
        const until = addDays(life.installedOn, outcome.time)
        expect(until <= on).toBe(true)
        for (const { statement, statedOn, filedOn } of life.statements)
          if (statement === 'parted' && statedOn <= on && filedOn <= on) expect(until <= statedOn).toBe(true)
        const words = [life.installedOn, life.filedOn, life.failure?.foundOn, ...life.statements.map((s) => s.statedOn)]
        expect(words).toContain(until)
      }),
      { numRuns: 2000 }
    )
  })
})
