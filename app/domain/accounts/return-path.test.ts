import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { returnPath } from './return-path'

describe('returnPath', () => {
  it.each([
    '/',
    '/account',
    '/boards/buttress/releases/1.2.0?tab=2#s3',
    '/guides/a%20b',
    '/x?return=//elsewhere.example',
    '/a/../b'
  ])('keeps a path of this site: %s', (path) => {
    expect(returnPath(path)).toBe(new URL(path, 'http://x.invalid').href.slice('http://x.invalid'.length))
  })

  it.each([
    ['nothing', null],
    ['an empty text', ''],
    ['another host', 'https://elsewhere.example/'],
    ['a host without a scheme', '//elsewhere.example'],
    ['three slashes', '///elsewhere.example'],
    ['a backslash for a slash', '/\\elsewhere.example'],
    ['a backslash further on', '/a\\b'],
    ['a tab, which browsers drop', '/\t/elsewhere.example'],
    ['a line end, which browsers drop', '/\n/elsewhere.example'],
    ['a space', '/a b'],
    ['a control character', '/a\u0000b'],
    ['a later control character', '/a\u0085b'],
    ['dots that leave two slashes', '/..//elsewhere.example'],
    ['a script', 'javascript:alert(1)'],
    ['a path without its slash', 'account'],
    ['the way in again', '/sign-in?return=/'],
    ['a mailed link', '/sign-in/link/abc'],
    ['the way out', '/sign-out'],
    ['the data of the way out', '/sign-out.data'],
    ['a very long path', `/${'a'.repeat(500)}`]
  ])('gives the start page for %s', (_, path) => {
    expect(returnPath(path)).toBe('/')
  })

  /* Node's URL follows the WHATWG URL standard, by which browsers resolve a Location. */
  it('never leads to another origin, whatever it is given', () => {
    const piece = fc.constantFrom(
      '/',
      '\\',
      '.',
      '..',
      '%2f',
      '%5c',
      ':',
      '@',
      '//',
      '\t',
      '\n',
      'a',
      'evil.example',
      'http:',
      '?',
      '#',
      ' '
    )
    const any = fc.oneof(
      fc.string(),
      fc.array(piece, { maxLength: 8 }).map((parts) => `/${parts.join('')}`)
    )
    fc.assert(
      fc.property(any, (asked) => {
        const target = new URL(returnPath(asked), 'https://fettle.example/sign-in')
        expect(target.origin).toBe('https://fettle.example')
      }),
      { numRuns: 2000, seed: 2026 }
    )
  })
})
