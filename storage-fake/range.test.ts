import { describe, expect, it } from 'vitest'
import { parseRange } from './range'

/** RFC 9110, 14.1.2: its examples are for a representation of 10,000 bytes. */
describe('parseRange', () => {
  it.each([
    ['bytes=0-499', { start: 0, end: 499 }],
    ['bytes=500-999', { start: 500, end: 999 }],
    ['bytes=-500', { start: 9500, end: 9999 }],
    ['bytes=9500-', { start: 9500, end: 9999 }],
    ['bytes=0-0', { start: 0, end: 0 }],
    ['bytes=-1', { start: 9999, end: 9999 }],
    ['bytes=-20000', { start: 0, end: 9999 }],
    ['bytes=9999-20000', { start: 9999, end: 9999 }],
    ['bytes=10000-', 'unsatisfiable'],
    ['bytes=-0', 'unsatisfiable'],
    ['bytes=5-4', null],
    ['bytes=0-1,5-6', null],
    ['bytes=-', null],
    ['bytes=a-b', null],
    ['lines=0-1', null],
    [undefined, null]
  ])('%s', (header, expected) => {
    expect(parseRange(header, 10_000)).toEqual(expected)
  })

  it('is never satisfiable on an empty content', () => {
    for (const header of ['bytes=0-', 'bytes=-5', 'bytes=0-0']) expect(parseRange(header, 0)).toBe('unsatisfiable')
  })
})
