import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { chosenAddress, fitQuestion } from '~/domain/fit/fit-question.server'
import { insertRows } from '~db/seed/insert-rows'
import { worldRows } from '~db/seed/world-rows'
import { fillReportWorld, openTestDb } from '../../../tests/factories/report-world'
import { consoleBySlug, listConsoles, revisionByCode } from './consoles.server'

let world: Awaited<ReturnType<typeof openTestDb>>
let small: Awaited<ReturnType<typeof openTestDb>>

beforeAll(async () => {
  world = await openTestDb()
  const rows = worldRows(1)
  await world.db.transaction().execute(async (tx) => {
    for (const table of ['users', 'consoles', 'console_revisions', 'boards', 'board_maintainers', 'fit_claims'] as const)
      await insertRows(tx, table, rows[table])
  })
  small = await openTestDb()
  await fillReportWorld(small.db)
  const report = (id: string, revision: string, isExcluded = false) => ({
    id,
    release_id: 'v1',
    console_revision_id: revision,
    installed_on: '2020-02-01',
    filed_on: '2020-02-02',
    filed_at: '2020-02-02T10:00:00.000Z',
    evidence: 'measured' as const,
    first_power: 'works' as const,
    ...(isExcluded ? { excluded_at: '2020-03-01T10:00:00.000Z', exclusion_kind: 'duplicate' as const } : {})
  })
  await small.db
    .insertInto('install_reports')
    .values([report('r1', 'tm-1'), report('r2', 'tm-1')])
    .execute()
  await small.db
    .insertInto('install_reports')
    .values(report('r3', 'tm-1', true))
    .execute()
})
afterAll(async () => {
  await world?.close()
  await small?.close()
})

describe('listConsoles', () => {
  it('gives them by address, page by page', async () => {
    const first = await listConsoles(world.db, { limit: 1 })
    expect(first.consoles.map((c) => [c.slug, c.boards])).toEqual([['talvi-16', 1]])
    expect(first.consoles[0]!.revisions.map((r) => r.code)).toEqual(['TM-1', 'TM-2', 'TM-3', 'TM-4', 'TM-5', 'TM-6'])
    expect(first.next).toBe('talvi-16')
    const second = await listConsoles(world.db, { limit: 1, after: first.next })
    expect(second.consoles.map((c) => [c.slug, c.boards])).toEqual([['talvi-pocket', 2]])
    expect(second.next).toBeNull()
  })

  it('is empty past the end', async () => {
    expect(await listConsoles(world.db, { after: 'zzz' })).toEqual({ consoles: [], next: null })
  })
})

describe('consoleBySlug', () => {
  it('counts the reports that count, and holds a board without a claim to be untested', async () => {
    const { revisions } = await consoleBySlug(small.db, 'talvi-16')
    expect(revisions.map((r) => [r.code, r.reports, r.boards[0]!.claim, r.boards[0]!.newest])).toEqual([
      ['TM-1', 2, 'untested', '1.0.0'],
      ['TM-2', 0, 'fits-with-care', '1.0.0']
    ])
  })

  it('knows a console without boards', async () => {
    const { revisions } = await consoleBySlug(small.db, 'talvi-pocket')
    expect(revisions.map((r) => [r.code, r.boards])).toEqual([['TP-1', []]])
  })

  it('says where nothing is', async () => {
    await expect(consoleBySlug(world.db, 'talvi-64')).rejects.toMatchObject({ kind: 'not-found' })
  })
})

describe('revisionByCode', () => {
  it('knows its neighbours, and does not mind the case', async () => {
    const { revision, before, after } = await revisionByCode(world.db, 'talvi-16', 'tm-1')
    expect([revision.code, before, after]).toEqual(['TM-1', null, 'TM-2'])
  })

  it('names the revisions there are', async () => {
    await expect(revisionByCode(world.db, 'talvi-pocket', 'TM-1')).rejects.toThrow('Its revisions are TP-1, TP-2, TP-3, TP-4.')
  })
})

describe('fitQuestion', () => {
  const ask = (query: string) => fitQuestion(world.db, new URLSearchParams(query))

  it('answers nothing before a console is chosen', async () => {
    expect(await ask('')).toMatchObject({ console: null, revision: null, errors: [], answer: null })
  })

  it('answers by revision, what fits first', async () => {
    const { answer } = await ask('console=talvi-pocket&revision=TP-1')
    expect(answer!.revision!.boards.map((b) => [b.name, b.claim])).toEqual([
      ['Almanac', 'fits'],
      ['Sundial', 'does-not-fit']
    ])
  })

  it('answers for all revisions while it is not known', async () => {
    const { answer, revision } = await ask('console=talvi-16&revision=')
    expect(revision).toBeNull()
    expect(answer!.boards[0]!.cells.map((c) => c.claim)).toEqual([
      'fits-with-care',
      'fits',
      'fits',
      'untested',
      'fits',
      'fits-with-care'
    ])
  })

  it('says so when the revision is of another console, and still answers for the console', async () => {
    const { errors, answer, revision } = await ask('console=talvi-pocket&revision=TM-3')
    expect(errors).toEqual([{ path: 'revision', message: 'The Talvi Pocket has no revision TM-3. Choose again.' }])
    expect(answer!.revision).toBeNull()
    expect(revision).toBeNull()
  })

  it('offers every console with its revisions', async () => {
    const { consoles } = await ask('')
    expect(consoles.map((c) => [c.slug, c.revisions.length])).toEqual([
      ['talvi-16', 6],
      ['talvi-pocket', 4]
    ])
  })

  it.each([
    ['machine=talvi-16/TM-3', '/fit?console=talvi-16&revision=TM-3'],
    ['machine=talvi-16', '/fit?console=talvi-16'],
    ['machine=', '/fit?console='],
    ['machine=a/b/c', '/fit?console=a&revision=b'],
    ['machine=%2F%2Felsewhere.example', '/fit?console='],
    ['console=talvi-16', null]
  ])('turns the choice %s into the address %s', (query, address) => {
    expect(chosenAddress(new URLSearchParams(query))).toBe(address)
  })

  it('says so when there is no such console', async () => {
    expect(await ask('console=nothing')).toMatchObject({ errors: [{ path: 'console' }], answer: null })
  })
})
