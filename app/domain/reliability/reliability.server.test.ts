import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { dayFromNumber, dayNumber, daysBetween } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import type { Services } from '~/server/services.server'
import type { Db } from '~db/client.server'
import { fillReportWorld, openTestDb } from '../../../tests/factories/report-world'
import { livesOfRelease } from '../../../tests/support/lives-of-release'
import { readFilters, type ReliabilityFilters } from './reliability-filters'
import { reliabilityOf } from './reliability.server'
import { closeWorkers } from './worker-client.server'

let services: Services
let db: Db
let close: () => Promise<void>
const start = dayNumber('2024-01-01')
const everything: ReliabilityFilters = readFilters(new URLSearchParams(), '2026-12-01').filters

type Life = {
  revision: string
  release: string
  installed: number
  until: number
  failed: boolean
  worked: boolean
  evidence: 'measured' | 'none'
}
const lives: Life[] = []

/** Numerical Recipes' linear congruential generator, so that the lives are the same on every run. */
function generator(seed: number) {
  let state = seed >>> 0
  return () => (state = (Math.imul(state, 1664525) + 1013904223) >>> 0) / 2 ** 32
}

beforeAll(async () => {
  const opened = await openTestDb()
  close = opened.close
  db = opened.db
  await fillReportWorld(db)
  services = { db, config: { databaseFile: opened.file }, now: () => new Date('2026-12-01T12:00:00Z') } as Services
  const random = generator(7)
  await db.transaction().execute(async (tx) => {
    for (let i = 0; i < 240; i++) {
      const life: Life = {
        revision: random() < 0.5 ? 'tm-1' : 'tm-2',
        release: random() < 0.6 ? 'v1' : 'v2',
        installed: start + Math.floor(random() * 300),
        until: 1 + Math.floor(random() * 700),
        failed: random() < 0.3,
        worked: random() < 0.92,
        evidence: random() < 0.7 ? 'measured' : 'none'
      }
      lives.push(life)
      const installedOn = dayFromNumber(life.installed)
      const stated = dayFromNumber(life.installed + life.until)
      await tx
        .insertInto('install_reports')
        .values({
          id: `r${i}`,
          release_id: life.release,
          console_revision_id: life.revision,
          reporter_id: 'ann',
          installed_on: installedOn,
          filed_on: installedOn,
          filed_at: `${installedOn}T10:00:00.000Z`,
          evidence: life.evidence,
          first_power: life.worked ? 'works' : 'worse'
        })
        .execute()
      const at = `${stated}T10:00:00.000Z`
      if (!life.worked)
        await tx
          .insertInto('failures')
          .values({ report_id: `r${i}`, found_on: installedOn, cause: 'board', created_at: `${installedOn}T10:00:00.000Z` })
          .execute()
      else {
        const statement = life.failed ? 'failed' : 'running'
        await tx
          .insertInto('check_ins')
          .values({ id: `c${i}`, report_id: `r${i}`, statement, stated_on: stated, filed_at: at })
          .execute()
        if (life.failed)
          await tx
            .insertInto('failures')
            .values({
              report_id: `r${i}`,
              check_in_id: `c${i}`,
              last_running_on: dayFromNumber(life.installed + life.until - 1),
              found_on: stated,
              cause: 'fitting',
              created_at: at
            })
            .execute()
      }
    }
  })
})
afterAll(async () => {
  await closeWorkers()
  await close()
})

/** Kaplan-Meier once more by its definition, unit by unit: the share of those still there that did not fail, day by day. */
function survivalByHand(units: { time: number; failed: boolean }[], day: number): number {
  let share = 1
  for (let t = 0; t <= day; t++) {
    const atRisk = units.filter((u) => u.time >= t).length
    const failed = units.filter((u) => u.time === t && u.failed).length
    if (failed > 0) share *= 1 - failed / atRisk
  }
  return share
}

const unitOf = (life: Life) => (life.worked ? { time: life.until, failed: life.failed } : { time: 0, failed: true })

describe('reliabilityOf', () => {
  it('equals the definition computed from the same lives, in all, by revision and by release', async () => {
    const figures = await reliabilityOf(services, 'buttress', everything)
    const groups: [string, (life: Life) => boolean][] = [
      ['all', () => true],
      ['TM-1', (l) => l.revision === 'tm-1'],
      ['TM-2', (l) => l.revision === 'tm-2'],
      ['1.0.0', (l) => l.release === 'v1'],
      ['1.1.0', (l) => l.release === 'v2']
    ]
    const computed = [figures.all, ...figures.byRevision, ...figures.byRelease]
    expect(computed.map((g) => g.group).sort()).toEqual(groups.map(([name]) => name).sort())
    for (const [name, belongs] of groups) {
      const units = lives.filter(belongs).map(unitOf)
      const group = computed.find((g) => g.group === name)!
      expect(group.fitted).toBe(units.length)
      expect(group.events).toBe(units.filter((u) => u.failed).length)
      expect(group.firstPower!.works).toBe(lives.filter((l) => belongs(l) && l.worked).length)
      for (const row of group.curve) expect(Math.abs(row.survival - survivalByHand(units, row.time))).toBeLessThan(1e-12)
      expect(Math.abs(group.atOneYear.survival! - survivalByHand(units, 365))).toBeLessThan(1e-12)
      expect(group.atOneYear.atRisk).toBe(units.filter((u) => u.time >= 365).length)
    }
  })
  it('filters by release, revision, evidence and first power', async () => {
    const counts = async (change: Partial<ReliabilityFilters>) =>
      (await reliabilityOf(services, 'buttress', { ...everything, ...change })).all.fitted
    expect(await counts({ release: '1.0.0' })).toBe(lives.filter((l) => l.release === 'v1').length)
    expect(await counts({ revision: 'TM-2' })).toBe(lives.filter((l) => l.revision === 'tm-2').length)
    expect(await counts({ evidence: 'established' })).toBe(lives.filter((l) => l.evidence === 'measured').length)
    expect(await counts({ firstPower: 'set-aside' })).toBe(lives.filter((l) => l.worked).length)
  })
  it('knows on an earlier day only what had been filed by then', async () => {
    const asOf = '2024-09-01'
    const figures = await reliabilityOf(services, 'buttress', { ...everything, asOf })
    const until = dayNumber(asOf)
    const known = lives
      .filter((l) => l.installed <= until)
      .map((l) => (l.worked && l.installed + l.until > until ? { time: 0, failed: false } : unitOf(l)))
    expect(figures.all.fitted).toBe(known.length)
    for (const day of [0, 60, 150]) {
      const row = figures.all.curve.filter((r) => r.time <= day).at(-1)
      expect(Math.abs((row?.survival ?? 1) - survivalByHand(known, day))).toBeLessThan(1e-12)
    }
  })
  it('measures the completeness of the follow-up', async () => {
    const figures = await reliabilityOf(services, 'buttress', everything)
    const observed = lives.map((l) => unitOf(l).time).reduce((a, b) => a + b, 0)
    const possible = lives
      .map((l) => (unitOf(l).failed ? unitOf(l).time : daysBetween(dayFromNumber(l.installed), everything.asOf)))
      .reduce((a, b) => a + b, 0)
    expect(figures.all.followUp!.ratio).toBeCloseTo(observed / possible, 12)
  })
  it('refuses what the board does not have', async () => {
    const refusal = (board: string, change: Partial<ReliabilityFilters>) =>
      reliabilityOf(services, board, { ...everything, ...change }).then(
        () => null,
        (e: unknown) => (e instanceof DomainError ? [e.kind, ...e.errors.map((x) => x.path)] : e)
      )
    expect(await refusal('nothing', {})).toEqual(['not-found'])
    expect(await refusal('buttress', { release: '2.0.0' })).toEqual(['invalid', 'release'])
    expect(await refusal('buttress', { revision: 'TP-1' })).toEqual(['invalid', 'revision'])
  })
})

describe('a unit that is taken out and fitted anew', () => {
  it('has a life for each of its reports, on the revision of each', async () => {
    const undone = new Error('undone')
    const read = db.transaction().execute(async (tx) => {
      for (const [id, revision, on] of [
        ['again1', 'tm-1', '2026-01-10'],
        ['again2', 'tm-2', '2026-06-01']
      ] as const)
        await tx
          .insertInto('install_reports')
          .values({
            id,
            release_id: 'v1',
            unit_tag: 'BT-1',
            console_revision_id: revision,
            reporter_id: 'ann',
            installed_on: on,
            filed_on: on,
            filed_at: `${on}T10:00:00.000Z`,
            evidence: 'measured',
            first_power: 'works'
          })
          .execute()
      await tx
        .insertInto('check_ins')
        .values({
          id: 'out',
          report_id: 'again1',
          statement: 'parted',
          stated_on: '2026-05-30',
          filed_at: '2026-05-30T10:00:00.000Z'
        })
        .execute()
      const found = (await livesOfRelease(tx, { releaseId: 'v1', asOf: everything.asOf })).filter((life) =>
        life.reportId.startsWith('again')
      )
      expect(found).toMatchObject([
        { reportId: 'again1', revisionId: 'tm-1', installedOn: '2026-01-10', statements: [{ statedOn: '2026-05-30' }] },
        { reportId: 'again2', revisionId: 'tm-2', installedOn: '2026-06-01', statements: [] }
      ])
      throw undone
    })
    await expect(read).rejects.toBe(undone)
  })
})

describe('what is remembered', () => {
  const exclude = (id: string) =>
    db
      .updateTable('install_reports')
      .set({
        excluded_at: '2026-11-01T00:00:00.000Z',
        excluded_by: 'stu',
        exclusion_kind: 'duplicate',
        exclusion_reason: 'Twice.'
      })
      .where('id', '=', id)
      .execute()

  it('is the same object until a report changes, and moves then', async () => {
    const before = await reliabilityOf(services, 'buttress', everything)
    expect(await reliabilityOf(services, 'buttress', { ...everything })).toBe(before)
    await exclude('r0')
    const after = await reliabilityOf(services, 'buttress', everything)
    expect(after.all.fitted).toBe(before.all.fitted - 1)
    expect(after.excluded).toEqual([{ kind: 'duplicate', count: 1 }])
  })
  describe('moves on every kind of change', () => {
    let before: unknown
    beforeEach(async () => {
      before = await reliabilityOf(services, 'buttress', everything)
    })
    const moved = async () => expect(await reliabilityOf(services, 'buttress', everything)).not.toBe(before)
    it('a check-in', async () => {
      await db
        .insertInto('check_ins')
        .values({
          id: 'new',
          report_id: 'r1',
          statement: 'running',
          stated_on: '2026-11-30',
          filed_at: '2026-11-30T00:00:00.000Z'
        })
        .execute()
      await moved()
    })
    it('a withdrawal', async () => {
      await db
        .updateTable('releases')
        .set({ state: 'withdrawn', withdrawn_at: '2026-11-30T00:00:00.000Z', withdrawn_reason: 'x' })
        .where('id', '=', 'v1')
        .execute()
      await moved()
    })
  })
})
