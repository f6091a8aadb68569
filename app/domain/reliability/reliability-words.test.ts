import { expect, it } from 'vitest'
import { excludedSentence, pText, shareText, tooFewSentence, upperPercent } from './reliability-words'

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

it('never writes 100 for an estimate or a limit', () => {
  expect([0.9951, 0.9999, 0.5, 0.001, 0].map(shareText)).toEqual(['over 99', 'over 99', '50', 'under 1', '0'])
  expect(upperPercent(0.991)).toBe('over 99')
})
