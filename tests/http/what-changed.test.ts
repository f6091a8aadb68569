import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { textOf, type Browser } from './browser'
import { addConsole, answerAll, boardForm, demoBundle, publish, upload } from './bundles'
import { startSite, type Site } from './harness'

const at = (version: string) => `/boards/buttress/releases/${version}`
const draft = (version: string, boardRevision: string, layers: string) => ({
  version,
  boardRevision,
  layers,
  thicknessMm: '0.8',
  notes: 'Mine, *first*.'
})
const next = draft('1.1.0', 'B', '4')
const start = { intent: 'start-notes' }

let site: Site
let owner: Browser
let other: Browser

/** What stands in the field of the notes. */
const notesIn = (html: string) =>
  /<textarea[^>]*name="notes"[^>]*>([^<]*)<\/textarea>/
    .exec(html)![1]!
    .replace(/^\n/, '')
    .replaceAll('&#x27;', "'")
    .replaceAll('&amp;', '&')

beforeAll(async () => {
  site = await startSite()
  await site.query(addConsole)
  owner = await site.signInByGithub('vigga')
  other = await site.signInByGithub('tarn')
  await owner.fetch('/boards/new', { form: boardForm })
  await owner.fetch('/boards/buttress/releases/new', { form: draft('1.0.0', 'A', '2') })
  expect((await upload(owner, at('1.0.0'), demoBundle('buttress-1.0.0'))).status).toBe(303)
  await answerAll(owner, at('1.0.0'))
  expect((await publish(owner, at('1.0.0'))).status).toBe(303)
  await owner.fetch('/boards/buttress/releases/new', { form: next })
}, 120_000)
afterAll(() => site?.close())

describe('starting the notes with what changed', () => {
  it('waits for a checked bundle', async () => {
    expect(textOf(await owner.page(`${at('1.1.0')}/edit`))).toContain('the notes can start with what changed since 1.0.0')
    const early = await owner.fetch(`${at('1.1.0')}/edit`, { form: { ...next, ...start } })
    expect(early.status).toBe(409)
    expect(notesIn(await early.text())).toBe('Mine, *first*.')
  })

  it('comes back with them before what was typed, and saves nothing', async () => {
    expect((await upload(owner, at('1.1.0'), demoBundle('buttress-1.1.0'))).status).toBe(303)
    expect(await owner.page(`${at('1.1.0')}/edit`)).toContain('Start the notes with what changed')
    const typed = { ...next, finish: 'ENIG', notes: 'Typed <b> & more.\r\n\r\nTwo.' }
    const answer = await owner.fetch(`${at('1.1.0')}/edit`, { form: { ...typed, ...start } })
    expect(answer.status).toBe(200)
    const html = await answer.text()
    expect(textOf(html)).toContain('What changed since 1.0.0 stands before your notes now.')
    expect(html).toMatch(/<input[^>]*name="finish"[^>]*value="ENIG"|<input[^>]*value="ENIG"[^>]*name="finish"/)
    // From the two demo bundles' own lists: C15 came, C11 and C12 became smaller, ten parts moved.
    const notes = /<textarea[^>]*name="notes"[^>]*>([\s\S]*?)<\/textarea>/.exec(html)![1]!
    for (const line of [
      'Changed since 1.0.0:',
      '- New board revision: B (before A).',
      '- Copper layer 2 and copper layer 3 are new.',
      '- Copper top and copper bottom differ.',
      '- Copper layers to order: 4 (before 2).',
      '- Finish to order: ENIG (before not stated).',
      '- Added: **C15** (22uF, C_0805).',
      '- Moved: **C7**, 0.25 mm to the left.',
      '- Moved: **L1**, 0.06 mm to the left.'
    ])
      expect(notes).toContain(line)
    expect(notes).toContain('**C11**: footprint C_0402 (before C_0603); description')
    expect(notes).not.toContain('**C1**')
    expect(notes).toMatch(/\n\nTyped &lt;b&gt; &amp; more\.\r?\n\r?\nTwo\.$/)
    const stored = await site.query((db) =>
      db.selectFrom('releases').selectAll().where('version', '=', '1.1.0').executeTakeFirst()
    )
    expect([stored?.notes_md, stored?.declared_finish]).toEqual(['Mine, *first*.', null])
  })

  it('puts them there once', async () => {
    const once = await owner.fetch(`${at('1.1.0')}/edit`, { form: { ...next, ...start } })
    const notes = notesIn(await once.text())
    expect(notes.split('Changed since 1.0.0:')).toHaveLength(2)
    const twice = await owner.fetch(`${at('1.1.0')}/edit`, {
      form: { ...next, ...start, notes: notes.replace(/\n/g, '\r\n') }
    })
    expect(twice.status).toBe(200)
    const html = await twice.text()
    expect(textOf(html)).toContain('stands in the notes already')
    expect(notesIn(html).replace(/\r\n/g, '\n')).toBe(notes)
  })

  it('first wants a form that can be read, and notes that still fit', async () => {
    const wrong = await owner.fetch(`${at('1.1.0')}/edit`, { form: { ...next, ...start, thicknessMm: '80' } })
    expect(wrong.status).toBe(400)
    const html = await wrong.text()
    expect([html.includes('value="80"'), notesIn(html)]).toEqual([true, 'Mine, *first*.'])
    const long = 'x'.repeat(19_990)
    const full = await owner.fetch(`${at('1.1.0')}/edit`, { form: { ...next, ...start, notes: long } })
    expect(full.status).toBe(400)
    const page = await full.text()
    expect(textOf(page)).toContain('would pass 20 000 characters')
    expect(notesIn(page)).toBe(long)
  })

  it('is for its maintainers', async () => {
    const form = { ...next, ...start }
    expect((await other.fetch(`${at('1.1.0')}/edit`, { form })).status).toBe(404)
    expect((await site.browser().fetch(`${at('1.1.0')}/edit`, { form })).status).toBe(404)
    expect((await owner.fetch(`${at('1.0.0')}/edit`, { form })).status).toBe(403)
    for (const browser of [other, site.browser()])
      expect([302, 303, 403]).toContain((await browser.fetch(`${at('1.0.0')}/edit`, { form })).status)
  })
})

describe('what changed, on the page of a release', () => {
  it('shows on the draft, and to everybody once it is published', async () => {
    const words = ['What changed since 1.0.0', 'A to B', 'Copper layer 2 and copper layer 3 are new.', '0.25 mm to the left']
    for (const word of words) expect(textOf(await owner.page(at('1.1.0')))).toContain(word)
    await answerAll(owner, at('1.1.0'))
    expect((await publish(owner, at('1.1.0'))).status).toBe(303)
    const html = textOf(await site.browser().page(at('1.1.0')))
    for (const word of words) expect(html).toContain(word)
    expect(textOf(await site.browser().page(at('1.0.0')))).toContain('No release of Buttress comes before 1.0.0')
  })

  it('says so where nothing changed, and where nothing was kept', async () => {
    await owner.fetch('/boards/buttress/releases/new', { form: { ...next, version: '1.1.1' } })
    expect((await upload(owner, at('1.1.1'), demoBundle('buttress-1.1.0'))).status).toBe(303)
    expect(textOf(await owner.page(at('1.1.1')))).toContain('Nothing that Fettle can see changed')
    const none = await owner.fetch(`${at('1.1.1')}/edit`, { form: { ...next, version: '1.1.1', ...start } })
    const html = await none.text()
    expect([none.status, notesIn(html)]).toEqual([200, 'Mine, *first*.'])
    expect(textOf(html)).toContain('Nothing that Fettle can see changed since 1.1.0')
    // as of a release from before records were kept: stand-in for an older database
    await site.query(async (db) => {
      const { id } = await db.selectFrom('releases').select('id').where('version', '=', '1.1.1').executeTakeFirstOrThrow()
      for (const table of ['bom_lines', 'placements', 'layer_fingerprints'] as const)
        await db.deleteFrom(table).where('release_id', '=', id).execute()
      await db.updateTable('releases').set({ outline_json: null }).where('id', '=', id).execute()
    })
    expect(textOf(await owner.page(at('1.1.1')))).toContain('Nothing was kept of the files of 1.1.1')
  })
})
