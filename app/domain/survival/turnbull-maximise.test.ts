import { describe, expect, test } from 'vitest'
import { certain, maximise } from './turnbull-maximise'
import type { Problem } from './turnbull-problem'

const problem = (size: number, ...cells: [number, number][]): Problem => ({
  size,
  first: Int32Array.from(cells, ([first]) => first),
  last: Int32Array.from(cells, ([, last]) => last),
  termOf: new Int32Array(0)
})

describe('worked by hand', () => {
  test('one cell, 3 failed and 5 came through: ln S falls by ln(8/5)', () => {
    const { falls, logLikelihood, isConverged } = maximise(problem(1, [0, 0]), {
      survived: Float64Array.of(5),
      weight: Float64Array.of(3)
    })
    expect(falls[0]).toBeCloseTo(Math.log(8 / 5), 12)
    expect(logLikelihood).toBeCloseTo(3 * Math.log(3 / 8) + 5 * Math.log(5 / 8), 12)
    expect(isConverged).toBe(true)
  })

  test('a cell that nobody survived falls to 0', () => {
    const { falls } = maximise(problem(2, [0, 0], [1, 1]), { survived: Float64Array.of(1, 0), weight: Float64Array.of(1, 1) })
    expect(falls[0]).toBeCloseTo(Math.LN2, 12)
    expect(falls[1]).toBe(certain)
  })

  test('a failure in either of two cells goes where fewer came through', () => {
    const { falls } = maximise(problem(2, [0, 1]), { survived: Float64Array.of(4, 2), weight: Float64Array.of(2) })
    expect(falls[0]).toBe(0)
    expect(falls[1]).toBeCloseTo(Math.log(4 / 2), 12)
  })

  test('no failure: nothing falls', () => {
    expect(maximise(problem(2), { survived: Float64Array.of(4, 2), weight: new Float64Array(0) })).toMatchObject({
      falls: Float64Array.of(0, 0),
      logLikelihood: 0
    })
  })

  test('begun near another maximum, it ends at the same one', () => {
    const three = problem(3, [0, 1], [1, 2], [0, 0], [2, 2])
    const load = { survived: Float64Array.of(6, 4, 2), weight: Float64Array.of(3, 2, 1, 1) }
    const fresh = maximise(three, load)
    const near = maximise(three, load, 1e-15, Float64Array.of(0, 0.9, 0))
    near.falls.forEach((fall, j) => expect(fall).toBeCloseTo(fresh.falls[j]!, 10))
  })
})
