import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { fillReportWorld } from '../factories/report-world'
import type { Browser } from './browser'
import { startSite, type Site } from './harness'
import { rawRequest } from './raw'
import { fillPattern, paramsOf, routePatterns } from './routes'

/* Whatever is sent, the answer is one that a person or a program can act on: below 500, and nothing in the log. */

let site: Site
let cookie: string
let member: Browser
beforeAll(async () => {
  site = await startSite()
  await site.query((db) => fillReportWorld(db))
  member = await site.signInByGithub('vigga')
  cookie = [...member.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
})
afterAll(() => site?.close())

const good: Record<string, string> = {
  board: 'buttress',
  version: '1.0.0',
  file: 'top.svg',
  console: 'talvi-16',
  revision: 'TM-1',
  page: 'figures',
  id: 'r0',
  token: 'x'
}
const odd = [
  '%00',
  'a%00b',
  '%E0%A4%A',
  '%FF',
  '%',
  '%2e%2e',
  '%2F..%2F',
  'x'.repeat(4000),
  '%F0%9F%98%80',
  '__proto__',
  'constructor',
  'toString',
  '%EF%BF%BE',
  '%27%22%3Cscript%3E',
  '%0d%0aSet-Cookie:x=y',
  '-1',
  '1e999',
  '9999-99-99',
  '2026-02-30',
  '99999999999999999999',
  '99999999999999999999.0.0',
  '1.0.0%2Bx',
  'NaN',
  '%5C'
]
const names = [
  ...['q', 'after', 'limit', 'release', 'revision', 'evidence', 'first-power', 'as-of', 'console', 'board', 'done'],
  ...[
    'symptom',
    'return',
    'page',
    'tag',
    'unit',
    'code',
    'state',
    'error',
    'from',
    'layers',
    'thickness',
    '_routes',
    'index',
    'x%5B%5D'
  ]
]
/** Addresses to read; signing out is a POST. */
const patterns = routePatterns.map(({ pattern }) => pattern)

/** The bundle of this world's release was never stored, which is our fault indeed, and is answered as such. */
const isBundle = (path: string) => path.includes('/bundle')

/** What failed on our side, as lines to read; nothing when all went well. */
async function failures(requests: Parameters<typeof rawRequest>[1][]): Promise<string[]> {
  const failed: string[] = []
  const queue = [...requests]
  const worker = async () => {
    for (let next = queue.pop(); next; next = queue.pop()) {
      const { status } = await rawRequest(site.url, next)
      if (status >= 500 && !(status === 502 && isBundle(next.path)))
        failed.push(`${status} ${next.method ?? 'GET'} ${next.path.slice(0, 160)} ${JSON.stringify(next.headers ?? {})}`)
    }
  }
  await Promise.all(Array.from({ length: 4 }, worker))
  return failed
}

describe('an odd address', () => {
  it('in any place of any path, as page and as data, is answered', async () => {
    const paths = patterns.flatMap((pattern) =>
      paramsOf(pattern).flatMap((name) => odd.map((value) => fillPattern(pattern, { ...good, [name]: value })))
    )
    expect(paths.length).toBeGreaterThan(500)
    expect(await failures(paths.map((path, i) => ({ path: path + (i % 5 === 0 ? '.data' : ''), headers: { cookie } })))).toEqual(
      []
    )
  })

  it('in any parameter of any query, once and repeated, is answered', async () => {
    const one = fc.record({
      pattern: fc.constantFrom(...patterns),
      name: fc.constantFrom(...names),
      value: fc.oneof(fc.constantFrom(...odd), fc.string({ unit: 'binary', maxLength: 40 }).map(encodeOdd)),
      isRepeated: fc.boolean(),
      isData: fc.boolean()
    })
    const drawn = fc.sample(one, { seed: 20261201, numRuns: 500 }).map(({ pattern, name, value, isRepeated, isData }) => {
      const query = `?${name}=${value}${isRepeated ? `&${name}=${value}` : ''}`
      return fillPattern(pattern, good) + (isData ? '.data' : '') + query
    })
    const always = patterns.flatMap((pattern) =>
      ['?done=__proto__', '?done=constructor', `?${names.map((name) => `${name}=1`).join('&')}`].map(
        (query) => fillPattern(pattern, good) + query
      )
    )
    expect(await failures([...always, ...drawn].map((path) => ({ path, headers: { cookie } })))).toEqual([])
  })

  it.each([
    ['an address of another host', 'http://elsewhere.example/boards', 200],
    ['a path that begins with two slashes', '//elsewhere.example/', 404],
    ['a path that climbs', '/../../../../etc/passwd', 404],
    ['a file path that climbs', '/assets/%2e%2e%2f%2e%2e%2fpackage.json', 404],
    ['a file path with a null', '/assets/%00', 404],
    ['half an escape', '/assets/%', 404],
    ['only a star', '*', 400]
  ])('%s', async (_what, path, status) => {
    const answer = await rawRequest(site.url, { path, method: path === '*' ? 'OPTIONS' : 'GET' })
    expect(answer.status).toBe(status)
    expect(answer.headers.location ?? '/').toMatch(/^\/(?!\/)/)
    expect(answer.text).not.toContain('root:')
  })
})

describe('an odd form', () => {
  const bodies: [type: string, body: string][] = [
    ['application/json', '{"intent":"rename"}'],
    ['text/plain', 'a=b'],
    ['', ''],
    ['multipart/form-data', 'x'],
    ['multipart/form-data; boundary=x', 'nonsense'],
    ['multipart/form-data; boundary=x', '--x\r\nContent-Disposition: form-data; name="a"\r\n\r\nhalf'],
    ['application/x-www-form-urlencoded', '%00=%FF&%E0%A4%A=1&a[b]=c&a=1&a=2&__proto__=x&constructor=y'],
    ['application/x-www-form-urlencoded', 'intent=__proto__&intent=check-in&intent=rename'],
    ['application/x-www-form-urlencoded', `intent=rename&displayName=${'%F0%9F%98%80'.repeat(5000)}`]
  ]

  it('sent to any address is answered', async () => {
    const requests = patterns
      .filter((pattern) => pattern !== '/sign-out')
      .flatMap((pattern) =>
        bodies.map(([type, body], i) => ({
          method: i % 4 === 3 ? 'PUT' : 'POST',
          path: fillPattern(pattern, good) + (i % 3 === 1 ? '.data' : ''),
          headers: { cookie, origin: site.url, ...(type === '' ? {} : { 'content-type': type }) },
          body
        }))
      )
    expect(await failures(requests)).toEqual([])
    expect((await member.fetch('/account')).status).toBe(200)
  })

  it.each([
    [415, 'application/json', '{}'],
    [415, 'text/plain', 'intent=rename'],
    [400, 'multipart/form-data; boundary=x', 'nonsense']
  ])('gets %i for %s, in words', async (status, type, body) => {
    const answer = await member.fetch('/account', { method: 'POST', body, headers: { 'Content-Type': type } })
    expect(answer.status).toBe(status)
    expect(await answer.text()).toContain('Open the page and send it')
  })

  it('with odd words in every field of every form comes back with messages', async () => {
    const values = [
      '',
      ' ',
      '\0',
      'x'.repeat(3000),
      '😀',
      '__proto__',
      '-1',
      '1e999',
      'NaN',
      '9999-99-99',
      '0000-00-00',
      '2026-02-30',
      '<b>',
      '\u202e'
    ]
    const fields = [
      ...['intent', 'name', 'summary', 'replaces', 'console', 'licence', 'description', 'slug', 'displayName', 'email'],
      ...['version', 'boardRevision', 'layers', 'thicknessMm', 'notes', 'reason', 'release_id', 'release', 'revision', 'board'],
      ...[
        'installed_on',
        'stated_on',
        'evidence',
        'first_power',
        'method',
        'unit_tag',
        'statement',
        'cause',
        'kind',
        'report',
        'session'
      ]
    ]
    const intents = ['check-in', 'exclude', 'rename', 'publish', 'answers', 'delete', 'recheck', 'end', 'end-others', '']
    const one = fc.record({
      pattern: fc.constantFrom(...patterns.filter((pattern) => pattern !== '/sign-out')),
      intent: fc.constantFrom(...intents),
      form: fc.array(
        fc.tuple(fc.constantFrom(...fields), fc.oneof(fc.constantFrom(...values), fc.string({ unit: 'binary', maxLength: 60 }))),
        {
          maxLength: 12
        }
      )
    })
    const requests = fc.sample(one, { seed: 20261201, numRuns: 300 }).map(({ pattern, intent, form }) => ({
      method: 'POST',
      path: fillPattern(pattern, good),
      headers: { cookie, origin: site.url, 'content-type': 'application/x-www-form-urlencoded' },
      body: new URLSearchParams(
        [...form, ['intent', intent]].map(([name, value]) => [name!, value!.replace(/\p{Cs}/gu, '?')])
      ).toString()
    }))
    expect(await failures(requests)).toEqual([])
  })
})

describe('an odd head', () => {
  const heads: Record<string, string>[] = [
    { host: '[' },
    { host: 'a b' },
    { host: 'x:99999999' },
    { 'x-forwarded-host': '[[' },
    { 'x-forwarded-proto': 'java script' },
    { 'x-forwarded-for': '%%%' },
    { 'x-forwarded-for': 'x'.repeat(5000) },
    { cookie: `fettle=%00; =; ;;; fettle=${'a'.repeat(5000)}` },
    { range: 'bytes=0-,1-2,-' },
    { 'if-none-match': '"' },
    { 'accept-encoding': 'gzip;q=x' },
    { accept: '*' }
  ]

  it('changes nothing of the answer', async () => {
    for (const path of ['/', '/boards', '/api/v1/boards', '/boards/buttress/releases/1.0.0/bundle', '/health']) {
      const { status } = await rawRequest(site.url, { path })
      for (const headers of heads)
        expect([path, headers, (await rawRequest(site.url, { path, headers })).status]).toEqual([path, headers, status])
    }
  })

  it('of methods that nobody knows is refused', async () => {
    for (const method of ['TRACE', 'PROPFIND', 'PURGE'])
      expect((await rawRequest(site.url, { path: '/account', method })).status).toBe(403)
  })
})

describe('a request that claims to be an upload', () => {
  it.each(['/api/v1/compute/../../../sign-in', '/api/v1/compute/%2e%2e/%2e%2e/%2e%2e/sign-in'])(
    'is held to the size of a form where it really goes: %s',
    async (path) => {
      const body = `email=a%40test.example&x=${'y'.repeat(300_000)}`
      const headers = { origin: site.url, 'content-type': 'application/x-www-form-urlencoded' }
      expect((await rawRequest(site.url, { method: 'POST', path, headers, body })).status).toBe(413)
    }
  )
})

it('left nothing in the log that is our fault', () => {
  const faults = site
    .log()
    .split('\n')
    .filter((line) => line.includes('"level":"error"') && !line.includes('"event":"bundle-missing"'))
  expect(faults).toEqual([])
})

/** A text of any code points as a query value: what cannot stand in one is escaped, the rest goes as it is. */
function encodeOdd(text: string): string {
  return encodeURIComponent(text.replace(/\p{Cs}/gu, '?'))
}
