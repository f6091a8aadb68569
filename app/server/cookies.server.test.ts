import { describe, expect, it } from 'vitest'
import { readCookie, secretCookie } from './cookies.server'

describe('secretCookie', () => {
  it('is bound to the host over https', () => {
    const cookie = secretCookie({ isSecure: true }, 'fettle', 60_000)
    expect(cookie.set('v')).toBe('__Host-fettle=v; Max-Age=60; Path=/; HttpOnly; SameSite=Lax; Secure')
    expect(cookie.clear()).toBe('__Host-fettle=; Max-Age=0; Path=/; HttpOnly; SameSite=Lax; Secure')
    expect(cookie.read('fettle=a; __Host-fettle=b')).toBe('b')
  })

  it('does without on this machine', () => {
    expect(secretCookie({ isSecure: false }, 'fettle', 60_000).set('v')).toBe(
      'fettle=v; Max-Age=60; Path=/; HttpOnly; SameSite=Lax'
    )
  })
})

describe('readCookie', () => {
  it.each([
    [null, null],
    ['', null],
    ['a=1', '1'],
    ['b=2; a=1', '1'],
    ['xa=2;a=1', '1'],
    ['a', null],
    ['a=1; a=2', '1'],
    ['a=x=y', 'x=y']
  ])('in %j finds %j', (header, value) => {
    expect(readCookie(header, 'a')).toBe(value)
  })
})
