import { expect, test } from 'vitest'
import { batchWatch } from './batch-watch'
import { garwood } from './garwood'

const others = { time: Float64Array.of(0, 10, 20), cumulative: Float64Array.of(0.01, 0.05, 0.05), variance: new Float64Array(3) }

test('by hand: hazards of the other batches summed over the units', () => {
  const batch = [
    { time: 0, isFailed: true },
    { time: 9, isFailed: false },
    { time: 10, isFailed: true },
    { entry: 5, time: 20, isFailed: true, weight: 2 }
  ]
  const watch = batchWatch(batch, others)!
  expect(watch.expected).toBeCloseTo(0.01 + 0.01 + 0.05 + 2 * 0.04, 15)
  expect(watch).toMatchObject({ ...garwood(4, watch.expected)!, isFlagged: true, comparedTo: 20, laterFailures: 0 })
})

test('flagged only when the lower limit exceeds 1', () => {
  const batch = (n: number, failed: number) => Array.from({ length: n }, (_, i) => ({ time: 20, isFailed: i < failed }))
  // 100 units: 5 expected. The exact limits of 11 begin at 5.49, those of 9 at 4.12 (Garwood's table).
  expect(batchWatch(batch(100, 11), others)).toMatchObject({ observed: 11, isFlagged: true })
  expect(batchWatch(batch(100, 9), others)).toMatchObject({ observed: 9, isFlagged: false })
})

test('nothing is compared beyond what the other batches show', () => {
  const watch = batchWatch(
    [
      { time: 500, isFailed: true },
      { time: 20, isFailed: true }
    ],
    others
  )!
  expect(watch).toMatchObject({ observed: 1, laterFailures: 1, comparedTo: 20 })
  expect(watch.expected).toBeCloseTo(0.1, 15)
})

test('nothing to expect: no ratio', () => {
  const empty = new Float64Array(0)
  expect(batchWatch([{ time: 5, isFailed: true }], { time: empty, cumulative: empty, variance: empty })).toBeNull()
  expect(batchWatch([{ entry: 12, time: 15, isFailed: true }], others)).toBeNull()
  expect(batchWatch([], others)).toBeNull()
})
