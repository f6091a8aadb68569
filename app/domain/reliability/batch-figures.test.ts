import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { arbitraryLives, livesAsOf } from '../../../tests/support/arbitrary-lives'
import { allReports, observationOf, type LifeHistory } from '../reports/observations'
import { batchWatch } from '../survival/batch-watch'
import { columnsOf } from '../survival/columns'
import { kaplanMeier } from '../survival/kaplan-meier'
import { nelsonAalen } from '../survival/nelson-aalen'
import { tallyOf } from '../survival/tally'
import { batchFigures, maxBatchRows, type BatchCounts } from './batch-figures'
import { countLives } from './count-life'
import { addDay, noCounts } from './group-counts'

const batch = (id: string, lives: readonly LifeHistory[], releaseId = 'v1'): BatchCounts => ({
  id,
  releaseId,
  version: '1.0.0',
  code: id,
  madeOn: '2024-01-01',
  quantity: 50,
  counts: countLives(lives, livesAsOf, allReports)
})

/** One by one: failures by the board or of unknown cause, everything else leaves when last known to run. */
const unitsOf = (lives: readonly LifeHistory[]) =>
  lives.flatMap((life) => {
    const seen = observationOf(life, livesAsOf, allReports)
    if (seen.kind !== 'observed') return []
    const isFailed = seen.cause === 'board' || seen.cause === 'unknown'
    const time = isFailed || seen.interval === null ? seen.time : Math.max(seen.entry, seen.interval.lower)
    return seen.entry > 0 && time <= seen.entry ? [] : [{ entry: seen.entry, time, isFailed }]
  })

describe('batchFigures', () => {
  it('are the watch over the units one by one, against those of the other batches of the release', () => {
    let met = 0
    fc.assert(
      fc.property(arbitraryLives(2, 80), (all) => {
        const lives = all.filter((life) => life.batchId !== null)
        const ids = ['a', 'b', 'c']
        const elsewhere = batch('x', lives, 'v2')
        const { rows, total } = batchFigures([
          ...ids.map((id) =>
            batch(
              id,
              lives.filter((life) => life.batchId === id)
            )
          ),
          elsewhere
        ])
        expect(total).toBe(4)
        expect(rows.find((row) => row.code === 'x')!.watch).toBeNull()
        for (const id of ids) {
          const others = unitsOf(lives.filter((life) => life.batchId !== id))
          const hazard = nelsonAalen(
            kaplanMeier(tallyOf(columnsOf(others.map(({ entry, time, isFailed }) => ({ entry, time, event: isFailed ? 1 : 0 })))))
          )
          const own = unitsOf(lives.filter((life) => life.batchId === id))
          const expected = batchWatch(own, hazard)
          const row = rows.find((one) => one.code === id)!
          expect(row.observed).toBe(own.filter(({ isFailed }) => isFailed).length)
          if (expected === null || row.watch === null) {
            expect([row.watch, expected]).toEqual([null, null])
            continue
          }
          met++
          expect(row.watch).toMatchObject({ observed: expected.observed, comparedTo: expected.comparedTo })
          expect(row.watch.expected).toBeCloseTo(expected.expected, 9)
          expect(row.watch.lower).toBeCloseTo(expected.lower, 6)
        }
      }),
      { seed: 1 }
    )
    expect(met).toBeGreaterThan(50)
  })

  it('put flagged batches first, and no more than a hundred rows', () => {
    const counted = (id: string, failures: number): BatchCounts => {
      const counts = noCounts()
      addDay(counts.days, 'entered', 0, 40)
      addDay(counts.days, 'failed:board', 50, failures)
      addDay(counts.days, 'left', 400, 40 - failures)
      return { ...batch(id, []), counts }
    }
    const good = Array.from({ length: 120 }, (_, i) => counted(`g${i}`, i % 20 === 0 ? 1 : 0))
    const { rows, total } = batchFigures([...good, counted('bad', 12)])
    expect(total).toBe(121)
    expect(rows).toHaveLength(maxBatchRows)
    expect(rows[0]).toMatchObject({ batch: '1.0.0/bad', observed: 12, watch: { isFlagged: true } })
    expect(rows[1]!.code).toBe('g0')
    // 6 failures among 4800 others: 40 units at 6/4800 each.
    expect(rows[0]!.watch!.expected).toBeCloseTo((40 * 6) / 4800, 9)
    const only = batchFigures([...good, counted('bad', 12)], ({ code }) => code === 'bad')
    expect(only.rows).toEqual([rows[0]])
  })
})
