import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { insertRows } from '~db/seed/insert-rows'
import { worldRows } from '~db/seed/world-rows'
import { textOf, type Browser } from './browser'
import { startSite, type Site } from './harness'

let site: Site
let visitor: Browser
beforeAll(async () => {
  site = await startSite()
  const rows = worldRows(1)
  await site.query((db) =>
    db.transaction().execute(async (tx) => {
      for (const table of ['users', 'consoles', 'console_revisions', 'boards', 'board_maintainers', 'fit_claims'] as const)
        await insertRows(tx, table, rows[table])
    })
  )
  visitor = site.browser()
})
afterAll(() => site?.close())

const words = async (path: string, status = 200) => textOf(await visitor.page(path, status))

describe('the pages of consoles', () => {
  it('list them, with their revisions told apart', async () => {
    expect(await words('/consoles')).toMatch(/Talvi 16.*TM-1 to TM-6, 6 of them.*Talvi Pocket/)
    const page = await words('/consoles/talvi-16')
    expect(page).toMatch(/TM-1.*Large finned heat sink.*TM-6.*Code printed on copper/)
    expect(page).toContain('L1 meets the heat sink up to 1.1.1. Take 2.0.0.')
  })

  it('go on after a page and end in words', async () => {
    expect(await words('/consoles?after=talvi-16')).not.toContain('TM-1 to TM-6')
    expect(await words('/consoles?after=zzz')).toContain('The list ends here.')
  })

  it('show a revision, with a way to its neighbours', async () => {
    const html = await visitor.page('/consoles/talvi-16/TM-3')
    expect(html).toContain('href="/consoles/talvi-16/TM-2"')
    expect(html).toContain('href="/consoles/talvi-16/TM-4"')
    expect(textOf(html)).toContain('Drawn on this revision.')
  })

  it('lead a code in lower case to the one page', async () => {
    const answer = await visitor.fetch('/consoles/talvi-16/tm-3')
    expect([answer.status, answer.headers.get('Location')]).toEqual([301, '/consoles/talvi-16/TM-3'])
  })

  it.each([
    ['/consoles/talvi-64', 'There is no console at /consoles/talvi-64.'],
    ['/consoles/talvi-16/TM-9', 'Its revisions are TM-1, TM-2'],
    [`/consoles/${'x'.repeat(3000)}`, 'There is no console'],
    ['/consoles/%3Cscript%3E/%00', 'There is no console']
  ])('answer 404 in words to %s', async (path, message) => {
    expect(await words(path, 404)).toContain(message)
  })
})

describe('what fits', () => {
  it('asks, and answers by address', async () => {
    expect(await words('/fit')).toContain('I have a')
    expect(await words('/fit?console=talvi-pocket&revision=TP-1')).toMatch(/Almanac.*fits.*Sundial.*does not fit.*only reflects/)
    expect(await words('/fit?console=talvi-16&revision=')).toContain('For the Talvi 16, by revision')
  })

  it.each([
    ['console=talvi-pocket&revision=TM-3', 'The Talvi Pocket has no revision TM-3. Choose again.'],
    ['console=nothing', 'There is no such console. Choose one of the list.'],
    [`console=talvi-16&revision=${'9'.repeat(2000)}`, 'has no revision 9999'],
    ['console=talvi-16&console=talvi-pocket&revision=%00', 'has no revision']
  ])('answers 400 with the form as it was to %s', async (query, message) => {
    const page = await words(`/fit?${query}`, 400)
    expect(page).toContain(message)
    expect(page).toContain('I have a')
  })
})

describe('the guides', () => {
  it('are listed and shown', async () => {
    const html = await visitor.page('/guides')
    for (const page of ['safety', 'reporting', 'figures', 'releasing', 'problems'])
      expect(html).toContain(`href="/guides/${page}"`)
    expect(await visitor.page('/guides/problems')).toContain('id="conflict"')
    expect(await words('/guides/safety')).toContain('Capacitors keep their charge')
  })

  it.each(['nothing', '..%2F..%2Fpackage.json', '%2e%2e%2fpackage', 'safety.md', '__proto__', 'SAFETY'])(
    'are none at /guides/%s',
    async (page) => {
      expect(await words(`/guides/${page}`, 404)).toMatch(/no (guide|sheet)|no such/i)
    }
  )
})

type Problem = { type: string; status: number; errors: { path: string }[] }

describe('the API of consoles', () => {
  it('gives pages that lead to one another', async () => {
    const first = await (await visitor.fetch('/api/v1/consoles?limit=1')).json()
    expect(first).toMatchObject({
      consoles: [{ slug: 'talvi-16', kind: 'home', revisions: ['TM-1', 'TM-2', 'TM-3', 'TM-4', 'TM-5', 'TM-6'], boards: 1 }],
      next: '/api/v1/consoles?limit=1&after=talvi-16'
    })
    const second = await (await visitor.fetch(first.next)).json()
    expect(second).toMatchObject({ consoles: [{ slug: 'talvi-pocket' }], next: null })
  })

  it('gives a console with its revisions and the claims about them', async () => {
    const answer = await visitor.fetch('/api/v1/consoles/talvi-pocket')
    expect(answer.headers.get('Content-Type')).toContain('application/json')
    const body = await answer.json()
    expect(body).toMatchObject({ slug: 'talvi-pocket', maker: 'Talvi', links: { self: '/api/v1/consoles/talvi-pocket' } })
    expect(body.revisions[0]).toMatchObject({
      code: 'TP-1',
      reports: 0,
      fit: [
        { board: 'almanac', claim: 'fits' },
        { board: 'sundial', claim: 'does-not-fit', reason: 'No lamp to replace: the screen only reflects.' }
      ]
    })
  })

  it('answers 304 to who has it already', async () => {
    const etag = (await visitor.fetch('/api/v1/consoles')).headers.get('ETag')!
    const again = await visitor.fetch('/api/v1/consoles', { headers: { 'If-None-Match': etag } })
    expect(again.status).toBe(304)
  })

  it.each([
    ['/api/v1/consoles?limit=0', 400, 'limit'],
    ['/api/v1/consoles?limit=ten', 400, 'limit'],
    ['/api/v1/consoles?limit=1&limit=2', 400, 'limit'],
    ['/api/v1/consoles?after=', 400, 'after'],
    ['/api/v1/consoles?offset=3', 400, 'offset'],
    ['/api/v1/consoles/talvi-16?x=1', 400, 'x'],
    ['/api/v1/consoles/talvi-64', 404, null]
  ])('refuses %s as a problem', async (path, status, at) => {
    const answer = await visitor.fetch(path)
    expect(answer.status).toBe(status)
    expect(answer.headers.get('Content-Type')).toBe('application/problem+json')
    const problem = (await answer.json()) as Problem
    expect(problem.status).toBe(status)
    expect(problem.type).toMatch(/^\/guides\/problems#/)
    expect(problem.errors.map((e) => e.path)).toEqual(at === null ? [] : [at])
  })
})
