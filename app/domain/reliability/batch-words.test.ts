import { expect, it } from 'vitest'
import { flaggedHeading, flaggedSentence, unwatchedText } from './batch-words'
import type { BatchFigures } from './figures.types'

const flagged = (code: string, lower = 1.3867): BatchFigures => ({
  ...{ batch: `1.1.0/${code}`, version: '1.1.0', code, madeOn: '2023-03-25', quantity: 100, n: 100, observed: 10, others: 80 },
  watch: { observed: 10, expected: 3.458, ratio: 2.8919, lower, upper: 5.3182, isFlagged: true, comparedTo: 950 }
})

it('names the batches that stand out', () => {
  expect(flaggedHeading([flagged('2023-03')])).toBe('Batch 2023-03 of 1.1.0 fails more than its release’s other batches')
  expect(flaggedHeading([flagged('2023-03'), flagged('2023-05')])).toBe(
    'Batches 2023-03 of 1.1.0 and 2023-05 of 1.1.0 fail more than their releases’ other batches'
  )
})

it('says counts first, then the ratio with its interval rounded outwards, never onto 1', () => {
  expect(flaggedSentence(flagged('2023-03'))).toBe(
    'Of the 100 units of 2023-03 followed, 10 failed by the board, where 3.5 would be expected from the release’s other batches: 2.9 times as many (95\u00a0% interval 1.38 to 5.32).'
  )
  expect(flaggedSentence(flagged('2023-03', 1.0004))).toContain('interval 1.0004 to')
})

it('says why no number can be expected', () => {
  expect(unwatchedText({ others: 0 })).toBe('no other batch of its release to compare it with')
  expect(unwatchedText({ others: 17 })).toBe(
    'none of the 17 followed units of its release’s other batches failed by the board, so no number can be expected'
  )
  expect(unwatchedText({ others: 1 })).toContain('none of the 1 followed unit of')
})
