import { describe, expect, it } from 'vitest'
import { comparisonSentence, pairVerdict, untoldWords } from './comparison-words'
import type { PairFigures } from './figures.types'

const difference = (estimate: number, lower: number, upper: number) => ({
  tau: 365,
  estimate,
  lower,
  upper,
  standardError: 1,
  z: null,
  p: null
})
const test = (adjustedP: number) => ({ chiSquare: 4, degreesOfFreedom: 1, p: adjustedP / 2, adjustedP })
const pair = (adjustedP: number | null, meanDifference: PairFigures['meanDifference']): PairFigures => ({
  first: 'TM-3',
  second: 'TM-1',
  logRank: adjustedP === null ? null : test(adjustedP),
  meanDifference
})

describe('comparisonSentence', () => {
  const groups = ['TM-1', 'TM-2', 'TM-3']
  it('says a difference only below 0.05', () => {
    const said = (p: number) =>
      comparisonSentence({ by: 'revision', groups, logRank: { chiSquare: 6.91, degreesOfFreedom: 2, p } })
    expect(said(0.049)).toBe(
      'The 3 revisions differ by more than chance would explain (log-rank test: chi-square 6.9 on 2, p\u00a0=\u00a00.049).'
    )
    expect(said(0.05)).toContain('The figures cannot tell the 3 revisions apart')
    expect(comparisonSentence({ by: 'revision', groups, logRank: null })).toBeNull()
  })
})

it('judges a pair by its adjusted p alone', () => {
  expect([0.01, 0.06].map((p) => pairVerdict({ logRank: test(p) }))).toEqual(['more than chance', 'not told apart'])
  expect(pairVerdict({ logRank: null })).toBe('not tested')
})

describe('untoldWords', () => {
  const of = (pairs: PairFigures[], leftOut: string[] = []) => untoldWords({ by: 'revision', pairs, leftOut, tooMany: [] })
  it('says how large a difference could hide behind pairs not told apart', () => {
    expect(of([pair(0.6, difference(-2, -17.2, 9)), pair(0.001, difference(-80, -120, -40))])[0]).toBe(
      'Not told apart is not alike: a difference of up to 18 days in the first year would fit these figures too.'
    )
    expect(of([pair(null, null)])[0]).toContain('too little was seen')
  })
  it('names who is left out, and no such thing where all are told apart', () => {
    const said = of([pair(0.001, difference(-80, -120, -40))], ['TM-6', 'TM-4'])
    expect(said[0]).toContain('Why revisions differ')
    expect(said.at(-1)).toBe('How TM-6 and TM-4 would compare: too few were followed.')
  })
})
