import { describe, expect, test } from 'vitest'
import { expectClose, reference } from '../../../tests/support/survival-reference'
import { clopperPearson } from './clopper-pearson'

describe('worked by hand', () => {
  test('none and all: the closed form of the one tail', () => {
    expectClose(Object.values(clopperPearson(0, 20, 0.9)!), [0, 0, 1 - 0.05 ** (1 / 20)], 1e-14, 'none')
    expectClose(Object.values(clopperPearson(20, 20, 0.9)!), [1, 0.05 ** (1 / 20), 1], 1e-14, 'all')
  })

  test('one of two: quantiles of Beta(1, 2) and Beta(2, 1)', () => {
    expectClose(Object.values(clopperPearson(1, 2)!), [0.5, 1 - Math.sqrt(0.975), Math.sqrt(0.975)], 1e-14, 'one of two')
  })

  test('nothing tried', () => {
    expect(clopperPearson(0, 0)).toBeNull()
  })

  test.each([
    [3, 2, 0.95],
    [-1, 2, 0.95],
    [0.5, 2, 0.95],
    [1, Infinity, 0.95],
    [1, 2, 1]
  ])('%s of %s at %s is refused', (x, n, confidence) => {
    expect(() => clopperPearson(x, n, confidence)).toThrow(RangeError)
  })
})

test("R's binom.test (exact-bounds-a, 1e-12)", () => {
  for (const row of reference('exact-bounds-a').results.binomial) {
    const at = (confidence: number) => clopperPearson(row.successes, row.n, confidence)!
    const ours = [at(0.95).estimate, at(0.95).lower, at(0.95).upper, at(0.9).lower, at(0.9).upper]
    expectClose(ours, [row.estimate, ...row.clopper_pearson_95, ...row.clopper_pearson_90], 1e-12, `${row.successes} of ${row.n}`)
    // A limit of one side at 95 % is that of both sides at 90 %.
    expectClose([at(0.9).lower, at(0.9).upper], [row.lower_one_sided_95, row.upper_one_sided_95], 1e-12, 'one-sided')
  }
})
