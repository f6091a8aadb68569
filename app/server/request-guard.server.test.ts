import { describe, expect, it } from 'vitest'
import { streamsItsBody } from './express.server'
import { refuseForeignOrigin, refuseLargeBody } from './request-guard.server'

const ours = 'https://fettle.example'
const paths = [
  '/account',
  '/account.data',
  '/sign-out',
  '/_root.data',
  '/boards/x/releases/1.0.0/bundle',
  '/files/pictures/x.png',
  '/'
]
const methods = ['POST', 'PUT', 'PATCH', 'DELETE']
const refused = (method: string, path: string, headers: Record<string, string>) =>
  refuseForeignOrigin({ method, path, headers }, ours)?.status ?? null

/** What a browser says of itself, and whether that may change something. */
const callers: [string, Record<string, string>, boolean][] = [
  ['our own page', { origin: ours, 'sec-fetch-site': 'same-origin' }, true],
  ['our own page in an older browser', { origin: ours }, true],
  ['our own page, without an Origin', { 'sec-fetch-site': 'same-origin' }, true],
  ['another site', { origin: 'https://elsewhere.example', 'sec-fetch-site': 'cross-site' }, false],
  ['another site in an older browser', { origin: 'https://elsewhere.example' }, false],
  ['a sister host', { origin: 'https://www.fettle.example', 'sec-fetch-site': 'same-site' }, false],
  ['a page over http', { origin: 'http://fettle.example', 'sec-fetch-site': 'same-site' }, false],
  ['another port', { origin: 'https://fettle.example:8443' }, false],
  ['a name that begins like ours', { origin: 'https://fettle.example.elsewhere.example' }, false],
  ['a sandboxed frame', { origin: 'null', 'sec-fetch-site': 'cross-site' }, false],
  ['a sandboxed frame that claims to be ours', { origin: 'null', 'sec-fetch-site': 'same-origin' }, false],
  ['a page that hides its Origin', { origin: 'null' }, false],
  ['an address typed in', { 'sec-fetch-site': 'none' }, false],
  ['somebody who says nothing', {}, false],
  ['somebody whose Origin is empty', { origin: '' }, false]
]

describe('refuseForeignOrigin', () => {
  for (const [who, headers, isAllowed] of callers)
    it(`${isAllowed ? 'lets' : 'keeps'} ${who} ${isAllowed ? 'change' : 'from changing'} something, on every path and by every method`, () => {
      for (const path of paths)
        for (const method of methods)
          expect([path, method, refused(method, path, { ...headers, cookie: 'fettle=x' })]).toEqual([
            path,
            method,
            isAllowed ? null : 403
          ])
    })

  it('lets anybody read', () => {
    for (const method of ['GET', 'HEAD', 'OPTIONS'])
      for (const [, headers] of callers) expect(refused(method, '/account', headers)).toBeNull()
  })

  it('lets a program without cookies use the API, and no page with them', () => {
    expect(refused('POST', '/api/v1/compute/survival', {})).toBeNull()
    expect(refused('POST', '/api/v1/compute/survival', { origin: 'https://elsewhere.example' })).toBeNull()
    expect(refused('POST', '/api/v1/compute/survival', { origin: 'https://elsewhere.example', cookie: 'fettle=x' })).toBe(403)
    expect(refused('POST', '/apis', {})).toBe(403)
  })
})

describe('refuseLargeBody', () => {
  const status = (method: string, path: string, headers: Record<string, string>) =>
    refuseLargeBody({ method, path, headers }, streamsItsBody)?.status ?? null
  const file = { 'content-type': 'multipart/form-data; boundary=x' }

  it.each([
    ['a form', 'POST', '/account', { 'content-length': '1000' }, null],
    ['a form of 256 KiB', 'POST', '/account', { 'content-length': '262144' }, null],
    ['one byte more', 'POST', '/account', { 'content-length': '262145' }, 413],
    ['a body without a length', 'POST', '/account', { 'transfer-encoding': 'chunked' }, 411],
    ['no body', 'POST', '/sign-out', {}, null],
    ['a bundle', 'POST', '/boards/x/releases/1.0.0/bundle', { 'content-length': '60000000' }, null],
    ['a bundle sent by script', 'POST', '/boards/x/releases/1.0.0/bundle.data', { 'transfer-encoding': 'chunked' }, null],
    ['a bundle sent by a plain form', 'POST', '/boards/x/releases/1.0.0', { 'content-length': '60000000', ...file }, null],
    ['another form of that page', 'POST', '/boards/x/releases/1.0.0', { 'content-length': '9000000' }, 413],
    ['a file where none is taken', 'POST', '/boards/x/releases/new', { 'content-length': '9000000', ...file }, 413],
    ['the same, written otherwise', 'POST', '/boards/x/releases/%6Eew', { 'content-length': '9000000', ...file }, 413],
    ['a computation', 'POST', '/api/v1/compute/survival', { 'content-length': '9000000' }, null],
    ['a table for the calculator', 'POST', '/calculators/survival', { 'content-length': '9000000', ...file }, null],
    ['another form of the calculator', 'POST', '/calculators/survival', { 'content-length': '9000000' }, 413],
    ['a path that only looks like it', 'POST', '/boards/x/y/releases/1.0.0/bundle', { 'content-length': '9000000' }, 413]
  ])('%s: %s %s', (_, method, path, headers, expected) => {
    expect(status(method, path, headers as Record<string, string>)).toBe(expected)
  })
})
