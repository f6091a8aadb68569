import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { addBatches } from '../../../tests/factories/report-sequence'
import { fillReportWorld, openTestDb } from '../../../tests/factories/report-world'
import { storeLives } from '../../../tests/factories/store-lives'
import { arbitraryLives, livesAsOf } from '../../../tests/support/arbitrary-lives'
import type { Db } from '~db/client.server'
import type { LifeHistory } from '../reports/observations'
import { computeReliability } from './compute-reliability.server'
import { countHistories, countSelection, countStored } from './count-selection.server'
import { recountBoard } from './recount-board.server'
import {
  batchName,
  causeFilters,
  evidenceFilters,
  firstPowerFilters,
  methodFilters,
  readFilters,
  unknownNames,
  type ReliabilityFilters
} from './reliability-filters'

const everything = readFilters(new URLSearchParams(), livesAsOf).filters
const choices = {
  releases: ['1.0.0', '1.1.0', '2.0.0-beta.1'].map((version) => ({ version, boardRevision: 'A' })),
  revisions: ['TM-1', 'TM-2'],
  batches: [
    { version: '1.0.0', code: '2020-01' },
    { version: '1.0.0', code: 't2' },
    { version: '2.0.0-beta.1', code: 't3' }
  ]
}

/** A world with some lives in it, counted. */
async function worldOf(lives: readonly LifeHistory[]) {
  const world = await openTestDb()
  await fillReportWorld(world.db)
  await addBatches(world.db)
  await storeLives(world.db, lives)
  await world.db.transaction().execute((tx) => recountBoard(tx, 'b1'))
  return world
}

/** A hundred lives, always the same, on two revisions and three releases, two with batches. */
const lives = fc.sample(arbitraryLives(100, 100), { numRuns: 1, seed: 11 })[0]!.map((life, i): LifeHistory => {
  const releaseId = ['v1', 'v1', 'v2', 'v3'][i % 4]!
  const batchId = { v1: ['t1', 't2', null][i % 3]!, v2: null, v3: ['t3', null][i % 2]! }[releaseId]!
  return { ...life, releaseId, batchId, revisionId: life.revisionId === 'tm-3' ? 'tm-2' : life.revisionId }
})

describe('computeReliability', () => {
  let db: Db
  let close: () => Promise<void>
  beforeAll(async () => {
    ;({ db, close } = await worldOf(lives))
  })
  afterAll(() => close())

  const mostly = <T>(usual: T, others: readonly T[]) =>
    fc.oneof({ weight: 3, arbitrary: fc.constant(usual) }, fc.constantFrom(...others))
  const filters = fc
    .record({
      release: mostly<string | null>(
        null,
        choices.releases.map(({ version }) => version)
      ),
      boardRevision: fc.constantFrom(null, 'A'),
      revision: mostly<string | null>(null, choices.revisions),
      batch: mostly<string | null>(null, choices.batches.map(batchName)),
      cause: fc.constantFrom(...causeFilters),
      evidence: mostly('any', evidenceFilters),
      method: mostly('any', methodFilters),
      firstPower: fc.constantFrom(...firstPowerFilters)
    })
    .map((some): ReliabilityFilters => ({ ...everything, ...some }))
    .filter((some) => unknownNames(some, choices).length === 0)

  it('gives the same from stored counts as from the life histories, whatever the filters', async () => {
    const met = { turnbull: 0, watched: 0, pairs: 0 }
    await fc.assert(
      fc.asyncProperty(filters, async (some) => {
        const stored = await computeReliability(db, 'buttress', some, 'whole', countStored)
        expect(stored).toEqual(await computeReliability(db, 'buttress', some, 'whole', countHistories))
        if (stored.all.estimator === 'turnbull') met.turnbull++
        if (stored.batches.rows.some(({ watch }) => watch !== null)) met.watched++
        if (stored.revisions?.pairs.some(({ logRank }) => logRank !== null)) met.pairs++
      }),
      { numRuns: 30, seed: 5, examples: [[everything]] }
    )
    for (const count of Object.values(met)) expect(count).toBeGreaterThan(5)
  })

  it('reads the stored counts only where they answer', async () => {
    const from = async (change: Partial<ReliabilityFilters>) => {
      let way = ''
      await computeReliability(db, 'buttress', { ...everything, ...change }, 'page', async (tx, selection) => {
        const counted = await countSelection(tx, selection)
        way = counted.way
        return counted
      })
      return way
    }
    expect(await from({})).toBe('counts')
    expect(await from({ batch: '1.0.0/t2', cause: 'board', evidence: 'established', method: 'iron' })).toBe('counts')
    expect(await from({ since: '2024-02-01' })).toBe('histories')
    expect(await from({ silent: 'bounds' })).toBe('histories')
    expect(await from({ asOf: '2024-12-01' })).toBe('histories')
  })

  it('counts only units fitted since a day', async () => {
    const since = '2024-05-01'
    const { all } = await computeReliability(db, 'buttress', { ...everything, since })
    const kept = lives.filter((life) => life.installedOn >= since && life.exclusion === null)
    expect(all.fitted).toBe(kept.length)
    expect(kept.length).toBeLessThan(lives.length)
  })

  it('keeps the watch of a batch against the others of its release when it is chosen alone', async () => {
    const whole = await computeReliability(db, 'buttress', everything)
    const alone = await computeReliability(db, 'buttress', { ...everything, batch: '1.0.0/t2' })
    expect(alone.all.fitted).toBe(lives.filter((life) => life.batchId === 't2' && life.exclusion === null).length)
    expect(alone.batches.rows).toEqual(whole.batches.rows.filter(({ code }) => code === 't2'))
    expect(alone.batches.rows[0]!.watch).not.toBeNull()
    expect(alone.byRelease.map(({ group }) => group)).toEqual(['1.0.0'])
  })

  it('has what the silent could hide for all and for each group', async () => {
    const { all, byRevision, byRelease } = await computeReliability(db, 'buttress', { ...everything, silent: 'bounds' })
    const silent = (groups: typeof byRevision) => groups.reduce((sum, group) => sum + group.silent!.silent, 0)
    expect(all.silent!.silent).toBeGreaterThan(10)
    expect([silent(byRevision), silent(byRelease)]).toEqual([all.silent!.silent, all.silent!.silent])
  })
})

describe('a release with thousands of units and failures found late', () => {
  it('is estimated on the grid of fortnights, by both ways alike', async () => {
    const installedOn = '2024-01-01'
    const life = (i: number): LifeHistory => ({
      ...lives[0]!,
      ...{ installedOn, filedOn: installedOn, releaseId: 'v1', revisionId: i % 2 === 0 ? 'tm-1' : 'tm-2', batchId: null },
      ...{ firstPower: 'works', exclusion: null, evidence: 'measured', method: null },
      statements: [{ statement: 'running', statedOn: `2025-0${1 + (i % 9)}-1${i % 10}`, filedOn: '2025-12-01' }],
      failure: null
    })
    const failed = (i: number): LifeHistory => ({
      ...life(i),
      statements: [],
      failure: { lastRunningOn: '2024-03-05', foundOn: `2024-0${6 + (i % 4)}-2${i % 10}`, cause: 'board', filedOn: '2025-12-01' }
    })
    const many = [...Array.from({ length: 3_000 }, (_, i) => life(i)), ...Array.from({ length: 40 }, (_, i) => failed(i))]
    const world = await worldOf(many)
    try {
      const stored = await computeReliability(world.db, 'buttress', everything, 'whole', countStored)
      expect(stored).toEqual(await computeReliability(world.db, 'buttress', everything, 'whole', countHistories))
      expect(stored).toMatchObject({ grain: 14, all: { estimator: 'turnbull', n: 3_040, events: 40 } })
      for (const { lower, upper } of stored.all.support!) expect([lower % 14, (upper ?? 0) % 14]).toEqual([0, 0])
      // Forty of 3040, all found before the first year was over.
      expect(stored.all.atOneYear.survival).toBeCloseTo(1 - 40 / 3_040, 6)
      const few = await computeReliability(world.db, 'buttress', { ...everything, revision: 'TM-1' })
      expect(few).toMatchObject({ grain: 1, all: { n: 1_520 } })
    } finally {
      await world.close()
    }
  })
})
