import { describe, expect, it } from 'vitest'
import { nextLink, readPageQuery } from './page-query'

const read = (query: string, allowed?: string[]) => readPageQuery(new URLSearchParams(query), allowed)

describe('readPageQuery', () => {
  it('takes what is allowed', () => {
    expect(read('')).toEqual({ limit: 20, after: null })
    expect(read('limit=100&after=x')).toEqual({ limit: 100, after: 'x' })
    expect(read('q=a', ['q'])).toEqual({ limit: 20, after: null })
  })
  it.each([
    ['limit=0', 'limit'],
    ['limit=101', 'limit'],
    ['limit=-1', 'limit'],
    ['limit=1.5', 'limit'],
    ['limit=ten', 'limit'],
    ['limit=', 'limit'],
    ['limit=1&limit=2', 'limit'],
    ['after=', 'after'],
    ['offset=3', 'offset'],
    ['q=a', 'q']
  ])('refuses %s at %s', (query, path) => {
    expect(() => read(query)).toThrow(expect.objectContaining({ kind: 'invalid', errors: [expect.objectContaining({ path })] }))
  })
})

describe('nextLink', () => {
  it('keeps the query and sets the place', () => {
    const url = new URL('http://x/api/v1/boards?limit=2&after=a&q=b c')
    expect(nextLink(url, 'd~1')).toBe('/api/v1/boards?limit=2&after=d%7E1&q=b+c')
    expect(nextLink(url, null)).toBeNull()
  })
})
