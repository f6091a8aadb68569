import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startSite, type Site } from './harness'
import { rawRequest } from './raw'
import { fillPattern, routePatterns } from './routes'

/* As behind one proxy that ends TLS: people see https://fettle.example, the server hears plain HTTP on loopback. */

const ours = 'https://fettle.example'
const form = { 'content-type': 'application/x-www-form-urlencoded' }
const forwarded = { 'x-forwarded-proto': 'https', 'x-forwarded-for': '192.0.2.9' }

let site: Site
beforeAll(async () => {
  site = await startSite({ env: { PUBLIC_ORIGIN: ours } })
})
afterAll(() => site?.close())

const post = (path: string, headers: Record<string, string>, body = '') =>
  rawRequest(site.url, { method: 'POST', path, headers: { ...form, ...headers }, body })

describe('behind a proxy that ends TLS', () => {
  it.each([
    ['passes the name on', { ...forwarded, host: 'fettle.example' }],
    ['tells it apart', { ...forwarded, host: '127.0.0.1:3000', 'x-forwarded-host': 'fettle.example' }],
    ['tells nothing', { host: 'backend:3000', 'x-forwarded-for': '192.0.2.9' }]
  ])('forms work, as page and as data, when the proxy %s', async (_what, headers) => {
    for (const path of ['/sign-in', '/sign-in.data']) {
      const answer = await post(path, { ...headers, origin: ours, 'sec-fetch-site': 'same-origin' }, 'email=not-an-address')
      expect([path, answer.status]).toEqual([path, 400])
      expect(answer.text).toContain('not-an-address')
    }
  })

  it('sign-in sets cookies for this host and https alone, and goes back to the public address', async () => {
    const answer = await post('/sign-in/github', { ...forwarded, origin: ours }, 'return=%2F')
    expect(answer.status).toBe(302)
    expect([answer.headers['set-cookie']].flat()).toEqual([
      expect.stringMatching(/^__Host-fettle-attempt=[\w-]{43}; Max-Age=\d+; Path=\/; HttpOnly; SameSite=Lax; Secure$/)
    ])
    const asked = new URL(answer.headers.location as string)
    expect(asked.searchParams.get('redirect_uri')).toBe(`${ours}/sign-in/github/callback`)
    expect(answer.headers['strict-transport-security']).toBe('max-age=31536000')
  })

  it('an Origin of the inner address, of http or of a forged host is foreign', async () => {
    for (const [origin, host] of [
      [site.url, new URL(site.url).host],
      ['http://fettle.example', 'fettle.example'],
      ['https://elsewhere.example', 'elsewhere.example']
    ] as const)
      expect((await post('/sign-in', { ...forwarded, origin, host, 'x-forwarded-host': host }, 'email=x')).status).toBe(403)
  })

  it('counts callers by the hop that is trusted: what the caller claims before it changes nothing', async () => {
    const headers = (claimed: string) => ({ ...forwarded, origin: ours, 'x-forwarded-for': `${claimed}, 192.0.2.50` })
    const statuses = new Set<number>()
    for (let i = 0; i < 61; i++) statuses.add((await post('/sign-in/github', headers(`198.51.100.${i}`), 'return=%2F')).status)
    expect([...statuses]).toEqual([302, 429])
  })
})

describe('every address', () => {
  const cookie = '__Host-fettle=' + 'a'.repeat(43)

  it('refuses a write from elsewhere, without an Origin and with a hidden one, as page and as data', async () => {
    expect(routePatterns.length).toBeGreaterThan(30)
    for (const { pattern } of routePatterns)
      for (const path of [fillPattern(pattern, {}), `${fillPattern(pattern, {}).replace(/\/$/, '/_root')}.data`])
        for (const headers of [
          {},
          { origin: 'https://elsewhere.example' },
          { origin: 'null' },
          { 'sec-fetch-site': 'cross-site', origin: ours }
        ])
          expect([path, headers, (await post(path, { cookie, ...forwarded, ...(headers as object) }, 'a=b')).status]).toEqual([
            path,
            headers,
            403
          ])
  })

  it('read, sets no cookie, and is kept by no cache where it carries a nonce', async () => {
    for (const { pattern } of routePatterns) {
      const path = fillPattern(pattern, {})
      const { headers, status } = await rawRequest(site.url, { path, headers: { cookie, ...forwarded } })
      expect([path, status < 500, headers['set-cookie']]).toEqual([path, true, undefined])
      if (/text\/html/.test(String(headers['content-type'])))
        expect([path, headers['cache-control']]).toEqual([path, 'private, no-store'])
    }
  })

  it('of a built file is kept for good', async () => {
    const html = (await rawRequest(site.url, { path: '/' })).text
    const asset = /\/assets\/[\w.-]+\.js/.exec(html)![0]
    expect((await rawRequest(site.url, { path: asset })).headers['cache-control']).toBe('public, max-age=31536000, immutable')
  })
})
