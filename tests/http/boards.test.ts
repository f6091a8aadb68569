import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { textOf, type Browser } from './browser'
import { addConsole, boardForm } from './bundles'
import { startSite, type Site } from './harness'

let site: Site
let owner: Browser
let other: Browser
beforeAll(async () => {
  site = await startSite()
  await site.query(addConsole)
  owner = await site.signInByGithub('vigga')
  other = await site.signInByGithub('tarn')
})
afterAll(() => site?.close())

const audit = () =>
  site.query((db) => db.selectFrom('audit_log').select(['action', 'subject_kind']).where('action', 'like', 'board.%').execute())

describe('opening a board', () => {
  it('sends a visitor to sign in and back', async () => {
    const answer = await site.browser().fetch('/boards/new')
    expect([answer.status, answer.headers.get('Location')]).toEqual([302, '/sign-in?return=%2Fboards%2Fnew'])
    const posted = await site.browser().fetch('/boards/new', { form: boardForm })
    expect(posted.status).toBe(302)
    expect(posted.headers.get('Location')).toContain('/sign-in')
  })

  it('comes back filled in, with what is wrong at each field', async () => {
    const answer = await owner.fetch('/boards/new', {
      form: { ...boardForm, name: '', licence: 'Open', console: 'nothing', summary: 'x'.repeat(161) }
    })
    expect(answer.status).toBe(400)
    const html = await answer.text()
    expect(textOf(html)).toContain('Three fields to mend before the board can be opened.')
    expect(textOf(html)).toContain('“Open” is not on the SPDX licence list')
    expect(html).toContain('value="Open"')
    expect(html).toMatch(/id="name"[^>]*aria-invalid="true"|aria-invalid="true"[^>]*id="name"/)
  })

  it.each([
    ['an unknown console', { console: 'nothing' }, 400, 'Choose the console'],
    ['a reserved address', { slug: 'new' }, 400, 'is kept for a page of the site'],
    ['a name without letters', { name: '日本' }, 400, 'No address can be made from the name'],
    ['an address of odd letters', { slug: 'a/b' }, 400, 'Small letters a to z'],
    ['two lines in a name', { name: 'a\nb' }, 400, 'is one line of text'],
    ['a long description', { description: 'x'.repeat(20_001) }, 400, '20 000 characters']
  ])('refuses %s', async (_, more, status, words) => {
    const answer = await owner.fetch('/boards/new', { form: { ...boardForm, ...more } })
    expect(answer.status).toBe(status)
    expect(textOf(await answer.text())).toContain(words)
  })

  it('opens it, makes the member its owner, and asks next what it fits', async () => {
    const answer = await owner.fetch('/boards/new', { form: { ...boardForm, licence: 'cern-ohl-p-2.0' } })
    expect([answer.status, answer.headers.get('Location')]).toEqual([303, '/boards/buttress/fit?opened=1'])
    const text = textOf(await site.browser().page('/boards/buttress'))
    for (const part of [
      'Buttress',
      'Holds the 5 V rail up.',
      'CERN-OHL-P-2.0',
      'the electrolytic cluster',
      'Vigga Testmark (owner)',
      'untested'
    ])
      expect(text).toContain(part)
    expect(text).not.toContain('Draft a release')
    expect(textOf(await owner.page('/bench'))).toContain('Buttress')
    expect(await audit()).toContainEqual({ action: 'board.open', subject_kind: 'board' })
  })

  it('takes an address once', async () => {
    const answer = await other.fetch('/boards/new', { form: boardForm })
    expect(answer.status).toBe(409)
    expect(textOf(await answer.text())).toContain('/boards/buttress is taken')
  })
})

describe('editing a board', () => {
  it('is for its maintainers', async () => {
    for (const path of ['/boards/buttress/edit', '/boards/buttress/fit', '/boards/buttress/releases/new']) {
      expect((await other.fetch(path)).status).toBe(403)
      expect((await other.fetch(path, { form: boardForm })).status).toBe(403)
      expect((await site.browser().fetch(path)).status).toBe(302)
    }
    expect((await owner.fetch('/boards/nothing/edit')).status).toBe(404)
  })

  it('saves, and shows Markdown harmless', async () => {
    const form = {
      ...boardForm,
      summary: 'Holds it up.',
      description: '**Bold** <script>alert(1)</script> [x](javascript:alert(1))'
    }
    const answer = await owner.fetch('/boards/buttress/edit', { form })
    expect([answer.status, answer.headers.get('Location')]).toEqual([303, '/boards/buttress?done=saved'])
    const html = await site.browser().page('/boards/buttress')
    expect(html).toContain('<strong>Bold</strong>')
    expect(html).not.toContain('alert(1)</script>')
    expect(html).not.toContain('href="javascript')
    const wrong = await owner.fetch('/boards/buttress/edit', { form: { ...form, name: '' } })
    expect(wrong.status).toBe(400)
  })

  it('states what it fits, with a reason where one is needed', async () => {
    const wrong = await owner.fetch('/boards/buttress/fit', { form: { 'claim.tm-1': 'does-not-fit', 'claim.tm-2': 'perhaps' } })
    expect(wrong.status).toBe(400)
    const text = textOf(await wrong.text())
    expect(text).toContain('Say in one sentence why')
    expect(text).toContain('Choose one of the four.')
    const answer = await owner.fetch('/boards/buttress/fit', {
      form: { 'claim.tm-1': 'does-not-fit', 'reason.tm-1': 'L1 meets the heat sink.', 'claim.tm-2': 'fits' }
    })
    expect(answer.status).toBe(303)
    expect(textOf(await site.browser().page('/boards/buttress'))).toContain('does not fit L1 meets the heat sink.')
  })

  it('refuses another site', async () => {
    expect((await owner.fetch('/boards/buttress/edit', { form: boardForm, from: 'https://evil.example' })).status).toBe(403)
    expect((await owner.fetch('/boards/buttress/edit', { form: boardForm, from: null })).status).toBe(403)
  })
})

describe('the list of boards', () => {
  it('finds by name and summary, and says when nothing is found', async () => {
    expect(textOf(await site.browser().page('/boards?q=holds'))).toContain('Buttress')
    const none = textOf(await site.browser().page('/boards?q=%25'))
    expect(none).toContain('No board has “%” in its name or summary.')
  })
  it('answers a place that it never gave with 400', async () => {
    expect((await site.browser().fetch('/boards?after=x')).status).toBe(400)
  })
  it('answers an unknown board with 404 that says so', async () => {
    expect(textOf(await site.browser().page('/boards/nothing', 404))).toContain('There is no board at /boards/nothing.')
  })
})

describe('GET /api/v1/boards', () => {
  const get = async (path: string, headers: Record<string, string> = {}) => site.browser().fetch(path, { headers })

  it('lists by name in pages that link on', async () => {
    for (const name of ['Almanac', 'sundial']) await owner.fetch('/boards/new', { form: { ...boardForm, name } })
    const first = await get('/api/v1/boards?limit=2')
    expect(first.headers.get('Content-Type')).toMatch(/^application\/json\b/)
    const page = (await first.json()) as { boards: { slug: string }[]; next: string }
    expect(page.boards.map((b) => b.slug)).toEqual(['almanac', 'buttress'])
    const second = (await (await get(page.next)).json()) as { boards: { slug: string }[]; next: null }
    expect([second.boards.map((b) => b.slug), second.next]).toEqual([['sundial'], null])
  })

  it('gives one board with its claims', async () => {
    const board = await (await get('/api/v1/boards/buttress')).json()
    expect(board).toMatchObject({
      slug: 'buttress',
      licence: 'CERN-OHL-P-2.0',
      console: { slug: 'talvi-16', name: 'Talvi 16' },
      newest: null,
      fit: [
        { revision: 'TM-1', claim: 'does-not-fit', reason: 'L1 meets the heat sink.' },
        { revision: 'TM-2', claim: 'fits', reason: null }
      ]
    })
  })

  it('is kept by caches under a tag', async () => {
    const answer = await get('/api/v1/boards/buttress')
    expect(answer.headers.get('Cache-Control')).toBe('public, max-age=60')
    const etag = answer.headers.get('ETag')!
    const again = await get('/api/v1/boards/buttress', { 'If-None-Match': etag })
    expect([again.status, await again.text()]).toEqual([304, ''])
  })

  it.each([
    ['/api/v1/boards/nothing', 404, []],
    ['/api/v1/boards?limit=0', 400, ['limit']],
    ['/api/v1/boards?limit=abc&offset=1', 400, ['offset', 'limit']],
    ['/api/v1/boards?after=x', 400, ['after']],
    ['/api/v1/boards/buttress?x=1', 400, ['x']],
    ['/api/v1/boards/buttress/releases?after=latest', 400, ['after']],
    ['/api/v1/boards/buttress/releases/1.0.0', 404, []]
  ])('answers %s with problem details', async (path, status, paths) => {
    const answer = await get(path)
    expect([answer.status, answer.headers.get('Content-Type')]).toEqual([status, 'application/problem+json'])
    const problem = (await answer.json()) as { status: number; errors: { path: string }[] }
    expect(problem.status).toBe(status)
    expect(problem.errors.map((e) => e.path)).toEqual(paths)
  })
})
