import { describe, expect, it } from 'vitest'
import { allReports, observationOf, type LifeHistory, type UnitObservation } from '~/domain/reports/observations'
import { batchFigures } from '~/domain/reliability/batch-figures'
import { countCells } from '~/domain/reliability/count-cells'
import { countLives } from '~/domain/reliability/count-life'
import { columnsOfCounts } from '~/domain/reliability/counts-tally'
import { groupFigures } from '~/domain/reliability/group-figures'
import { noCounts } from '~/domain/reliability/group-counts'
import { countedCauses, readFilters, type CauseFilter } from '~/domain/reliability/reliability-filters'
import { clopperPearson } from '~/domain/survival/clopper-pearson'
import { columnsOf } from '~/domain/survival/columns'
import { garwood } from '~/domain/survival/garwood'
import { kaplanMeier } from '~/domain/survival/kaplan-meier'
import { survivalAt } from '~/domain/survival/survival-at'
import { tallyOf } from '~/domain/survival/tally'
import { readManifests } from './manifests'
import { simulate } from './simulate'
import {
  badLot,
  demoAsOf,
  demoSeed,
  hiddenFirstPower,
  hiddenHazard,
  hiddenSurvival,
  hiddenTotalHazard,
  unknownCauseShare,
  type UnitKind
} from './truth'

/*
 * Holds what the product's own functions make of the reports against the parameters they were drawn from. The seed is fixed, so nothing here
 * changes from run to run; the limits say how far chance may have carried this one world from its truth.
 */

const dates = new Map(readManifests().map((m) => [`${m.board}/${m.version}`, m.date]))
const { rows, told } = simulate(demoSeed, {
  releaseId: (board, version) => `${board}/${version}`,
  publishedOn: (board, version) => dates.get(`${board}/${version}`)!,
  revisionId: (code) => code
})

const batchOfTag = new Map(rows.units.map((unit) => [unit.tag, unit.batch_id]))

type Watched = { kind: UnitKind; life: LifeHistory; seen: UnitObservation }

/** Every unit that the product's rules put into a curve. */
const watched: Watched[] = told.flatMap(({ kind, reportId }) => {
  const r = rows.install_reports.find((row) => row.id === reportId)!
  const checkIns = rows.check_ins.filter((c) => c.report_id === reportId)
  const failure = rows.failures.find((f) => f.report_id === reportId)
  const life: LifeHistory = {
    reportId,
    releaseId: r.release_id,
    revisionId: r.console_revision_id,
    batchId: (r.unit_tag && batchOfTag.get(r.unit_tag)) || null,
    evidence: r.evidence,
    method: r.method ?? null,
    firstPower: r.first_power,
    installedOn: r.installed_on,
    filedOn: r.filed_on,
    exclusion: null,
    statements: checkIns.flatMap((c) =>
      c.statement === 'failed' ? [] : [{ statement: c.statement, statedOn: c.stated_on, filedOn: c.filed_at.slice(0, 10) }]
    ),
    failure: failure
      ? {
          lastRunningOn: failure.last_running_on ?? null,
          foundOn: failure.found_on,
          cause: failure.cause,
          filedOn: failure.created_at.slice(0, 10)
        }
      : null
  }
  const seen = observationOf(life, demoAsOf, allReports)
  return seen.kind === 'observed' ? [{ kind, life, seen }] : []
})

const curveOf = (units: Watched[]) =>
  kaplanMeier(
    tallyOf(columnsOf(units.map(({ seen }) => ({ entry: seen.entry, time: seen.time, event: seen.cause === null ? 0 : 1 }))))
  )

const ofBoard = (board: string) => watched.filter(({ kind }) => kind.board === board)
const buttress = ofBoard('buttress')
const sundial = ofBoard('sundial')

/** Failures are found up to so many days after they happened. */
const foundWithin = 6

/**
 * The curve that a pooled estimate is an estimate of, day by day: the hidden hazards of those at risk, averaged. With it the variance of
 * the Nelson-Aalen estimate around it (the compensator of the failures counted, and its predictable variation: Andersen, Borgan, Gill and
 * Keiding, Statistical Models Based on Counting Processes, 1993, section IV.1).
 */
function hiddenPooled(units: Watched[], hazard: (kind: UnitKind, t: number) => number, last: number) {
  const cumulative = [0]
  let variance = 0
  for (let day = 1; day <= last; day++) {
    const atRisk = units.filter(({ seen }) => seen.entry < day && day <= seen.time)
    const expected = atRisk.reduce((sum, { kind }) => sum + hazard(kind, day) - hazard(kind, day - 1), 0)
    cumulative.push(cumulative.at(-1)! + expected / atRisk.length)
    variance += expected / atRisk.length ** 2
  }
  return { cumulative, deviation: Math.sqrt(variance) }
}

/** The last day on which at least fifty units are followed; later the curve's own spread would hide any difference. */
function lastFollowed(units: Watched[]): number {
  let day = 0
  while (units.filter(({ seen }) => seen.entry < day + 1 && day + 1 <= seen.time).length >= 50) day++
  return day
}

/** How far a Brownian motion strays from 0 on [0, 1] in 99 of 100 cases (Billingsley, Convergence of Probability Measures, section 11). */
const strays = 2.807

/** The largest distance of the estimate from the hidden curve, in the deviations of its end. */
function distance(units: Watched[], hazard: (kind: UnitKind, t: number) => number): number {
  const last = lastFollowed(units)
  const { cumulative, deviation } = hiddenPooled(units, hazard, last)
  const curve = curveOf(units)
  const start = survivalAt(curve, 0).survival!
  let largest = 0
  for (let day = 1; day <= last; day++) {
    const estimate = -Math.log(survivalAt(curve, day).survival! / start)
    const [low, high] = [cumulative[Math.max(0, day - foundWithin)]!, cumulative[day]!]
    largest = Math.max(largest, (low - estimate) / deviation, (estimate - high) / deviation)
  }
  return largest
}

describe('the reports of the demo, against the parameters they were drawn from', () => {
  it('give a pooled Kaplan-Meier curve around the hidden one', () => {
    expect(lastFollowed(buttress)).toBeGreaterThan(2 * 365)
    expect(distance(buttress, hiddenTotalHazard)).toBeLessThan(strays)
  })

  it('would tell a truth twice as bad, or a third as bad, from this one', () => {
    expect(distance(buttress, (kind, t) => 2 * hiddenTotalHazard(kind, t))).toBeGreaterThan(strays)
    expect(distance(buttress, (kind, t) => hiddenTotalHazard(kind, t) / 3)).toBeGreaterThan(strays)
  })

  it.each([
    ['1.1.0', 'TM-3'],
    ['1.1.0', 'TM-5'],
    ['2.0.0', 'TM-4']
  ])('give a curve for Buttress %s on %s whose limits at 99 in 100 hold the hidden one', (release, revision) => {
    const kind = { board: 'buttress', release, revision, isBadLot: false }
    const curve = curveOf(
      watched.filter((u) => u.kind.board === 'buttress' && u.kind.release === release && u.kind.revision === revision)
    )
    for (const day of [90, 365, 600]) {
      const { survival, lower, upper, bound } = survivalAt(curve, day, { confidence: 0.99, interval: 'log-log' })
      expect(survival).not.toBeNull()
      expect(hiddenSurvival(kind, day)).toBeGreaterThan(lower!)
      if (bound === null) expect(hiddenSurvival(kind, day)).toBeLessThan(upper!)
    }
  })

  describe('give Sundial, some of whose failures were found late, a curve by Turnbull', () => {
    const figuresOf = (units: Watched[], cause: CauseFilter) => {
      const { days, totals, lives } = countLives(
        units.map(({ life }) => life),
        demoAsOf,
        allReports
      )
      return groupFigures(
        'all',
        { columns: columnsOfCounts([days])[0]!, totals, lives: [lives!] },
        { counted: countedCauses(cause), isOneCause: cause !== 'all', asOf: demoAsOf },
        null
      )
    }
    /** On how many of the days on which the curve has fallen its limits leave out the hidden share; `hazard` says what is hidden. */
    function outside(units: Watched[], cause: CauseFilter, hazard: (kind: UnitKind, t: number) => number) {
      const { curve, estimator } = figuresOf(units, cause)
      expect(estimator).toBe('turnbull')
      const last = lastFollowed(units)
      const { cumulative } = hiddenPooled(units, hazard, last)
      const start = curve.findLast(({ time }) => time === 0)?.survival ?? 1
      const told = curve.filter(({ time, bound }) => time > 0 && time <= last && bound === null)
      const hidden = (time: number) => start * Math.exp(-cumulative[time]!)
      return {
        told: told.length,
        outside: told.filter(({ time, lower, upper }) => hidden(time) < lower! || hidden(time) > upper!).length
      }
    }
    /** What is laid to the board: its own failures, and the share of all others whose cause nobody established. */
    const boardHazard = (kind: UnitKind, t: number) => {
      const own = hiddenHazard(kind, 'board', t)
      return own + unknownCauseShare * (hiddenTotalHazard(kind, t) - own)
    }

    it.each([
      ['all failures', 'all', hiddenTotalHazard],
      ['those of the board', 'board', boardHazard]
    ] as const)('whose limits hold the hidden one for %s', (_, cause, hazard) => {
      const found = outside(sundial, cause, hazard)
      expect(found.told).toBeGreaterThan(5)
      expect(found.outside).toBe(0)
    })
    it('which would tell a truth three times as bad from this one', () => {
      expect(outside(sundial, 'all', (kind, t) => 3 * hiddenTotalHazard(kind, t)).outside).toBeGreaterThan(5)
    })
    it.each(['TP-3', 'TP-4'])('also on %s alone', (revision) => {
      const units = sundial.filter(({ kind }) => kind.revision === revision)
      expect(outside(units, 'all', hiddenTotalHazard)).toMatchObject({ outside: 0 })
    })
  })

  it.each(['buttress', 'sundial', 'almanac'])('give a share of %s working at first power as hidden', (board) => {
    const counted = watched.filter(({ kind, seen }) => kind.board === board && seen.isFirstPowerCounted)
    const hidden = counted.reduce((sum, { kind }) => sum + hiddenFirstPower(kind), 0) / counted.length
    const works = counted.filter(({ seen }) => seen.worksAtFirstPower).length
    const limits = clopperPearson(works, counted.length, 0.99)!
    expect(hidden).toBeGreaterThan(limits.lower)
    expect(hidden).toBeLessThan(limits.upper)
  })

  it('show the bad lot: more failures of the board than a good lot would have', () => {
    const lot = watched.filter(({ kind, seen }) => kind.isBadLot && seen.worksAtFirstPower)
    const observed = lot.filter(({ seen }) => seen.cause === 'board' || seen.cause === 'unknown').length
    const good = (kind: UnitKind, t: number) => hiddenHazard({ ...kind, isBadLot: false }, 'board', t)
    const expected = lot.reduce((sum, { kind, seen }) => sum + good(kind, seen.time) - good(kind, seen.entry), 0)
    expect(garwood(observed, expected)!.lower).toBeGreaterThan(1)
  })

  it('flag the bad lot by the batch watch, and no sound batch', () => {
    const batches = rows.batches.map(({ id, release_id, code, made_on, quantity }) => ({
      id,
      releaseId: release_id,
      version: release_id,
      code,
      madeOn: made_on,
      quantity,
      counts: noCounts()
    }))
    const lives = watched.map(({ life }) => life)
    countCells(lives, readFilters(new URLSearchParams(), demoAsOf).filters, null, batches)
    const flagged = batchFigures(batches).rows.filter(({ watch }) => watch?.isFlagged)
    expect(flagged.map(({ batch }) => batch)).toEqual([`${badLot.board}/${badLot.release}/${badLot.batch}`])
  })

  it('hold Buttress failures known to within 14 days only, and some of Sundial less well', () => {
    expect(buttress.filter(({ seen }) => seen.interval !== null)).toEqual([])
    expect(watched.filter(({ kind, seen }) => kind.board === 'sundial' && seen.interval !== null).length).toBeGreaterThan(2)
  })

  it('have no failure of Almanac, so that a page has a lower bound to state', () => {
    expect(watched.filter(({ kind, seen }) => kind.board === 'almanac' && seen.cause !== null)).toEqual([])
  })
})
