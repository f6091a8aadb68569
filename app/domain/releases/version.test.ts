import fc from 'fast-check'
import semver from 'semver'
import { describe, expect, it } from 'vitest'
import { isTrial, mustReadVersion, newestOf, precedenceKey, readVersion, stateWhenPublished } from './version'

const key = (text: string) => precedenceKey(mustReadVersion(text))
const sign = (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0)

const num = fc.oneof(fc.nat(30), fc.nat(), fc.constantFrom(0, 9, 10, 99, 100, Number.MAX_SAFE_INTEGER))
const alpha = fc.stringMatching(/^[0-9A-Za-z-]{0,4}[A-Za-z-][0-9A-Za-z-]{0,4}$/)
const field = fc.oneof(num.map(String), alpha)
const fields = fc.array(field, { minLength: 1, maxLength: 3 }).map((f) => f.join('.'))
const version = fc
  .tuple(
    num,
    num,
    num,
    fc.option(fields),
    fc.option(fc.array(fc.stringMatching(/^[0-9A-Za-z-]{1,4}$/), { minLength: 1, maxLength: 2 }))
  )
  .map(([a, b, c, pre, build]) => `${a}.${b}.${c}${pre === null ? '' : `-${pre}`}${build === null ? '' : `+${build.join('.')}`}`)
  .filter((text) => text.length <= 64)

describe('precedenceKey', () => {
  it('orders the examples of SemVer 2.0.0, item 11, as printed there', () => {
    const printed = [
      '1.0.0-alpha',
      '1.0.0-alpha.1',
      '1.0.0-alpha.beta',
      '1.0.0-beta',
      '1.0.0-beta.2',
      '1.0.0-beta.11',
      '1.0.0-rc.1',
      '1.0.0'
    ]
    expect([...printed].sort((a, b) => sign(key(a), key(b)))).toEqual(printed)
    const numbers = ['1.0.0', '2.0.0', '2.1.0', '2.1.1']
    expect([...numbers].reverse().sort((a, b) => sign(key(a), key(b)))).toEqual(numbers)
  })

  it('agrees with semver.compare on any two versions', () => {
    fc.assert(
      fc.property(version, version, (a, b) => {
        expect(sign(key(a), key(b))).toBe(semver.compare(a, b))
      }),
      { numRuns: 5000, seed: 7 }
    )
  })

  it('agrees with semver.compare on neighbours that share a beginning', () => {
    const near = fc.tuple(
      fc.array(fc.constantFrom('a', 'a-', 'b', 'A', '1', '2', '10', '-', 'a1', '1a'), { minLength: 1, maxLength: 4 })
    )
    fc.assert(
      fc.property(near, near, ([a], [b]) => {
        const [x, y] = [`1.0.0-${a.join('.')}`, `1.0.0-${b.join('.')}`]
        expect(sign(key(x), key(y))).toBe(semver.compare(x, y))
      }),
      { numRuns: 5000, seed: 8 }
    )
  })

  it('is one for versions that differ in build metadata only', () => {
    expect(key('1.2.3+a')).toBe(key('1.2.3+b.7'))
    expect(key('1.2.3-rc.1+a')).toBe(key('1.2.3-rc.1'))
  })
})

describe('readVersion', () => {
  it('keeps a canonical spelling as it is', () => {
    fc.assert(
      fc.property(version, (text) => {
        const answer = readVersion(text)
        expect(answer).toMatchObject({ ok: true, version: { text } })
      }),
      { seed: 9 }
    )
  })

  it.each([
    ['2.1', 'lacks its third number. Did you mean 2.1.0?'],
    ['2', 'Did you mean 2.0.0?'],
    ['v1.2.3', '1.2.3'],
    ['=1.2.3', '1.2.3'],
    ['01.2.3', 'may not begin with 0'],
    ['1.2.3-01', 'may not begin with 0'],
    ['1.2.3.4', 'no version'],
    ['1.2.x', 'no version'],
    ['', 'no version'],
    [' 1.2.3', 'Write it as 1.2.3'],
    ['1.2.3-', 'no version'],
    ['1.2.3+', 'no version'],
    ['1.2.3-a..b', 'no version'],
    ['1.2.3-ä', 'no version'],
    ['9007199254740993.0.0', 'no version'],
    [`1.2.3-${'a'.repeat(80)}`, '64 characters']
  ])('refuses %j', (text, part) => {
    const answer = readVersion(text)
    expect(answer.ok).toBe(false)
    expect(!answer.ok && answer.message).toContain(part)
  })
})

describe('trial and newest', () => {
  it('calls a version with a pre-release a trial, whatever its numbers', () => {
    expect(isTrial(mustReadVersion('0.1.0'))).toBe(false)
    expect(stateWhenPublished(mustReadVersion('1.0.0-beta.1'))).toBe('trial')
    expect(stateWhenPublished(mustReadVersion('1.0.0+beta.1'))).toBe('released')
  })

  const r = (text: string, state: 'draft' | 'trial' | 'released' | 'withdrawn') => ({ text, state, precedenceKey: key(text) })
  it.each([
    ['the highest released', [r('1.10.0', 'released'), r('1.9.0', 'released'), r('2.0.0-rc.1', 'trial')], '1.10.0'],
    ['a trial while nothing is released', [r('0.9.0-beta.1', 'trial'), r('0.9.0-beta.2', 'trial')], '0.9.0-beta.2'],
    ['never a withdrawn one', [r('2.0.0', 'withdrawn'), r('1.0.0', 'released')], '1.0.0'],
    ['never a draft', [r('3.0.0', 'draft')], null],
    ['none of nothing', [], null]
  ])('is %s', (_, releases, expected) => {
    expect(newestOf(releases)?.text ?? null).toBe(expected)
  })
})
