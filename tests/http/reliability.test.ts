import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { reliabilityTables } from '~/domain/reliability/reliability-export'
import { addDays } from '~/lib/dates'
import { fillReportWorld } from '../factories/report-world'
import { reference } from '../support/survival-reference'
import { textOf } from './browser'
import { startSite, type Site } from './harness'

let site: Site
const today = new Date().toISOString().slice(0, 10)
const page = '/boards/buttress/reliability'
const api = '/api/v1/boards/buttress/reliability'

/** Eight units on TM-1 (days 5, 10 and 20 fail; 20, 400, 400, 400, 400 censored) and one on TM-2 that never worked. */
const lives: [revision: string, until: number, fails: boolean][] = [
  ['tm-1', 5, true],
  ['tm-1', 10, true],
  ['tm-1', 20, true],
  ['tm-1', 20, false],
  ['tm-1', 400, false],
  ['tm-1', 400, false],
  ['tm-1', 400, false],
  ['tm-1', 400, false],
  ['tm-2', 0, true]
]

beforeAll(async () => {
  site = await startSite()
  await site.query(async (db) => {
    await fillReportWorld(db)
    for (const [i, [revision, until, fails]] of lives.entries()) {
      const on = '2024-01-01'
      const end = addDays(on, until)
      const at = (day: string) => `${day}T08:00:00.000Z`
      await db
        .insertInto('install_reports')
        .values({
          id: `r${i}`,
          release_id: 'v1',
          console_revision_id: revision,
          reporter_id: 'ann',
          installed_on: on,
          filed_on: on,
          filed_at: at(on),
          evidence: i === 0 ? 'none' : 'measured',
          first_power: until === 0 ? 'worse' : 'works'
        })
        .execute()
      if (until > 0)
        await db
          .insertInto('check_ins')
          .values({ id: `c${i}`, report_id: `r${i}`, statement: fails ? 'failed' : 'running', stated_on: end, filed_at: at(end) })
          .execute()
      if (fails)
        await db
          .insertInto('failures')
          .values({
            report_id: `r${i}`,
            check_in_id: until > 0 ? `c${i}` : null,
            last_running_on: until > 0 ? addDays(end, -1) : null,
            found_on: end,
            cause: 'board',
            created_at: at(end)
          })
          .execute()
    }
    await db
      .insertInto('boards')
      .values({
        id: 'b2',
        slug: 'quiet',
        name: 'Quiet',
        summary: 's',
        replaces: 'r',
        console_id: 'talvi-16',
        licence: 'MIT',
        created_at: at0
      })
      .execute()
  })
})
afterAll(() => site?.close())
const at0 = '2024-01-01T00:00:00.000Z'
const json = async (path: string, status = 200) => {
  const answer = await site.browser().fetch(path)
  expect(answer.status).toBe(status)
  return { body: await answer.json(), headers: answer.headers }
}

describe('the reliability of a board as JSON', () => {
  it('is Kaplan-Meier of the lives, worked out by hand', async () => {
    const { body } = await json(api)
    expect(body).toMatchObject({
      board: 'buttress',
      asOf: today,
      method: 'kaplan-meier',
      timeUnit: 'day',
      excluded: { total: 0, byKind: [] }
    })
    const group = (name: string) => body.groups.find((g: { group: string }) => g.group === name)
    // TM-1: 7/8, then 6/7, then 5/6 of that: 5/8; the unit last heard of on day 20 is still at risk on it.
    const tm1 = group('TM-1')
    expect(tm1.curve.map((r: { time: number; atRisk: number }) => [r.time, r.atRisk])).toEqual([
      [5, 8],
      [10, 7],
      [20, 6],
      [400, 4]
    ])
    expect(tm1.curve[2].survival).toBeCloseTo(5 / 8, 12)
    expect(tm1.atOneYear).toMatchObject({ atRisk: 4 })
    // Greenwood: S^2 (1/(8*7) + 1/(7*6) + 1/(6*5))
    expect(tm1.curve[2].standardError).toBeCloseTo((5 / 8) * Math.sqrt(1 / 56 + 1 / 42 + 1 / 30), 12)
    expect(tm1.firstPower).toMatchObject({ n: 8, works: 8, estimate: 1, upper: 1 })
    // Clopper and Pearson at x = n: (alpha/2)^(1/n)
    expect(tm1.firstPower.lower).toBeCloseTo(Math.pow(0.025, 1 / 8), 10)
    expect(group('TM-2').curve).toMatchObject([{ time: 0, atRisk: 1, events: 1, survival: 0, lower: null, upper: null }])
    expect(group('all')).toMatchObject({ fitted: 9, n: 9, events: 4 })
    // 5 days once, 10 once, 20 twice (one still ran), a year four times, of eight: mean days without failure as far as a year.
    expect(tm1.rmst).toMatchObject({ tau: 365 })
    expect(tm1.rmst.estimate).toBeCloseTo(5 + (7 / 8) * 5 + (6 / 8) * 10 + (5 / 8) * 345, 9)
    expect(tm1.incidence.map((i: { cause: string; failures: number }) => [i.cause, i.failures])).toEqual([['board', 3]])
    expect(tm1.incidence[0].curve.map((r: { estimate: number }) => r.estimate)).toEqual(
      [1 / 8, 2 / 8, 3 / 8, 3 / 8].map((share) => expect.closeTo(share, 12))
    )
    expect(body.comparisons).toMatchObject([{ by: 'revision', groups: ['TM-1'], leftOut: ['TM-2'], pairs: [] }])
  })
  it('narrows by each filter', async () => {
    const fitted = async (query: string) => (await json(`${api}?${query}`)).body.groups[0].fitted
    expect(await fitted('revision=TM-2')).toBe(1)
    expect(await fitted('release=1.1.0')).toBe(0)
    expect(await fitted('evidence=established')).toBe(8)
    expect(await fitted('first-power=set-aside')).toBe(8)
    expect(await fitted('as-of=2023-12-31')).toBe(0)
    const early = (await json(`${api}?as-of=2024-01-08`)).body.groups[0]
    expect(early).toMatchObject({ fitted: 9, events: 2 })
  })
  it.each([
    ['release=9.9.9', 'release'],
    ['release=2.0.0', 'release'],
    ['revision=TP-1', 'revision'],
    ['evidence=guess', 'evidence'],
    ['first-power=x', 'first-power'],
    ['as-of=2024-02-30', 'as-of'],
    [`as-of=${addDays(today, 1)}`, 'as-of'],
    ['cause=gremlins', 'cause'],
    ['method=glue', 'method'],
    ['since=2024-13-01', 'since'],
    ['silent=perhaps', 'silent'],
    ['board-revision=Z', 'board-revision'],
    ['batch=1.0.0/none', 'batch'],
    ['batch=<i>', 'batch'],
    ['release=1.1.0&batch=1.0.0/2020-01', 'batch']
  ])('answers %s with a problem at its filter, as JSON, as a page and for the CSV', async (query, path) => {
    const { body, headers } = await json(`${api}?${query}`, 400)
    expect(headers.get('Content-Type')).toContain('application/problem+json')
    expect(body).toMatchObject({ status: 400, errors: [{ path }] })
    await json(`${page}.csv?${query}`, 400)
    const html = await site.browser().page(`${page}?${query}`, 400)
    expect(html).toMatch(new RegExp(`id="${path}"[^>]*aria-invalid="true"`))
    const typed = new URLSearchParams(query).get(path)!.replace(/[<>]/g, (c) => (c === '<' ? '&lt;' : '&gt;'))
    expect(html).toMatch(new RegExp(`(value="${typed}"[^>]*>|selected=""[^>]*>)`))
    expect(html).toContain(typed)
    expect(html).toContain(`id="${path}-error"`)
  })
  it('knows no other board', async () => {
    await json('/api/v1/boards/nothing/reliability', 404)
    await json('/boards/nothing/reliability.csv', 404)
    await site.browser().page('/boards/nothing/reliability', 404)
  })
})

describe('the reliability page', () => {
  it('says in words what is known, and no more', async () => {
    const html = await site.browser().page(`${page}?revision=TM-1`)
    expect(textOf(html)).toContain(
      'Of 8 units followed, 3 have failed. Too few have been followed for a year (4) to say how many last that long.'
    )
    expect(textOf(html)).not.toMatch(/100 % at|100 of 100/)
    expect(html).toContain('Share still working by')
  })
  it('narrows by every filter, names what is in force, and gives the way out of each', async () => {
    const every = 'release=1.0.0&revision=TM-1&evidence=established&method=untold&first-power=set-aside&since=2023-12-31'
    const html = await site.browser().page(`${page}?${every}&board-revision=A&cause=board&silent=bounds`)
    expect(textOf(html)).toContain('How long Buttress 1.0.0 lasts in TM-1')
    // Of the eight on TM-1 all but the first, whose fault was not checked; two of them failed.
    expect(textOf(html)).toMatch(
      /Of 7 units that worked at first power [^.]*, 2 have failed by the board or for no known reason\./
    )
    const ways = [...html.matchAll(/aria-label="Take away: [^"]*" href="([^"]*)"|href="([^"]*)"[^>]*aria-label="Take away/g)]
    expect(ways).toHaveLength(9)
    for (const [, first, second] of ways) {
      const answer = await site.browser().fetch((first ?? second)!.replaceAll('&amp;', '&'))
      expect(answer.status).toBe(200)
    }
    expect(html).toMatch(/<details class="nar" open=""/)
    expect(await site.browser().page(`${page}?revision=TM-1`)).not.toMatch(/<details class="nar" open=""/)
    expect(textOf(await site.browser().page(`${page}?since=2024-01-02`))).toContain('No report answers to these words.')
    expect(textOf(await site.browser().page(`${page}?method=iron`))).toContain('No report answers to these words.')
  })
  it('leads from its rows to the figures of that row alone, and keeps the other filters', async () => {
    const html = await site.browser().page(`${page}?evidence=established&as-of=2025-06-01`)
    expect(html).toContain(`href="${page}?revision=TM-1&amp;evidence=established&amp;as-of=2025-06-01"`)
    expect(html).toContain(`href="${page}.csv?table=groups&amp;evidence=established&amp;as-of=2025-06-01"`)
    expect(html).toContain(`href="/api/v1${page}?evidence=established&amp;as-of=2025-06-01"`)
  })
  it('shows what the silent could hide when it is switched on, and says how much was followed always', async () => {
    const plain = await site.browser().page(`${page}?revision=TM-1`)
    expect(textOf(plain)).toContain('of the possible follow-up has been had.')
    expect(plain).toContain(`href="${page}?revision=TM-1&amp;silent=bounds#silent"`)
    expect(textOf(plain)).not.toContain('Worst to best')
    const bounds = textOf(await site.browser().page(`${page}?revision=TM-1&silent=bounds`))
    // All five that did not fail were last heard of more than a year ago: at day 20 and at day 400.
    expect(bounds).toContain('5 of 8 units are silent')
    // Only four of them are followed for a year.
    expect(bounds).toContain('Too few were followed for a year to say what the silent could change in it.')
    expect(bounds).toMatch(/Worst to best TM-1 5 of 8 \d+ too few too few followed/)
  })
  it('shows a withdrawn release as any other, and a batch without a report as such', async () => {
    expect(await site.browser().page(page)).toMatch(/<option value="1.1.0"[^>]*>1.1.0, withdrawn/)
    const batch = textOf(await site.browser().page(`${page}?batch=1.0.0/2020-01`))
    expect(batch).toContain('How long Buttress 1.0.0, batch 2020-01, lasts')
    expect(batch).toContain('No report answers to these words.')
  })
  it('numbers its sections through', async () => {
    for (const query of ['', 'revision=TM-2', 'release=1.0.0', 'cause=accident', 'silent=bounds', 'as-of=2024-01-03']) {
      const html = await site.browser().page(`${page}?${query}`)
      const numbers = [...html.matchAll(/<span class="no" aria-hidden="true">(\d+)<\/span>/g)].map((m) => Number(m[1]))
      expect(numbers, query).toEqual(numbers.map((_, i) => i + 1))
      expect(numbers.length, query).toBeGreaterThan(4)
    }
  })
  it('marks the curve asked for and pages through the steps', async () => {
    const html = await site.browser().page(`${page}?mark=TM-2&beside=TM-1&steps=revision:TM-1`)
    expect(html).toMatch(/<option value="TM-2" selected/)
    expect(textOf(html)).toContain('The curve of TM-1')
  })
  it('invites the first report where there is none, and wider filters where none answers', async () => {
    const empty = await site.browser().page('/boards/quiet/reliability')
    expect(textOf(empty)).toContain('Nobody has reported fitting Quiet yet.')
    expect(empty).toContain('href="/report?board=quiet"')
    expect(textOf(await site.browser().page(`${page}?release=1.1.0`))).toContain('No report answers to these words.')
  })
  it('gives its points as CSV under the same filters', async () => {
    const answer = await site.browser().fetch(`${page}.csv?revision=TM-1&as-of=2026-11-30`)
    expect(answer.headers.get('Content-Type')).toContain('text/csv')
    expect(answer.headers.get('Content-Disposition')).toBe('attachment; filename="buttress-reliability-2026-11-30.csv"')
    const [head, ...rows] = (await answer.text()).trimEnd().split('\r\n')
    expect(head).toBe(
      'board,as_of,by,group,day,at_risk,events,censored,survival,standard_error,lower,upper,bound,estimator,filters'
    )
    expect(rows.filter((r) => r.startsWith('buttress,2026-11-30,revision,TM-1,'))).toHaveLength(4)
    expect(rows[0]).toMatch(/^buttress,2026-11-30,all,all,5,8,1,0,0\.875,/)
  })
  it('gives every other table by its name, and no table that there is not', async () => {
    for (const table of reliabilityTables) {
      const answer = await site.browser().fetch(`${page}.csv?table=${table}&revision=TM-1&as-of=2026-11-30`)
      expect(answer.status).toBe(200)
      const rows = (await answer.text()).trimEnd().split('\r\n')
      expect(rows[0]).toMatch(/^board,as_of,.*,filters$/)
      for (const row of rows.slice(1)) expect(row).toMatch(/^buttress,2026-11-30,.*revision=TM-1/)
    }
    const { body } = await json(`${page}.csv?table=everything`, 400)
    expect(body).toMatchObject({ status: 400, errors: [{ path: 'table' }] })
  })
  it.each(['groups', 'incidence', 'comparison', 'shape', 'hazard', 'batches', 'support', 'silent', 'silent-curve'])(
    'gives its table “%s” as CSV',
    async (table) => {
      const answer = await site.browser().fetch(`${page}.csv?table=${table}&as-of=2026-11-30`)
      expect(answer.status).toBe(200)
      expect(answer.headers.get('Content-Disposition')).toBe(`attachment; filename="buttress-${table}-2026-11-30.csv"`)
      expect((await answer.text()).split('\r\n')[0]).toMatch(/^board,as_of,/)
    }
  )
  it('moves when a report is filed', async () => {
    const member = await site.signInByGithub('vigga')
    const path = '/report?board=buttress&release=1.0.0&revision=TM-1'
    const form_key = /name="form_key" value="([0-9a-z]{16})"/.exec(await member.page(path))![1]!
    const fields = {
      form_key,
      release: 'v1',
      revision: 'tm-1',
      installed_on: today,
      evidence: 'measured',
      first_power: 'no-change',
      cause: 'unknown'
    }
    const before = (await json(`${api}?revision=TM-1`)).body.groups[0]
    expect((await member.fetch(path, { form: fields })).status).toBe(302)
    const after = (await json(`${api}?revision=TM-1`)).body.groups[0]
    expect([after.fitted, after.events]).toEqual([before.fitted + 1, before.events + 1])
    expect(after.curve[0]).toMatchObject({ time: 0, events: 1, atRisk: 9 })
  })
})

describe('POST /api/v1/compute/survival', () => {
  const send = (
    body: BodyInit,
    headers: Record<string, string> = { 'Content-Type': 'application/json' },
    init: RequestInit = {}
  ) => site.browser().fetch('/api/v1/compute/survival', { method: 'POST', body, headers, from: null, ...init } as never)

  it('agrees with the published remission data (right-remission42.json names its source)', async () => {
    const { data, results } = reference('right-remission42')
    const observations = data.time.map((time: number, i: number) => ({
      time,
      event: data.event[i],
      group: String(data.group[i])
    }))
    const answer = await send(JSON.stringify({ observations }))
    expect(answer.status).toBe(200)
    const { method, groups, logRank } = await answer.json()
    expect(method).toBe('kaplan-meier')
    for (const expected of results.kaplan_meier.by_group) {
      const group = groups.find((g: { group: string }) => g.group === expected.group)
      group.curve.forEach((row: { survival: number }, i: number) => expect(row.survival).toBeCloseTo(expected.rows.surv[i], 12))
    }
    expect(logRank.chiSquare).toBeCloseTo(results.log_rank.unstratified.chisq, 9)
  })
  it.each([
    ['no JSON', '{"observations": [', {}, 400],
    ['no observations', '{}', {}, 400],
    ['a negative time', '{"observations":[{"time":-1,"event":0}]}', {}, 400],
    ['entry = exit', '{"observations":[{"time":5,"entry":5,"event":0}]}', {}, 422],
    ['another type', 'time,event', { 'Content-Type': 'text/csv' }, 415]
  ] as [string, string, Record<string, string>, number][])('refuses %s', async (_what, body, headers, status) => {
    const answer = await send(body, { 'Content-Type': 'application/json', ...headers })
    expect(answer.status).toBe(status)
    expect(answer.headers.get('Content-Type')).toContain('application/problem+json')
    expect(await answer.json()).toMatchObject({ status })
  })
  it('counts while it reads: a body without a length is cut off at 16 MiB', async () => {
    let sent = 0
    const chunk = new Uint8Array(1024 * 1024).fill(32)
    const body = new ReadableStream<Uint8Array>({
      pull(controller) {
        if (sent >= 64 * chunk.length) return controller.close()
        sent += chunk.length
        controller.enqueue(chunk)
      }
    })
    const answer = await send(body, { 'Content-Type': 'application/json' }, { duplex: 'half' } as RequestInit)
    expect(answer.status).toBe(413)
  })
  it('answers GET with what is allowed', async () => {
    const { headers } = await json('/api/v1/compute/survival', 405)
    expect(headers.get('Allow')).toBe('POST')
  })
})
