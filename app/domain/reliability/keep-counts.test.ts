import { copyFileSync, mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import fc from 'fast-check'
import { sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { addDays, type Day } from '~/lib/dates'
import { openDb, type Db, type Tx } from '~db/client.server'
import { migrate } from '~db/migrate'
import { addBatches, play, steps, type Step } from '../../../tests/factories/report-sequence'
import { fillReportWorld } from '../../../tests/factories/report-world'
import { livesOfRelease } from '../../../tests/support/lives-of-release'
import { evidenceGrades } from '../reports/report-words'
import * as reports from '../reports/reports.repo.server'
import { coarseLife, countLives } from './count-life'
import { countingRules } from './count-slices'
import { addLife, noCounts, type GroupCounts, type LifeCounts } from './group-counts'
import { maxRecountedAtOnce, withCounts } from './keep-counts.server'
import { areCountsCurrent, readCounts, readLives } from './read-counts.server'
import { countMissing, recountBoard } from './recount-board.server'
import {
  evidenceFilters,
  firstPowerFilters,
  methodFilters,
  observationFilters,
  readFilters,
  type ReliabilityFilters
} from './reliability-filters'

const folder = mkdtempSync(join(tmpdir(), 'fettle-counts-'))
const template = join(folder, 'template.sqlite')
const releases = ['v1', 'v2', 'v3']
const batches = { v1: ['t1', 't2'], v2: [], v3: ['t3'] } as Record<string, string[]>
const revisions = ['tm-1', 'tm-2']
const endOfTime: Day = '9999-12-30'

beforeAll(async () => {
  const db = openDb(template)
  await migrate(db)
  await fillReportWorld(db)
  await addBatches(db)
  await sql`pragma wal_checkpoint(truncate)`.execute(db)
  await db.destroy()
})
afterAll(() => rmSync(folder, { recursive: true }))

let files = 0
/** A world of its own; `work` may do to it what it likes. */
async function inWorld<T>(work: (db: Db) => Promise<T>): Promise<T> {
  const file = join(folder, `${++files}.sqlite`)
  copyFileSync(template, file)
  const db = openDb(file)
  try {
    return await work(db)
  } finally {
    await db.destroy()
  }
}

const defaults = readFilters(new URLSearchParams(), endOfTime).filters
const slices: ReliabilityFilters[] = evidenceFilters.flatMap((evidence) =>
  methodFilters.flatMap((method) => firstPowerFilters.map((firstPower) => ({ ...defaults, evidence, method, firstPower })))
)

/** Counts without any order in them, and without what is empty. */
const plain = (counts: Pick<GroupCounts, 'days' | 'totals'>) => ({
  days: Object.fromEntries(
    [...counts.days].filter(([, byDay]) => byDay.size > 0).map(([counter, byDay]) => [counter, Object.fromEntries(byDay)])
  ),
  totals: counts.totals
})
const coarse = (lives: LifeCounts): LifeCounts => {
  const rounded: LifeCounts = new Map()
  for (const life of lives.values()) {
    const one = coarseLife(life)
    if (one) addLife(rounded, one)
  }
  return rounded
}
const sorted = (lives: LifeCounts | undefined) => [...(lives?.entries() ?? [])].sort(([a], [b]) => (a < b ? -1 : 1))

/** Every slice of every release and batch on every revision and all, as the tables have it beside what the rows give. */
async function expectTrue(tx: Tx): Promise<void> {
  const lives = (await Promise.all(releases.map((id) => livesOfRelease(tx, { releaseId: id, asOf: endOfTime })))).flat()
  const scopes = [...releases, ...Object.values(batches).flat()]
  for (const filters of slices) {
    const countedOf = (scope: string, revision: string) =>
      countLives(
        lives.filter((life) => (life.releaseId === scope || life.batchId === scope) && life.revisionId === revision),
        endOfTime,
        observationFilters(filters)
      )
    const asked = { scopeIds: scopes, revisionId: null, filters }
    const read = await readCounts(tx, asked)
    const [fine, grid] = [await readLives(tx, asked, 1), await readLives(tx, asked, 14)]
    const pairs = scopes.flatMap((scope) => revisions.map((revision) => [scope, revision] as const))
    const ofRows = pairs.map(([scope, revision]) => countedOf(scope, revision))
    const none = noCounts()
    expect(pairs.map(([scope, revision]) => plain(read.get(scope)?.get(revision) ?? none))).toEqual(ofRows.map(plain))
    expect(pairs.map(([scope, revision]) => sorted(fine.get(scope)?.get(revision)))).toEqual(ofRows.map((c) => sorted(c.lives!)))
    expect(pairs.map(([scope, revision]) => sorted(grid.get(scope)?.get(revision)))).toEqual(
      ofRows.map((c) => sorted(coarse(c.lives!)))
    )
    // One scope and one revision alone give the same cell, and no other.
    const alone = await readCounts(tx, { scopeIds: ['t2'], revisionId: 'tm-2', filters })
    expect([...alone].map(([scope, cells]) => [scope, ...cells.keys()])).toEqual(
      read.get('t2')?.has('tm-2') ? [['t2', 'tm-2']] : []
    )
    expect(alone.get('t2')?.get('tm-2')).toEqual(read.get('t2')?.get('tm-2'))
  }
}

/** All that is stored of counts, by their keys. */
async function stored(tx: Tx) {
  const groups = await tx.selectFrom('group_totals').selectAll().execute()
  const name = new Map(
    groups.map((g) => [g.id, [g.scope_id, g.console_revision_id, g.evidence, g.method, g.first_power].join(' ')])
  )
  const days = await tx.selectFrom('day_counts').selectAll().execute()
  const lives = await tx.selectFrom('life_counts').selectAll().execute()
  return {
    groups: groups.map((g) => `${name.get(g.id)} ${g.board_id} ${g.totals_json}`).sort(),
    days: days.map((d) => `${name.get(d.group_id)} ${d.block} ${Buffer.from(d.counts).toString('hex')}`).sort(),
    lives: lives.map(({ group_id, ...l }) => `${name.get(group_id)} ${JSON.stringify(l)}`).sort(),
    boards: await tx.selectFrom('counted_boards').selectAll().execute()
  }
}

describe('stored counts', () => {
  it('are what the rows give, in every slice, whatever is filed, said and excluded, and stay the same when counted anew', async () => {
    let taken = 0
    await fc.assert(
      fc.asyncProperty(steps, (story) =>
        inWorld(async (db) => {
          const played = await play(db, story)
          taken += played.taken
          await db.transaction().execute(async (tx) => {
            await expectTrue(tx)
            const kept = await stored(tx)
            await recountBoard(tx, 'b1')
            if (played.reports.length > 0) expect(kept).toEqual(await stored(tx))
          })
        })
      ),
      { numRuns: 16, seed: 20_261_201 }
    )
    expect(taken).toBeGreaterThan(150)
  })

  it('are known at the end of the last day on which something was filed, and not a day before', () =>
    inWorld(async (db) => {
      const current = (asOf: Day) => db.transaction().execute((tx) => areCountsCurrent(tx, 'b1', asOf))
      expect(await current(endOfTime)).toBe(false)
      const { reports: filed, today } = await play(db, [fitted(), { do: 'wait', days: 200 }, ran(0)])
      expect(filed).toHaveLength(1)
      expect([await current(addDays(today, -1)), await current(today)]).toEqual([false, true])
    }))

  it('come to nothing with their last unit', () =>
    inWorld(async (db) => {
      const { reports: filed } = await play(db, [fitted(), { do: 'wait', days: 90 }, ran(0)])
      await db.transaction().execute(async (tx) => {
        await withCounts(tx, filed[0]!, async () => {
          await tx.deleteFrom('check_ins').execute()
          await tx.deleteFrom('install_reports').execute()
        })
        const left = await stored(tx)
        expect({ ...left, boards: [] }).toEqual({ groups: [], days: [], lives: [], boards: [] })
      })
    }))

  it('stay as they were when the transaction is rolled back', () =>
    inWorld(async (db) => {
      await play(db, [fitted(), fitted({ tag: 'BT-1' })])
      const read = () => db.transaction().execute(stored)
      const before = await read()
      const undone = new Error('undone')
      const work = db.transaction().execute(async (tx) => {
        await withCounts(tx, 'new', () => reports.insertReport(tx, row('new')))
        expect(await stored(tx)).not.toEqual(before)
        throw undone
      })
      await expect(work).rejects.toBe(undone)
      expect(await read()).toEqual(before)
    }))

  it('are the same whether a history is written in one transaction or in several', async () => {
    const write = (parts: 1 | 2) =>
      inWorld(async (db) => {
        const first = (tx: Tx) => withCounts(tx, 'r1', () => reports.insertReport(tx, row('r1')))
        const then = (tx: Tx) => withCounts(tx, 'r1', () => reports.insertCheckIn(tx, said('r1')))
        if (parts === 1) await db.transaction().execute(async (tx) => void (await first(tx), await then(tx)))
        else for (const part of [first, then]) await db.transaction().execute(part)
        return db.transaction().execute(stored)
      })
    expect(await write(1)).toEqual(await write(2))
  })
})

describe('before the server serves', () => {
  it('boards are counted whose counts cannot be read, and only those', () =>
    inWorld(async (db) => {
      const told: string[] = []
      const count = () => countMissing(db, (board, { reports: n }) => void told.push(`${board} ${n}`))
      await play(db, [fitted(), fitted()])
      await count()
      expect(told).toEqual([])
      const before = await db.transaction().execute(stored)
      for (const change of [{ rules: countingRules - 1 }, { uncounted: '*' }])
        await db.updateTable('counted_boards').set(change).execute().then(count)
      await db.deleteFrom('counted_boards').execute().then(count)
      expect(told).toEqual(['buttress 2', 'buttress 2', 'buttress 2'])
      expect(await db.transaction().execute(stored)).toEqual(before)
    }))
})

describe('what is written past the counts', () => {
  const isCurrent = (db: Db) => db.transaction().execute((tx) => areCountsCurrent(tx, 'b1', endOfTime))

  it.each<[string, (tx: Tx, id: string) => Promise<unknown>]>([
    ['a report', (tx) => reports.insertReport(tx, row('past'))],
    ['a check-in', (tx, id) => reports.insertCheckIn(tx, said(id))],
    [
      'a failure',
      (tx, id) =>
        reports.insertFailure(tx, {
          report_id: id,
          found_on: '2026-01-01',
          cause: 'board',
          created_at: '2026-01-01T13:00:00.000Z'
        })
    ],
    [
      'an exclusion',
      (tx, id) => reports.markExcluded(tx, id, 'stu', '2026-01-02T00:00:00.000Z', { kind: 'duplicate', reason: 'x' })
    ],
    ['another day', (tx) => tx.updateTable('install_reports').set({ installed_on: '2025-01-01' }).execute()],
    ['another batch', (tx) => tx.updateTable('units').set({ batch_id: 't1' }).where('tag', '=', 'BT-2').execute()]
  ])('%s: the counts are not read until they are mended by the next writer', async (_what, write) =>
    inWorld(async (db) => {
      const { reports: filed } = await play(db, [fitted({ tag: 'BT-2' }), fitted()])
      expect(await isCurrent(db)).toBe(true)
      await db.transaction().execute((tx) => write(tx, filed[0]!))
      expect(await isCurrent(db)).toBe(false)
      await play(db, [fitted()])
      expect(await isCurrent(db)).toBe(true)
      await db.transaction().execute(expectTrue)
    })
  )

  it('also when a writer through the counts writes about another report than it says', () =>
    inWorld(async (db) => {
      const { reports: filed } = await play(db, [fitted(), fitted()])
      await db.transaction().execute(async (tx) => {
        await withCounts(tx, filed[0]!, () => reports.insertCheckIn(tx, said(filed[1]!)))
        expect(await areCountsCurrent(tx, 'b1', endOfTime)).toBe(true)
        await expectTrue(tx)
      })
    }))

  it('notes and names change nothing', () =>
    inWorld(async (db) => {
      await play(db, [fitted()])
      await db.updateTable('install_reports').set({ notes: 'Fine.', reporter_id: null }).execute()
      expect(await isCurrent(db)).toBe(true)
    }))

  it.each(['group_totals', 'day_counts', 'life_counts'] as const)(
    'a wrong row of %s keeps nobody from writing: it is noticed, and the board is counted anew',
    (table) =>
      inWorld(async (db) => {
        const told = vi.spyOn(process.stderr, 'write').mockReturnValue(true)
        const { reports: filed } = await play(db, [fitted(), fitted()])
        if (table === 'group_totals') await db.updateTable(table).set({ totals_json: '{"fitted":1}' }).execute()
        else await db.deleteFrom(table).execute()
        await db.transaction().execute(async (tx) => {
          await withCounts(tx, filed[0]!, () => tx.deleteFrom('install_reports').where('id', '=', filed[0]!).execute())
          expect(await areCountsCurrent(tx, 'b1', endOfTime)).toBe(true)
          await expectTrue(tx)
        })
        expect(told).toHaveBeenCalledWith(expect.stringContaining('counts-wrong'))
        told.mockRestore()
      })
  )

  it('a board of very many reports is left to the next start, and not read until then', () =>
    inWorld(async (db) => {
      const { reports: filed } = await play(db, [fitted()])
      await db.transaction().execute(async (tx) => {
        for (let i = 0; i < maxRecountedAtOnce; i++) await reports.insertReport(tx, row(`more ${i}`))
        await withCounts(tx, filed[0]!, () => reports.insertCheckIn(tx, said(filed[0]!)))
      })
      expect(await isCurrent(db)).toBe(false)
      await countMissing(db, () => {})
      expect(await isCurrent(db)).toBe(true)
      await db.transaction().execute(expectTrue)
    }))
})

const fitted = (change: Partial<Extract<Step, { do: 'file' }>> = {}): Step => ({
  do: 'file',
  release: 'v1',
  revision: 'tm-1',
  tag: null,
  evidence: evidenceGrades[0],
  method: null,
  firstPower: 'works',
  cause: 'board',
  fitted: 3,
  ...change
})
const ran = (of: number): Step => ({ do: 'say', of, statement: 'running', daysAgo: 0, ranBefore: null, cause: 'board' })
const row = (id: string) => ({
  id,
  release_id: 'v1',
  console_revision_id: 'tm-1',
  unit_tag: 'BT-1',
  reporter_id: 'ann',
  installed_on: '2025-12-30',
  filed_on: '2026-01-01',
  filed_at: '2026-01-01T12:00:00.000Z',
  evidence: 'measured' as const,
  first_power: 'works' as const
})
const said = (id: string) => ({
  id: `of-${id}`,
  report_id: id,
  statement: 'running' as const,
  stated_on: '2026-03-01',
  filed_at: '2026-03-01T12:00:00.000Z'
})
