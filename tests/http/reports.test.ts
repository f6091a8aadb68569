import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { addDays } from '~/lib/dates'
import { fillReportWorld } from '../factories/report-world'
import { textOf, type Browser } from './browser'
import { startSite, type Site } from './harness'

let site: Site
let author: Browser
let other: Browser
let steward: Browser
const today = new Date().toISOString().slice(0, 10)

beforeAll(async () => {
  site = await startSite()
  await site.query(fillReportWorld)
  author = await site.signInByGithub('vigga')
  other = await site.signInByGithub('tarn')
  steward = await site.signInByGithub('mosse')
  await site.query((db) => db.updateTable('users').set({ is_steward: 1 }).where('github_login', '=', 'mosse').execute())
})
afterAll(() => site?.close())

const formPath = '/report?board=buttress&release=1.0.0&revision=TM-1'
const keyIn = (html: string) => /name="form_key" value="([0-9a-z]{16})"/.exec(html)![1]!
const newKey = async (browser: Browser, path = formPath) => keyIn(await browser.page(path))

type Fields = Record<string, string>
const good: Fields = { release: 'v1', revision: 'tm-1', installed_on: '2026-01-15', evidence: 'measured', first_power: 'works' }
async function post(browser: Browser, change: Fields = {}, path = formPath) {
  return browser.fetch(path, { form: { ...good, form_key: await newKey(browser), ...change } })
}
async function filed(browser: Browser, change: Fields = {}): Promise<string> {
  const answer = await post(browser, change)
  expect(answer.status).toBe(302)
  return /^\/reports\/([0-9a-z]{16})\?filed/.exec(answer.headers.get('Location')!)![1]!
}
const count = async () =>
  (
    await site.query((db) =>
      db
        .selectFrom('install_reports')
        .select((e) => e.fn.countAll<number>().as('n'))
        .executeTakeFirstOrThrow()
    )
  ).n
const checkIn = async (browser: Browser, id: string, fields: Fields) => {
  const key =
    fields.form_key ?? /name="form_key" value="([0-9a-z]{16})"/.exec(await browser.page(`/reports/${id}`))?.[1] ?? '0'.repeat(16)
  return browser.fetch(`/reports/${id}`, { form: { intent: 'check-in', ...fields, form_key: key } })
}

describe('choosing what to report on', () => {
  it('goes from the board over release and revision to the form, by addresses alone', async () => {
    const first = await site.browser().page('/report')
    expect(first).toContain('href="/report?board=buttress"')
    const second = await site.browser().page('/report?board=buttress')
    expect(second).toContain('<option value="1.0.0"')
    expect(second).not.toContain('>2.0.0<')
    expect(second).toContain('name="revision"')
    const third = await author.page(formPath)
    expect(textOf(third)).toContain('Buttress 1.0.0 in a Talvi 16 , revision TM-1')
  })
  it('finds board and release by the unit tag, however it is typed', async () => {
    const html = await author.page('/report?unit=%20bt-1%20&revision=TM-1')
    expect(html).toContain('name="unit_tag" value="BT-1"')
    expect(textOf(await author.page('/report?unit=BT-99'))).toContain('No unit has the tag “BT-99”')
  })
  it('cautions before the work, and asks a visitor to sign in before the form', async () => {
    expect(textOf(await site.browser().page('/report'))).toContain('ask a qualified person')
    const answer = await site.browser().fetch(formPath)
    expect(answer.status).toBe(302)
    expect(answer.headers.get('Location')).toBe(`/sign-in?return=${encodeURIComponent(formPath)}`)
  })
  it('says what a choice calls for, and blocks nothing', async () => {
    expect(textOf(await author.page('/report?board=buttress&release=1.1.0&revision=TM-2'))).toMatch(
      /Release 1\.1\.0 is withdrawn C13 can short\..*Fits TM-2 with care The shield is low\./
    )
    expect(textOf(await author.page('/report?board=buttress&release=2.0.0-beta.1&revision=TM-1'))).toMatch(
      /Untested on TM-1.*is a trial/
    )
    const answer = await post(author, { release: 'v2', revision: 'tm-2' }, '/report?board=buttress&release=1.1.0&revision=TM-2')
    expect(answer.status).toBe(302)
  })
  it('answers unknown names', async () => {
    await author.page('/report?board=nothing', 404)
    expect(textOf(await author.page('/report?board=buttress&release=9.9.9&revision=XX'))).toContain(
      'There is no such published release.'
    )
  })
})

describe('filing a report', () => {
  it('shows it to everybody, escaped', async () => {
    const id = await filed(author, { unit_tag: 'bt-1', notes: '<script>alert(1)</script> & more', method: 'hot-air' })
    const html = await site.browser().page(`/reports/${id}`)
    expect(html).not.toContain('<script>alert(1)')
    expect(textOf(html)).toContain('Fitted 2026-01-15 by Vigga Testmark: works at first power.')
    expect(textOf(html)).toContain('BT-1')
    expect(html).not.toContain('name="intent"')
  })
  it('gives one report for a form that is sent twice', async () => {
    const form = { ...good, form_key: await newKey(author) }
    const before = await count()
    const answers = await Promise.all([1, 2].map(() => author.fetch(formPath, { form })))
    expect(answers.map((a) => a.status)).toEqual([302, 302])
    expect(new Set(answers.map((a) => a.headers.get('Location'))).size).toBe(1)
    expect(await count()).toBe(before + 1)
  })
  it.each([
    [
      'nothing filled in',
      { installed_on: '', evidence: '', first_power: '' },
      ['Say on which day it was fitted.', 'Say how the fault was established.', 'Say what it did at first power.']
    ],
    ['a day to come', { installed_on: addDays(today, 2) }, ['has not come yet']],
    ['a day that is none', { installed_on: '2026-02-30' }, ['Write a day of the calendar']],
    ['a revision of another console', { revision: 'tp-1' }, ['This revision belongs to another console']],
    ['an unknown release', { release: 'nope' }, ['There is no such published release']],
    ['a draft', { release: 'v4' }, ['There is no such published release']],
    ['an unknown unit', { unit_tag: 'BT-77' }, ['No unit has this tag']],
    ['a unit of another release', { unit_tag: 'BT-1', release: 'v2' }, ['This unit is a Buttress 1.0.0']],
    [
      'what only the database knows, along with what the form lacks',
      { unit_tag: 'BT-77', installed_on: addDays(today, 2), evidence: '', first_power: 'worse' },
      ['No unit has this tag', 'has not come yet', 'Say how the fault was established', 'Say what it came from']
    ],
    ['a failure without a cause', { first_power: 'worse' }, ['Say what it came from']],
    [
      'an unknown word',
      { evidence: 'guess', method: 'torch' },
      ['Say how the fault was established', 'Choose how it was soldered']
    ],
    ['notes that are too long', { notes: 'x'.repeat(4001) }, ['At most 4000 characters']],
    ['a form without its key', { form_key: '' }, ['The form is incomplete']]
  ] as [string, Fields, string[]][])(
    'refuses %s with the message at the field, and keeps what was entered',
    async (_what, change, messages) => {
      const before = await count()
      const answer = await post(author, { notes: 'kept as it was', ...change })
      const html = await answer.text()
      expect(answer.status).toBe(400)
      for (const message of messages) expect(textOf(html)).toContain(message)
      if (change.notes === undefined) expect(html).toContain('kept as it was')
      if (change.installed_on === undefined) expect(html).toContain('value="2026-01-15"')
      expect(await count()).toBe(before)
    }
  )
  it('refuses a visitor and another site, and stores nothing', async () => {
    const before = await count()
    const form = { ...good, form_key: await newKey(author) }
    expect((await site.browser().fetch(formPath, { form })).headers.get('Location')).toContain('/sign-in')
    expect((await author.fetch(formPath, { form, from: 'http://elsewhere.example' })).status).toBe(403)
    expect(await count()).toBe(before)
  })
})

describe('following a report up', () => {
  it('adds check-ins in the order of their days and ends at a failure', async () => {
    const id = await filed(author)
    expect((await checkIn(author, id, { statement: 'running', stated_on: '2026-05-01' })).status).toBe(302)
    const early = await checkIn(author, id, { statement: 'running', stated_on: '2026-04-01' })
    expect(early.status).toBe(400)
    const text = await early.text()
    expect(textOf(text)).toContain('It was said to run on 2026-05-01')
    expect(text).toContain('value="2026-04-01"')
    const failed = { statement: 'failed', stated_on: '2026-06-01', last_running_on: '2026-05-20', cause: 'board' }
    expect((await checkIn(author, id, failed)).status).toBe(302)
    const html = await author.page(`/reports/${id}`)
    expect(textOf(html)).toContain('Cause: the board itself. Last worked 2026-05-20.')
    expect(html).not.toContain('value="check-in"')
    const second = await checkIn(author, id, failed)
    expect(second.status).toBe(409)
    expect(await site.query((db) => db.selectFrom('failures').where('report_id', '=', id).selectAll().execute())).toHaveLength(1)
  })
  it.each([
    ['before it was fitted', { statement: 'running', stated_on: '2026-01-14' }, 'This lies before the day it was fitted'],
    ['a day to come', { statement: 'running', stated_on: addDays(today, 2) }, 'has not come yet'],
    ['a failure without a cause', { statement: 'failed', stated_on: '2026-05-01' }, 'Say what it came from'],
    [
      'a last day after the failure',
      { statement: 'failed', stated_on: '2026-05-01', last_running_on: '2026-05-02', cause: 'board' },
      'after the day the failure was found'
    ],
    ['no statement', { stated_on: '2026-05-01' }, 'Say how it is.']
  ] as [string, Fields, string][])('refuses %s', async (_what, fields, message) => {
    const id = await filed(author)
    const answer = await checkIn(author, id, fields)
    expect(answer.status).toBe(400)
    expect(textOf(await answer.text())).toContain(message)
  })
  it('says all that is wrong at once', async () => {
    const id = await filed(author)
    const answer = await checkIn(author, id, { statement: 'failed', stated_on: addDays(today, 2), last_running_on: '2026-01-01' })
    expect(answer.status).toBe(400)
    const text = textOf(await answer.text())
    for (const message of ['has not come yet', 'Leave it empty when you do not know', 'Say what it came from'])
      expect(text).toContain(message)
  })
  it('is the author’s alone', async () => {
    const id = await filed(author)
    for (const browser of [other, steward])
      expect((await checkIn(browser, id, { statement: 'running', stated_on: '2026-05-01' })).status).toBe(403)
    expect((await checkIn(site.browser(), id, { statement: 'running', stated_on: '2026-05-01' })).status).toBe(302)
    expect(await site.query((db) => db.selectFrom('check_ins').where('report_id', '=', id).selectAll().execute())).toEqual([])
    expect(
      (await checkIn(author, 'nothing', { statement: 'running', stated_on: '2026-05-01', form_key: '0'.repeat(16) })).status
    ).toBe(404)
    await author.page('/reports/nothing', 404)
  })
  it('refuses an action it does not know', async () => {
    const id = await filed(author)
    expect((await author.fetch(`/reports/${id}`, { form: { intent: 'delete' } })).status).toBe(400)
  })
})

describe('one’s own reports', () => {
  it('lists them with a button that says that a unit still runs', async () => {
    const browser = await site.signInByGithub('oust')
    expect(textOf(await browser.page('/reports'))).toContain('You have not filed a report yet.')
    const id = await filed(browser)
    const html = await browser.page('/reports')
    const form = { report: id, form_key: keyIn(html) }
    for (let i = 0; i < 2; i++) expect((await browser.fetch('/reports', { form })).status).toBe(302)
    expect(textOf(await browser.page('/reports'))).toContain(`ran ${today}`)
    expect(await site.query((db) => db.selectFrom('check_ins').where('report_id', '=', id).selectAll().execute())).toHaveLength(1)
    expect((await browser.fetch('/reports', { form: { report: '../x', form_key: form.form_key } })).status).toBe(400)
  })
  it('lets nobody speak for another’s unit', async () => {
    const id = await filed(author)
    expect((await other.fetch('/reports', { form: { report: id, form_key: '1'.repeat(16) } })).status).toBe(403)
  })
  it('sends a visitor to sign in', async () => {
    expect((await site.browser().fetch('/reports')).headers.get('Location')).toBe('/sign-in?return=%2Freports')
  })
})

describe('excluding a report', () => {
  const reason = { intent: 'exclude', kind: 'duplicate', reason: 'The same fitting as an earlier report.' }
  it('is a steward’s, once, and stays readable with its reason', async () => {
    const id = await filed(author)
    expect((await author.fetch(`/reports/${id}`, { form: reason })).status).toBe(403)
    const empty = await steward.fetch(`/reports/${id}`, { form: { intent: 'exclude', kind: 'spite', reason: 'short' } })
    expect(empty.status).toBe(400)
    expect(textOf(await empty.text())).toContain('Write a sentence that others can check')
    expect((await steward.fetch(`/reports/${id}`, { form: reason })).status).toBe(302)
    expect((await steward.fetch(`/reports/${id}`, { form: reason })).status).toBe(409)
    const html = await site.browser().page(`/reports/${id}`)
    expect(textOf(html)).toMatch(/Excluded from every figure .*The same fitting as an earlier report\./)
    expect(html).toContain('<s>Buttress 1.0.0 on TM-1</s>')
    expect((await checkIn(author, id, { statement: 'running', stated_on: '2026-05-01' })).status).toBe(403)
    const audit = await site.query((db) =>
      db.selectFrom('audit_log').where('subject_id', '=', id).orderBy('at').select('action').execute()
    )
    expect(audit.map((row) => row.action)).toEqual(['report.file', 'report.exclude'])
  })
})
