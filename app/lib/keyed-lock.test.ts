import { describe, expect, it } from 'vitest'
import { KeyedLock } from './keyed-lock'

describe('KeyedLock', () => {
  it('runs one after the other for a key, also after a failure, and at once for another', async () => {
    const lock = new KeyedLock()
    const log: string[] = []
    const step =
      (name: string, turns: number, fails = false) =>
      async () => {
        log.push(`${name} begins`)
        for (let i = 0; i < turns; i++) await Promise.resolve()
        log.push(`${name} ends`)
        if (fails) throw new Error(name)
      }
    const results = await Promise.allSettled([
      lock.run('k', step('a', 20, true)),
      lock.run('k', step('b', 1)),
      lock.run('k', step('c', 1)),
      lock.run('other', step('x', 0))
    ])
    expect(results.map((r) => r.status)).toEqual(['rejected', 'fulfilled', 'fulfilled', 'fulfilled'])
    expect(log.filter((line) => !line.startsWith('x'))).toEqual([
      'a begins',
      'a ends',
      'b begins',
      'b ends',
      'c begins',
      'c ends'
    ])
    expect(log.indexOf('x ends')).toBeLessThan(log.indexOf('a ends'))
  })
})
