import { describe, expect, it } from 'vitest'
import { excludedSentence, plainSentence, pText, tooFewSentence, upperPercent } from './reliability-words'

const at = (change: object) => ({
  time: 365,
  survival: 0.92,
  standardError: 0.01,
  atRisk: 120,
  lower: 0.894,
  upper: 0.9401,
  bound: null,
  open: null,
  ...change
})
const said = (change: object, n = 212, events = 17) =>
  plainSentence({ n, events, atOneYear: at(change), worksAtFirstPowerOnly: false, cause: 'all' })

describe('plainSentence', () => {
  it('says the share with its interval, rounded outwards', () => {
    expect(said({})).toBe(
      'Of 212 units followed, 17 have failed. About 92 of 100 still work after a year (95\u00a0% interval 89 to 95).'
    )
  })
  it('says the exact lower bound when none failed, never 100', () => {
    const text = said({ survival: 1, lower: Math.pow(0.05, 1 / 30), upper: 1, bound: 'exact-one-sided', atRisk: 30 }, 40, 0)
    // 0.05^(1/30) = 0.9049…
    expect(text).toBe(
      'Of 40 units followed, none is known to have failed. With 30 still followed, at least 90 of 100 work after a year (exact lower bound, 95\u00a0% confidence).'
    )
  })
  it('says when too few were followed', () => {
    expect(said({ atRisk: 4 })).toContain('Too few have been followed for a year (4)')
    expect(said({ survival: null, lower: null, upper: null, atRisk: 0 })).toContain('Too few')
    expect(said({}, 0, 0)).toBe('No unit has been followed yet, so nothing can be said.')
  })
  it('says when none lasted', () => {
    expect(said({ survival: 0, lower: null, upper: null, atRisk: 0 }, 1, 1)).toBe(
      'Of 1 unit followed, 1 has failed. None of them lasted a year.'
    )
  })
  it('says of one cause what it takes for granted', () => {
    const of = (change: object, events = 9) =>
      plainSentence({ n: 212, events, atOneYear: at(change), worksAtFirstPowerOnly: false, cause: 'board' })
    expect(of({})).toBe(
      'Of 212 units followed, 9 have failed by the board or for no known reason. About 92 of 100 get through a year without that (95\u00a0% interval 89 to 95), were there no other cause.'
    )
    expect(of({ survival: 1, bound: 'exact-one-sided', upper: 1 }, 0)).toContain(
      'none is known to have failed by the board or for no known reason. With 120 still followed, at least 89 of 100 get through'
    )
  })
  it('says where the failures leave the day open', () => {
    expect(said({ open: { from: 340, to: 402 } })).toContain(
      'It is read on day 402: between days 340 and 402 the failures leave it open.'
    )
  })
  it('claims no limit that there is none of', () => {
    const text = said({ survival: 1, lower: null, upper: null })
    expect(text).toContain('what its limits are cannot be said')
    expect(text).not.toMatch(/100 of 100|at least/)
  })
  it('never writes 100 for an estimate or a limit', () => {
    for (const survival of [0.9951, 0.9999])
      expect(said({ survival, lower: 0.98, upper: 0.99999 })).toContain(
        'Over 99 of 100 still work after a year (95\u00a0% interval 98 to over 99)'
      )
    expect(upperPercent(0.991)).toBe('over 99')
  })
})

it('names the groups with too few, unless it is all of them', () => {
  const groups = ['TM-1', 'TM-2', 'TM-3'].map((group, i) => ({ group, atOneYear: at({ atRisk: [2, 4, 80][i] }) }))
  expect(tooFewSentence(groups)).toBe('For TM-1 and TM-2 there are too few to say.')
  expect(tooFewSentence(groups.slice(0, 2))).toBeNull()
  expect(tooFewSentence(groups.slice(2))).toBeNull()
})

it('counts what is excluded', () => {
  expect(excludedSentence([])).toBeNull()
  expect(
    excludedSentence([
      { kind: 'duplicate', count: 2 },
      { kind: 'other-board', count: 1 }
    ])
  ).toBe('3 reports excluded: 2 duplicates, 1 other board.')
})

it('prints p values', () => {
  expect([0.23, 0.0412, 0.0001, 0].map(pText)).toEqual(['p = 0.23', 'p = 0.041', 'p < 0.001', 'p < 0.001'])
})
