import { describe, expect, test } from 'vitest'
import { expectClose, reference } from '../../../tests/support/survival-reference'
import { garwood } from './garwood'

describe('worked by hand', () => {
  test('none observed: e^-m = alpha/2 at the upper limit', () => {
    expectClose(Object.values(garwood(0, 2)!), [0, 2, 0, 0, -Math.log(0.025) / 2], 1e-14, 'none')
  })

  test('one observed: 1 - e^-m = alpha/2 at the lower limit', () => {
    expect(garwood(1, 4)!.lower).toBeCloseTo(-Math.log(0.975) / 4, 15)
  })

  test('nothing expected: no ratio', () => {
    expect(garwood(3, 0)).toBeNull()
  })

  test.each([
    [-1, 1, 0.95],
    [1.5, 1, 0.95],
    [1, -1, 0.95],
    [1, Infinity, 0.95],
    [1, 1, 0]
  ])('%s over %s at %s is refused', (observed, expected, confidence) => {
    expect(() => garwood(observed, expected, confidence)).toThrow(RangeError)
  })
})

test("R's poisson.test (exact-bounds-a, 1e-12)", () => {
  for (const { failures, total_time: time, rate_two_sided_95_poisson_test: limits } of reference('exact-bounds-a').results.mtbf) {
    const ours = garwood(failures, time)!
    expect(Math.abs(ours.upper / limits[1] - 1)).toBeLessThan(1e-12)
    expect(failures === 0 ? ours.lower : Math.abs(ours.lower / limits[0] - 1)).toBeLessThan(1e-12)
  }
})
