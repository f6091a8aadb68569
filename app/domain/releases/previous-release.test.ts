import { describe, expect, it } from 'vitest'
import { previousOf } from './previous-release'

const release = (version: string, state = 'released') => ({ version, state })
const all = ['1.0.0', '2.0.0', '1.10.0', '1.2.0'].map((v) => release(v))

describe('previousOf', () => {
  it.each([
    ['2.0.0', '1.10.0'],
    ['1.10.0', '1.2.0'],
    ['1.3.0', '1.2.0'],
    ['3.0.0', '2.0.0'],
    ['2.0.0-rc.1', '1.10.0'],
    ['1.0.0', null],
    ['0.1.0', null]
  ])('of %s is %s', (version, previous) => expect(previousOf(all, version)?.version ?? null).toBe(previous))

  it('takes trials and withdrawn ones, but no drafts', () => {
    const some = [
      release('1.0.0'),
      release('1.1.0-beta.2', 'trial'),
      release('1.1.0-beta.11', 'trial'),
      release('1.1.0', 'draft')
    ]
    expect(previousOf(some, '1.2.0')?.version).toBe('1.1.0-beta.11')
    expect(previousOf([...some, release('1.1.5', 'withdrawn')], '1.2.0')?.version).toBe('1.1.5')
  })

  it('does not take a version that differs in build metadata only', () =>
    expect(previousOf([release('1.0.0+a'), release('0.9.0')], '1.0.0+b')?.version).toBe('0.9.0'))
})
