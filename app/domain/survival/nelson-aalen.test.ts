import { describe, expect, test } from 'vitest'
import { kaplanMeierCases } from '../../../tests/support/survival-cases'
import { expectClose } from '../../../tests/support/survival-reference'
import { columnsOf } from './columns'
import { kaplanMeier } from './kaplan-meier'
import { nelsonAalen } from './nelson-aalen'
import { tallyOf } from './tally'

test('by hand: 1/3, then nothing at a censoring, then 1', () => {
  const rows = [
    { time: 2, event: 1 },
    { time: 3, event: 0 },
    { time: 5, event: 1 }
  ]
  const hazard = nelsonAalen(kaplanMeier(tallyOf(columnsOf(rows))))
  expect([...hazard.time]).toEqual([2, 3, 5])
  expect([...hazard.cumulative]).toEqual([1 / 3, 1 / 3, 1 / 3 + 1])
  expect([...hazard.variance]).toEqual([1 / 9, 1 / 9, 1 / 9 + 1])
})

describe("R's survfit on published data sets (tests/fixtures/survival, 1e-12)", () => {
  test.each(kaplanMeierCases())('$name', ({ rows, expected }) => {
    const hazard = nelsonAalen(kaplanMeier(tallyOf(columnsOf(rows))))
    expectClose(hazard.cumulative, expected.nelson_aalen.cumhaz, 1e-12, 'cumulative')
    expectClose(hazard.variance, expected.nelson_aalen.var_cumhaz, 1e-12, 'variance')
    expectClose(hazard.variance.map(Math.sqrt), expected.nelson_aalen.se_cumhaz, 1e-12, 'standard error')
  })
})
