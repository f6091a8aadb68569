import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import type { RecountAnswer } from '~/domain/reliability/recount-database.server'
import { holdDataFolder, openDb, type Db } from '~db/client.server'
import { migrate } from '~db/migrate'
import { addBatches, play, type Step } from '../../tests/factories/report-sequence'
import { fillReportWorld } from '../../tests/factories/report-world'
import { runFettle } from './run-fettle'

const folder = mkdtempSync(join(tmpdir(), 'fettle-recount-'))
const file = join(folder, 'fettle.sqlite')
let db: Db

async function run(...args: string[]) {
  let out = ''
  let err = ''
  const io = { out: (text: string) => void (out += text), err: (text: string) => void (err += text), stdin: Readable.from([]) }
  const code = await runFettle(['recount', ...args], io)
  return { code, out, err, answer: code === 2 ? null : (JSON.parse(out) as RecountAnswer) }
}

const fitted = (firstPower: 'works' | 'worse'): Step => ({
  do: 'file',
  release: 'v1',
  revision: 'tm-1',
  tag: 'BT-1',
  evidence: 'measured',
  method: 'iron',
  firstPower,
  cause: 'fitting',
  fitted: 3
})

beforeAll(async () => {
  db = openDb(file)
  await migrate(db)
  await fillReportWorld(db)
  await addBatches(db)
  await play(db, [
    fitted('works'),
    fitted('worse'),
    { do: 'wait', days: 90 },
    { do: 'say', of: 0, statement: 'failed', daysAgo: 40, ranBefore: 1, cause: 'board' }
  ])
})
beforeEach(() => void vi.stubEnv('DATA_DIR', folder))
afterEach(() => void vi.unstubAllEnvs())
afterAll(async () => {
  await db.destroy()
  rmSync(folder, { recursive: true })
})

/** Everything stored of counts. */
const stored = async () => ({
  groups: await db.selectFrom('group_totals').selectAll().orderBy('id').execute(),
  days: await db.selectFrom('day_counts').selectAll().orderBy('group_id').orderBy('block').execute(),
  lives: await db.selectFrom('life_counts').selectAll().orderBy('group_id').orderBy('grain').orderBy('lower').execute(),
  boards: await db.selectFrom('counted_boards').selectAll().execute()
})
const group = () =>
  db
    .selectFrom('group_totals')
    .where('scope_id', '=', 't1')
    .where('evidence', '=', 'measured')
    .where('method', '=', '*')
    .where('first_power', '=', '*')
    .select('id')
    .executeTakeFirstOrThrow()

describe('recount', () => {
  it('finds that the counts kept by the writers are what the rows give', async () => {
    const before = await stored()
    for (const args of [[], ['--check']]) {
      const { code, answer, err } = await run(...args)
      const rows = before.groups.length + before.days.length + before.lives.length
      expect(answer).toEqual({ boards: 1, reports: 2, rows, differing: 0, mended: false, differences: [] })
      expect([code, err]).toEqual([0, 'Counting buttress ...\n'])
      expect(await stored()).toEqual(before)
    }
    expect(before.lives.length).toBeGreaterThan(20)
  })

  it.each<[string, string, () => Promise<unknown>, object]>([
    [
      'one block',
      'days',
      async () =>
        db
          .updateTable('day_counts')
          .set({ counts: Uint8Array.of(0, 3) })
          .where('group_id', '=', (await group()).id)
          .where('block', '=', 0)
          .execute(),
      { place: 'block 0', stored: 'entered 0: 3', counted: 'entered 0: 2, failed:fitting 0: 1, ran:fitting 0: 1' }
    ],
    [
      'one block that cannot be read',
      'days',
      async () =>
        db
          .updateTable('day_counts')
          .set({ counts: Uint8Array.of(200) })
          .where('group_id', '=', (await group()).id)
          .where('block', '=', 0)
          .execute(),
      { place: 'block 0', stored: expect.stringContaining('broken'), counted: expect.stringContaining('entered 0: 2') }
    ],
    [
      'a block that is gone',
      'days',
      async () =>
        db
          .deleteFrom('day_counts')
          .where('group_id', '=', (await group()).id)
          .where('block', '=', 0)
          .execute(),
      { place: 'block 0', stored: null, counted: expect.stringContaining('entered 0: 2') }
    ],
    [
      'one life',
      'lives',
      async () =>
        db
          .updateTable('life_counts')
          .set({ count: 7 })
          .where('group_id', '=', (await group()).id)
          .where('grain', '=', 1)
          .where('lower', '=', 0)
          .execute(),
      { place: 'grain 1, entered 0, ran until 0, failed by 0 (fitting)', stored: 7, counted: 1 }
    ],
    [
      'a life that never was',
      'lives',
      async () =>
        db
          .insertInto('life_counts')
          .values({ group_id: (await group()).id, grain: 14, entry: 14, lower: 28, upper: -1, cause: '', count: 1 })
          .execute(),
      { place: 'grain 14, entered 14, ran until 28', stored: 1, counted: null }
    ],
    [
      'one total',
      'totals',
      async () =>
        db
          .updateTable('group_totals')
          .set({ totals_json: '{"fitted":3}' })
          .where('id', '=', (await group()).id)
          .execute(),
      { place: '', stored: '{"fitted":3}', counted: expect.stringContaining('"fitted":2') }
    ]
  ])('finds and mends %s', async (_what, kind, tamper, difference) => {
    const before = await stored()
    await tamper()
    const tampered = await stored()
    expect(tampered).not.toEqual(before)
    const found = {
      ...{ board: 'buttress', kind, of: '1.0.0/2020-01', revision: 'TM-1', evidence: 'measured', method: '*', firstPower: '*' },
      ...difference
    }
    const checked = await run('--check')
    expect(checked.answer).toMatchObject({ differing: 1, mended: false, differences: [found] })
    expect([checked.code, await stored()]).toEqual([1, tampered])
    const mended = await run()
    expect(mended.answer).toMatchObject({ differing: 1, mended: true, differences: [found] })
    expect([mended.code, await stored()]).toEqual([1, before])
    expect((await run()).code).toBe(0)
  })

  it('finds and mends a board that was never counted, naming no more than a hundred differences', async () => {
    const before = await stored()
    for (const table of ['life_counts', 'day_counts', 'group_totals', 'counted_boards'] as const)
      await db.deleteFrom(table).execute()
    const { code, answer } = await run()
    expect(code).toBe(1)
    expect(answer!.differences[0]).toMatchObject({ board: 'buttress', kind: 'board', place: 'rules', stored: null, counted: 1 })
    expect(answer!.differences.length).toBeLessThanOrEqual(100)
    expect(answer!.differing).toBe(1 + before.groups.length + before.days.length + before.lives.length)
    const after = await stored()
    expect(after.groups.map(({ id: _id, ...rest }) => JSON.stringify(rest)).sort()).toEqual(
      before.groups.map(({ id: _id, ...rest }) => JSON.stringify(rest)).sort()
    )
    expect(after.boards).toEqual(before.boards)
    expect((await run()).code).toBe(0)
  })

  it('finds what was written past the counts', async () => {
    await db.updateTable('install_reports').set({ installed_on: '2025-12-01' }).where('first_power', '=', 'worse').execute()
    const { code, answer } = await run()
    expect([code, answer!.mended]).toEqual([1, true])
    expect(answer!.differences[0]).toMatchObject({ kind: 'board', place: 'written past the counts' })
    expect((await run()).code).toBe(0)
  })

  it('leaves a database alone that another process writes to, but checks it', async () => {
    const release = holdDataFolder(file)
    try {
      const { code, out, err } = await run()
      expect([code, out]).toEqual([2, ''])
      expect((JSON.parse(err) as { detail: string }).detail).toMatch(/Another Fettle process is writing to .* With --check/)
      expect((await run('--check')).code).toBe(0)
    } finally {
      release()
    }
  })

  it.each<[string, string[], () => string, number]>([
    ['an unknown option', ['--fast'], () => folder, 400],
    ['a file', ['a.sqlite'], () => folder, 400],
    ['a folder without a database', ['--check'], () => join(folder, 'none'), 404],
    ['a folder without a database, to mend', [], () => join(folder, 'none'), 404],
    ['a file that is no database', ['--check'], () => notes(), 415],
    ['a file that is no database, to mend', [], () => notes(), 415]
  ])('bad input: %s: a problem object on standard error, exit 2', async (_what, args, dir, status) => {
    vi.stubEnv('DATA_DIR', dir())
    const { code, out, err } = await run(...args)
    expect([code, out]).toEqual([2, ''])
    expect(JSON.parse(err)).toMatchObject({ status, title: expect.any(String), detail: expect.any(String) })
  })
})

const notes = () => {
  const dir = mkdtempSync(join(folder, 'notes-'))
  writeFileSync(join(dir, 'fettle.sqlite'), 'Bread, milk, solder. '.repeat(100))
  return dir
}
