import { describe, expect, it } from 'vitest'
import { oneYearWords } from './one-year'

const at = {
  time: 365,
  survival: 0.921,
  lower: 0.894,
  upper: 0.941,
  bound: null,
  atRisk: 120,
  open: null
} as never as Parameters<typeof oneYearWords>[0]

describe('oneYearWords', () => {
  it.each([
    [{}, { figure: '92 of 100', interval: '89 to 95' }],
    [
      { survival: 0.999, lower: 0.991, upper: 1 },
      { figure: '99 of 100', interval: '99 to over 99' }
    ],
    [
      { survival: 1, lower: 0.885, upper: 1, bound: 'exact-one-sided' as const },
      { figure: '≥ 88 of 100', interval: 'none failed' }
    ],
    [
      { survival: 0.9, lower: 0.81, upper: 1, open: { from: 300, to: 400, before: 1 } },
      { figure: '90 of 100', interval: '81 to over 99' }
    ],
    [{ survival: null, lower: null, upper: null, open: { from: 10, to: 800, before: 1 } }, null],
    [{ survival: 0, lower: null, upper: null }, null],
    [{ atRisk: 4 }, null],
    [{ survival: null, lower: null, upper: null }, null]
  ])('%j', (change, words) => {
    expect(oneYearWords({ ...at, ...change })).toEqual(words)
  })
})
