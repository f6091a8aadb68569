import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { arbitraryLives, livesAsOf } from '../../../tests/support/arbitrary-lives'
import { dayNumber, daysBetween } from '~/lib/dates'
import { allReports, observationOf, type LifeHistory, type UnitObservation } from '../reports/observations'
import { causes, type Cause } from '../reports/report-words'
import { aalenJohansen } from '../survival/aalen-johansen'
import { columnsOf } from '../survival/columns'
import { completeness } from '../survival/follow-up'
import { kaplanMeier } from '../survival/kaplan-meier'
import type { TimedObservation } from '../survival/observation'
import { restrictedMean } from '../survival/restricted-mean'
import { spansOf } from '../survival/spans'
import { survivalAt } from '../survival/survival-at'
import { tallyOf } from '../survival/tally'
import { turnbull, turnbullAt } from '../survival/turnbull'
import { fitWeibull } from '../survival/weibull'
import { countLives } from './count-life'
import { columnsOfCounts } from './counts-tally'
import { addDay, type Counter, type GroupCounts } from './group-counts'
import { groupFigures } from './group-figures'
import { countedCauses, type CauseFilter } from './reliability-filters'

/*
 * What is said of counts, held against the estimators fed unit by unit: nothing may be lost on the way from lives to counts to figures.
 */

type Watched = { life: LifeHistory; seen: UnitObservation }
const watchedOf = (lives: readonly LifeHistory[]): Watched[] =>
  lives.flatMap((life) => {
    const seen = observationOf(life, livesAsOf, allReports)
    return seen.kind === 'observed' ? [{ life, seen }] : []
  })

const summed = ({ days, totals, lives }: GroupCounts) => ({
  columns: columnsOfCounts([days])[0]!,
  totals,
  lives: lives && [lives]
})
const figuresOf = (lives: readonly LifeHistory[], cause: CauseFilter) =>
  groupFigures(
    'all',
    summed(countLives(lives, livesAsOf, allReports)),
    { counted: countedCauses(cause), isOneCause: cause !== 'all', asOf: livesAsOf },
    null
  )

/** The day on which a unit that failed by another cause leaves: the last one it is known to have run. */
const ranUntil = ({ entry, time, interval }: UnitObservation) => (interval === null ? time : Math.max(entry, interval.lower))

/** Each unit's row when only some causes count; those that would leave as they enter were never at risk. */
function rowsOf(watched: Watched[], counted: readonly Cause[]): TimedObservation[] {
  return watched.flatMap(({ seen }) => {
    const isCounted = seen.cause !== null && counted.includes(seen.cause)
    const time = isCounted || seen.cause === null ? seen.time : ranUntil(seen)
    return seen.entry > 0 && time <= seen.entry ? [] : [{ entry: seen.entry, time, event: isCounted ? 1 : 0 }]
  })
}
const curveOf = (rows: TimedObservation[]) => kaplanMeier(tallyOf(columnsOf(rows)))
const causeFilter = fc.constantFrom<CauseFilter>('all', 'board', 'fitting')

describe('the figures of a group, from its counts', () => {
  it('are Kaplan-Meier of its units where every counted failure is known closely', () => {
    let met = 0
    fc.assert(
      fc.property(arbitraryLives(), causeFilter, (lives, cause) => {
        const counted = countedCauses(cause)
        const watched = watchedOf(lives)
        const isWide = watched.some(({ seen }) => seen.interval !== null && counted.includes(seen.cause!))
        const figures = figuresOf(lives, cause)
        expect(figures.estimator).toBe(isWide ? 'turnbull' : 'kaplan-meier')
        if (isWide) return
        met++
        const curve = curveOf(rowsOf(watched, counted))
        expect(figures.events).toBe(curve.failures)
        expect(figures.n).toBe(watched.length)
        for (const row of figures.curve.filter(({ events }) => events! > 0))
          expect(row).toMatchObject({ ...survivalAt(curve, row.time), time: row.time })
        expect(figures.atOneYear).toEqual({ ...survivalAt(curve, 365), open: null })
      }),
      { seed: 1 }
    )
    expect(met).toBeGreaterThan(20)
  })

  it('are Turnbull of its units where one is not, whatever the order of the lives', () => {
    let met = 0
    fc.assert(
      fc.property(arbitraryLives(2, 25), causeFilter, (lives, cause) => {
        const counted = countedCauses(cause)
        const figures = figuresOf(lives, cause)
        if (figures.estimator !== 'turnbull') return
        met++
        expect(figuresOf([...lives].reverse(), cause)).toEqual(figures)
        const fit = turnbull(
          spansOf(
            watchedOf(lives).flatMap(({ seen: { entry, time, interval, cause: of } }) => {
              if (of !== null && counted.includes(of)) return [{ entry, ...(interval ?? { time, event: 1 }) }]
              const until = of === null ? time : ranUntil({ entry, time, interval } as UnitObservation)
              return entry > 0 && until <= entry ? [] : [{ entry, time: until, event: 0 }]
            })
          )
        )
        for (const { time, survival, lower, upper } of figures.curve) {
          expect(survival).toBeCloseTo(turnbullAt(fit, time)!, 6)
          if (survival > 0) expect(lower! < survival && survival <= upper!).toBe(true)
          else expect([lower, upper]).toEqual([null, null])
        }
        for (const { lower, mass } of figures.support!)
          expect(mass).toBeCloseTo(fit.mass[fit.left.findIndex((left, k) => left === lower && fit.mass[k]! > 1e-7)]!, 6)
        const { survival, open } = figures.atOneYear
        if (open === null) expect(survival ?? -1).toBeCloseTo(turnbullAt(fit, 365) ?? -1, 6)
        else expect(turnbullAt(fit, 365)).toBeNull()
      }),
      { numRuns: 90, seed: 1 }
    )
    expect(met).toBeGreaterThan(20)
  })

  it('take mean days, incidences and shape from the same units', () => {
    let fitted = 0
    fc.assert(
      fc.property(arbitraryLives(), (lives) => {
        const watched = watchedOf(lives)
        const figures = figuresOf(lives, 'all')
        const curve = curveOf(rowsOf(watched, causes))
        const { estimate, standardError, lower, upper } = restrictedMean(curve, 365)
        expect(figures.meanInYear).toMatchObject({ tau: 365, estimate, standardError })
        if (standardError !== 0) expect(figures.meanInYear).toMatchObject({ lower, upper, bound: null })
        const named = tallyOf(
          columnsOf(watched.map(({ seen }) => ({ entry: seen.entry, time: seen.time, event: seen.cause ?? 0 })))
        )
        expect(figures.incidence.map(({ cause }) => cause).sort()).toEqual(named.causes)
        if (named.causes.length > 0) {
          const { incidence, standardError } = aalenJohansen(named)
          for (const { cause, failures, curve: rows } of figures.incidence) {
            expect(failures).toBe(watched.filter(({ seen }) => seen.cause === cause).length)
            const k = named.causes.indexOf(cause)
            expect(rows.at(-1)!.estimate).toBeCloseTo(incidence[k]!.at(-1)!, 12)
            expect(rows.at(-1)!.standardError).toBeCloseTo(standardError[k]!.at(-1)!, 10)
          }
        }
        if (figures.estimator === 'kaplan-meier') {
          const outlasting = watched.filter(({ seen }) => seen.cause === null || seen.time > 0)
          const fit = fitWeibull(
            spansOf(outlasting.map(({ seen }) => ({ entry: seen.entry, time: seen.time, event: seen.cause === null ? 0 : 1 })))
          )
          if (fit === null || figures.shape === null) expect(figures.shape === null || fit === null).toBe(true)
          else {
            fitted++
            expect(figures.shape.estimate / fit.shape).toBeCloseTo(1, 6)
            expect(figures.shape.scale / fit.scale).toBeCloseTo(1, 6)
          }
        }
      }),
      { seed: 1 }
    )
    expect(fitted).toBeGreaterThan(5)
  })

  it('bound the mean days of a group without a failure, and leave out the limits of one that failed at once', () => {
    const counts = countLives([], livesAsOf, allReports)
    addDay(counts.days, 'entered', 0, 30)
    const ended = (counter: Counter, day: number) => {
      const days = new Map([...counts.days, [counter, new Map([[day, 30]])] as const])
      return groupFigures('all', summed({ ...counts, days }), { counted: causes, isOneCause: false, asOf: livesAsOf }, null)
        .meanInYear
    }
    // 0.05^(1/30) of a year at least
    expect(ended('left', 400)).toMatchObject({ estimate: 365, lower: expect.closeTo(365 * 0.05 ** (1 / 30), 9), upper: 365 })
    expect(ended('left', 400).bound).toBe('exact-one-sided')
    expect(ended('failed:board', 100)).toMatchObject({ estimate: 100, lower: null, upper: null, bound: null })
    expect(ended('left', 200)).toMatchObject({ estimate: null, lower: null, upper: null, bound: null })
  })

  it('have the completeness of follow-up of the units themselves', () => {
    fc.assert(
      fc.property(arbitraryLives(), (lives) => {
        const units = watchedOf(lives).map(({ life, seen }) => ({
          entry: seen.entry,
          time: seen.time,
          toClose: seen.cause === null ? daysBetween(life.installedOn, livesAsOf) : seen.time,
          isFailed: seen.cause !== null
        }))
        const { observed, potential, ratio } = completeness(units)
        const { followUp } = figuresOf(lives, 'all')
        expect(followUp).toEqual(ratio === null ? null : { observedDays: observed, potentialDays: potential, ratio })
      }),
      { seed: 1 }
    )
  })

  it('never have more follow-up than there was, though a day may be stated one ahead', () => {
    const life = fc.sample(arbitraryLives(1, 1), 1)[0]![0]!
    const ahead: LifeHistory = {
      ...life,
      firstPower: 'works',
      exclusion: null,
      failure: null,
      installedOn: '2026-11-01',
      filedOn: '2026-11-01',
      statements: [{ statement: 'running', statedOn: '2026-12-02', filedOn: '2026-12-01' }]
    }
    expect(figuresOf([ahead], 'all').followUp).toEqual({ observedDays: 31, potentialDays: 31, ratio: 1 })
    expect(dayNumber('2026-12-02') - dayNumber('2026-11-01')).toBe(31)
  })

  it('count every life once: fitted is what is in the curve, not followed, or apart', () => {
    fc.assert(
      fc.property(arbitraryLives(), (lives) => {
        const { fitted, n, notFollowed, failedBeforeRegistration, failuresByCause, commonestCause } = figuresOf(lives, 'board')
        expect(fitted).toBe(n + notFollowed + failedBeforeRegistration)
        const most = Math.max(...Object.values(failuresByCause))
        if (commonestCause !== null) expect(failuresByCause[commonestCause]).toBe(most)
        else expect(most === 0 || Object.values(failuresByCause).filter((n) => n === most).length > 1).toBe(true)
      }),
      { seed: 1 }
    )
  })

  it('ask for joint observations rather than guess', () => {
    const counts = countLives([], livesAsOf, allReports)
    counts.totals['wide:board'] = 1
    counts.lives = null
    expect(() => groupFigures('all', summed(counts), { counted: causes, isOneCause: false, asOf: livesAsOf }, null)).toThrow(
      RangeError
    )
  })
})
