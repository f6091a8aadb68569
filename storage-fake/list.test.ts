import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compareKeys, type Entry } from './bucket'
import { listPage, type ListQuery } from './list'

const entries = (keys: string[]): Entry[] =>
  [...keys].sort(compareKeys).map((key) => ({ key, bytes: 1, etag: 'e', modifiedAt: '2026-01-01T00:00:00.000Z' }))
const all: ListQuery = { prefix: '', delimiter: '', after: '', maxKeys: 1000 }

/** Walks all pages and notes keys and common prefixes in the order of the answer. */
function walk(sorted: Entry[], query: ListQuery): { keys: string[]; prefixes: string[] } {
  const found = { keys: [] as string[], prefixes: [] as string[] }
  for (let after = query.after, pages = 0; ; pages++) {
    if (pages > sorted.length) throw new Error('the listing does not end')
    const page = listPage(sorted, { ...query, after })
    expect(page.entries.length + page.commonPrefixes.length).toBeLessThanOrEqual(query.maxKeys)
    found.keys.push(...page.entries.map((one) => one.key))
    found.prefixes.push(...page.commonPrefixes)
    if (!page.isTruncated) return found
    after = page.last
  }
}

describe('listPage', () => {
  /** The example of the S3 user guide, "Organizing objects using prefixes". */
  const guide = entries([
    'sample.jpg',
    'photos/2006/January/sample.jpg',
    'photos/2006/February/sample2.jpg',
    'photos/2006/February/sample3.jpg'
  ])

  it('rolls keys up to the delimiter', () => {
    expect(walk(guide, { ...all, delimiter: '/' })).toEqual({ keys: ['sample.jpg'], prefixes: ['photos/'] })
    expect(walk(guide, { ...all, delimiter: '/', prefix: 'photos/2006/' })).toEqual({
      keys: [],
      prefixes: ['photos/2006/February/', 'photos/2006/January/']
    })
  })

  it('orders by UTF-8 bytes', () => {
    const keys = ['b', 'a', 'a/', 'A', 'ä', '\ue000', '𝄞', '', '\uffff', 'a!', 'aa'].filter((key) => key !== '')
    const bytes = [...keys].sort((a, b) => Buffer.compare(Buffer.from(a), Buffer.from(b)))
    expect(entries(keys).map((one) => one.key)).toEqual(bytes)
  })

  it('gives nothing for max-keys 0 and begins after the given key', () => {
    expect(listPage(guide, { ...all, maxKeys: 0 })).toMatchObject({ entries: [], isTruncated: false })
    expect(walk(guide, { ...all, after: 'photos/2006/January/sample.jpg' }).keys).toEqual(['sample.jpg'])
    expect(walk(guide, { ...all, prefix: 'photos/', after: 'z' }).keys).toEqual([])
  })

  it('gives in pages what a plain filter gives, for any keys, prefix, delimiter and page size', () => {
    const key = fc.string({ unit: fc.constantFrom('a', 'b', '/', 'ä', '𝄞'), minLength: 1, maxLength: 6 })
    fc.assert(
      fc.property(
        fc.uniqueArray(key, { maxLength: 30 }),
        fc.string({ unit: fc.constantFrom('a', 'b', '/'), maxLength: 2 }),
        fc.constantFrom('', '/', 'ab'),
        fc.integer({ min: 1, max: 4 }),
        (keys, prefix, delimiter, maxKeys) => {
          const matching = keys.filter((one) => one.startsWith(prefix))
          const rolled = (one: string) => (delimiter === '' ? -1 : one.indexOf(delimiter, prefix.length))
          const plain = matching.filter((one) => rolled(one) < 0)
          const prefixes = new Set(
            matching.filter((one) => rolled(one) >= 0).map((one) => one.slice(0, rolled(one) + delimiter.length))
          )
          expect(walk(entries(keys), { ...all, prefix, delimiter, maxKeys })).toEqual({
            keys: plain.sort(compareKeys),
            prefixes: [...prefixes].sort(compareKeys)
          })
        }
      ),
      { numRuns: 300, seed: 1 }
    )
  })
})
