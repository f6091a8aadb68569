import { describe, expect, it } from 'vitest'
import { isIfRangeMet, isNoneMatchHit, readRange } from './byte-range'

describe('readRange', () => {
  /* The examples of RFC 9110, 14.1.2, for a representation of 10,000 bytes. */
  it.each([
    ['bytes=0-499', { kind: 'part', start: 0, end: 499 }],
    ['bytes=500-999', { kind: 'part', start: 500, end: 999 }],
    ['bytes=-500', { kind: 'part', start: 9500, end: 9999 }],
    ['bytes=9500-', { kind: 'part', start: 9500, end: 9999 }],
    ['bytes=0-0', { kind: 'part', start: 0, end: 0 }],
    ['bytes=0-0,-1', { kind: 'whole' }],
    ['bytes=9999-20000', { kind: 'part', start: 9999, end: 9999 }],
    ['bytes=10000-', { kind: 'unsatisfiable' }],
    ['bytes=-0', { kind: 'unsatisfiable' }],
    ['bytes=-20000', { kind: 'part', start: 0, end: 9999 }],
    ['bytes=5-2', { kind: 'whole' }],
    ['bytes=-', { kind: 'whole' }],
    ['bytes=a-b', { kind: 'whole' }],
    ['lines=1-2', { kind: 'whole' }],
    ['', { kind: 'whole' }],
    [null, { kind: 'whole' }]
  ])('reads %j', (header, answer) => expect(readRange(header, 10_000)).toEqual(answer))

  it('finds nothing to give of an empty content', () => {
    expect(readRange('bytes=0-', 0)).toEqual({ kind: 'unsatisfiable' })
    expect(readRange('bytes=-5', 0)).toEqual({ kind: 'unsatisfiable' })
  })
})

describe('conditions', () => {
  it('takes only the same strong tag for If-Range', () => {
    expect(isIfRangeMet(null, '"a"')).toBe(true)
    expect(isIfRangeMet('"a"', '"a"')).toBe(true)
    for (const header of ['W/"a"', '"b"', 'Tue, 01 Dec 2026 00:00:00 GMT']) expect(isIfRangeMet(header, '"a"')).toBe(false)
  })
  it('finds a tag in If-None-Match', () => {
    for (const header of ['"a"', 'W/"a"', '"b", "a"', '*']) expect(isNoneMatchHit(header, '"a"')).toBe(true)
    for (const header of [null, '', '"b"', 'a']) expect(isNoneMatchHit(header, '"a"')).toBe(false)
  })
})
