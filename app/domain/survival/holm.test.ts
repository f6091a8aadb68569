import { expect, test } from 'vitest'
import { holm } from './holm'

test.each([
  ['none', [], []],
  ['one stays', [0.03], [0.03]],
  ['times 3, 2, 1 in order of size', [0.01, 0.04, 0.02], [0.03, 0.04, 0.04]],
  ['never below an earlier one', [0.02, 0.021, 0.9], [0.06, 0.06, 0.9]],
  ['capped at 1', [0.6, 0.7], [1, 1]],
  ['ties', [0.01, 0.01], [0.02, 0.02]]
])('%s', (_what, p, expected) => {
  holm(p).forEach((value, i) => expect(value).toBeCloseTo(expected[i]!, 15))
  expect(holm(p)).toHaveLength(expected.length)
})

test('what is no probability is refused', () => {
  expect(() => holm([0.5, NaN])).toThrow(RangeError)
  expect(() => holm([1.5])).toThrow(RangeError)
})
