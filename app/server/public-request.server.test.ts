import { describe, expect, it } from 'vitest'
import { readAsPublic } from './public-request.server'

const ours = 'https://fettle.example'
const read = (url: string, headers: Record<string, string> = {}) => {
  const request = { url, headers: { host: '127.0.0.1:3000', ...headers } as Record<string, string | undefined> }
  const isRead = readAsPublic(request, ours)
  return Object.assign(request, { isRead })
}

describe('readAsPublic', () => {
  it('gives the address that people see, whatever the headers say', () => {
    for (const headers of [
      {},
      { host: '[' },
      { host: 'elsewhere.example' },
      { 'x-forwarded-host': 'elsewhere.example', 'x-forwarded-proto': 'java script' }
    ] as Record<string, string>[])
      expect(read('/account?a=%00', headers)).toMatchObject({
        isRead: true,
        url: '/account?a=%00',
        originalUrl: '/account?a=%00',
        protocol: 'https',
        headers: { host: 'fettle.example' }
      })
    expect(read('/', { 'x-forwarded-host': 'a', 'x-forwarded-proto': 'b' }).headers).toEqual({ host: 'fettle.example' })
  })

  it.each([
    ['/api/v1/compute/../../../account', '/account'],
    ['/api/v1/compute/%2e%2e/%2E%2E/../account', '/account'],
    ['/api\\..\\account', '/account'],
    ['/../../etc/passwd', '/etc/passwd'],
    ['//elsewhere.example/x', '//elsewhere.example/x'],
    ['http://elsewhere.example/account?x=1', '/account?x=1'],
    ['/boards/%E0%A4%A', '/boards/%E0%A4%A'],
    ['/a b', '/a%20b']
  ])('reads %s as %s', (target, path) => expect(read(target)).toMatchObject({ isRead: true, url: path }))

  it.each(['*', '', 'account', 'ftp://elsewhere.example/', 'http://', 'javascript:alert(1)'])('has no address in %j', (target) =>
    expect(read(target).isRead).toBe(false)
  )
})
