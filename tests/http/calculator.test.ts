import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { textOf } from './browser'
import { startSite, type Site } from './harness'

let site: Site
beforeAll(async () => {
  site = await startSite()
})
afterAll(() => site?.close())

const path = '/calculators/survival'
const usual = { timeUnit: 'weeks', tau: '', confidence: '95', interval: 'log-log' }

/** Posts the form as a browser without scripts does. */
async function send(fields: Record<string, string>, file: string | Uint8Array<ArrayBuffer> | null = null) {
  const body = new FormData()
  for (const [name, value] of Object.entries({ data: '', ...usual, ...fields })) body.append(name, value)
  body.append('file', new Blob(file === null ? [] : [file], { type: 'text/csv' }), file === null ? '' : 'lives.csv')
  const answer = await site.browser().fetch(path, { method: 'POST', body })
  const html = await answer.text()
  return { status: answer.status, headers: answer.headers, html, text: textOf(html) }
}

const twenty = Array.from({ length: 20 }, (_, i) => `${i + 1},${i % 2}`).join('\n')
const curves = (html: string) => html.split('data-curve="marked"').length - 1

describe('the empty page and its examples', () => {
  it('shows the form, what to write, and three examples; is kept nowhere', async () => {
    const answer = await site.browser().fetch(path)
    const html = await answer.text()
    expect(answer.status).toBe(200)
    expect(answer.headers.get('Cache-Control')).toBe('private, no-store')
    expect(html).toMatch(/enctype="multipart\/form-data"/i)
    expect(html.match(/\?example=[a-z-]+/g)).toEqual(['?example=batches', '?example=causes', '?example=check-ins'])
  })

  it('draws each example and fills the form with it', async () => {
    const batches = await site.browser().page(`${path}?example=batches`)
    expect(curves(batches)).toBe(2)
    expect(textOf(batches)).toMatch(/Of 40 units followed, in 2 groups, \d+ failed\./)
    expect(textOf(batches)).toMatch(/Log-rank test of 2 groups: p [<=] 0\.\d+ \(chi-square/)
    expect(batches).toMatch(/<textarea[^>]*name="data"[^>]*>\s*days,failed,batch/)
    expect(textOf(await site.browser().page(`${path}?example=causes`))).toMatch(/cracked joint.*Aalen and Johansen/)
    expect(textOf(await site.browser().page(`${path}?example=check-ins`))).toMatch(
      /By Turnbull.*the share still working is not determined/
    )
  })

  it('knows no other example', async () => {
    await site.browser().page(`${path}?example=none`, 404)
  })
})

describe('a table', () => {
  it('pasted: sentence, curve, steps and the answer to copy; the form comes back filled in', async () => {
    const { status, headers, html, text } = await send({ data: twenty, tau: '10,5', confidence: '90', interval: 'plain' })
    expect(status).toBe(200)
    expect(headers.get('Cache-Control')).toBe('private, no-store')
    expect(curves(html)).toBe(2)
    expect(text).toMatch(
      /Of 20 units followed, 10 failed\. About \d+ of 100 still worked \(90\s% interval \d+ to \d+\) \(10\.5 weeks\)/
    )
    expect(html).toMatch(/name="tau"[^>]*value="10,5"/)
    expect(html).toMatch(/name="confidence"[^>]*value="90"/)
    expect(html).toMatch(/<option value="plain" selected/)
    expect(html).toMatch(/<textarea[^>]*name="data"[^>]*>\s*1,0\s+2,1/)
    expect(html).not.toMatch(/ style="/)
  })

  it('gives the same answer as the endpoint', async () => {
    const { html } = await send({ data: twenty })
    const json = /<textarea id="answer-json"[^>]*>([^<]*)</.exec(html)![1]!.replaceAll('&quot;', '"')
    const observations = twenty
      .split('\n')
      .map((line) => ({ time: Number(line.split(',')[0]), event: Number(line.split(',')[1]) }))
    const answer = await site.browser().fetch('/api/v1/compute/survival', {
      method: 'POST',
      body: JSON.stringify({ observations }),
      headers: { 'Content-Type': 'application/json' },
      from: null
    })
    expect(JSON.parse(json)).toEqual(await answer.json())
  })

  it('as a file, with intervals; a short file comes back as text', async () => {
    const { status, html, text } = await send({}, 'lower;upper\n0,5;3\n3;7\n7;\n1;4\n2;6\n6;\n')
    expect(status).toBe(200)
    expect(text).toMatch(/Where the failures can lie/)
    expect(html).toMatch(/<textarea[^>]*name="data"[^>]*>\s*lower;upper/)
  })

  it('with markup for names, which stays text', async () => {
    const name = '<img src=x onerror=alert(1)>"\'</textarea><script>'
    const quoted = `"${name.replaceAll('"', '""')}"`
    const { status, html } = await send({ data: `time,event,group\n${twenty.replace(/$/gm, `,${quoted}`)}\n5,1,B` })
    expect(status).toBe(200)
    expect(html).not.toContain('<img src=x')
    expect(html).not.toContain('</textarea><script>')
    expect(html).toContain('&lt;img src=x onerror=alert(1)&gt;')
  })

  it('stores nothing', async () => {
    const before = await site.storedKeys()
    await send({ data: 'time,event\n77123,1' }, null)
    expect(await site.storedKeys()).toEqual(before)
    expect(site.log()).not.toContain('77123')
  })
})

describe('refused, with everything as it was entered', () => {
  it('nothing at all', async () => {
    const { status, html, text } = await send({})
    expect(status).toBe(400)
    expect(text).toContain('One field to mend before this can be computed.')
    expect(html).toContain('href="#data"')
    expect(text).toContain('Paste a table, or choose a file.')
  })

  it('wrong lines, wrong settings', async () => {
    const { status, html, text } = await send({ data: 'time,event\n5,1\nsoon,1\n7,maybe 2\n9,2', confidence: '195' })
    expect(status).toBe(400)
    expect(text).toContain('The confidence lies between 50 and 99.9 %.')
    expect(html).toMatch(/<textarea[^>]*name="data"[^>]*>\s*time,event\s+5,1\s+soon,1/)
    const lines = await send({ data: 'time,event\n5,1\nsoon,1\n9,2' })
    expect(lines.status).toBe(400)
    expect(lines.text).toContain('2 lines cannot be used; the first is line 3: The time “soon” is not a number.')
    expect(lines.text).toContain('line 4: The event “2” is neither')
  })

  it('what cannot be true together is 422', async () => {
    const { status, text } = await send({ data: 'entry,time,event\n5,5,1' })
    expect(status).toBe(422)
    expect(text).toContain('line 2: This must lie after the entry')
  })

  it('a table and a file at once', async () => {
    const { status, html } = await send({ data: twenty }, twenty)
    expect(status).toBe(400)
    expect(html).toContain('href="#file"')
  })

  it('a spreadsheet’s own file', async () => {
    const { status, text } = await send({}, new Uint8Array([0x50, 0x4b, 3, 4, 0xff, 0xfe, 0, 1]))
    expect(status).toBe(400)
    expect(text).toContain('This is not a text in UTF-8.')
  })

  it('too long to paste, too large a file, too many rows: 413', async () => {
    const pasted = await send({ data: '5,1\n'.repeat(280_000) })
    expect(pasted.status).toBe(413)
    expect(pasted.text).toContain('This text is too long to paste')
    const large = await send({}, new Uint8Array(16 * 1024 * 1024 + 1).fill(53))
    expect(large.status).toBe(413)
    expect(large.text).toContain('The file is too large: at most 16 MiB are taken.')
    const many = await send({}, '5,1\n'.repeat(200_001))
    expect(many.status).toBe(413)
    expect(many.text).toContain('more than 200000 rows')
  })

  it('from another site', async () => {
    const body = new FormData()
    body.append('data', twenty)
    const answer = await site.browser().fetch(path, { method: 'POST', body, from: 'https://elsewhere.example' })
    expect(answer.status).toBe(403)
  })

  it('the sixty-first in a minute from one place', async () => {
    const browser = site.browser()
    const statuses: number[] = []
    // A minute may turn over on the way.
    for (let i = 0; i < 125 && statuses.at(-1) !== 429; i++)
      statuses.push((await browser.fetch(path, { method: 'POST', form: { data: '' } })).status)
    expect(statuses.length).toBeGreaterThan(60)
    expect(statuses.at(-1)).toBe(429)
  })
})
