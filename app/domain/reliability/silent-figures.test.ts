import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { arbitraryLives, livesAsOf } from '../../../tests/support/arbitrary-lives'
import { daysBetween } from '~/lib/dates'
import { allReports, observationOf } from '../reports/observations'
import { causes } from '../reports/report-words'
import { columnsOf } from '../survival/columns'
import { kaplanMeier } from '../survival/kaplan-meier'
import type { TimedObservation } from '../survival/observation'
import { silentBounds, type SilentUnit } from '../survival/silent-bounds'
import { survivalAt } from '../survival/survival-at'
import { tallyOf } from '../survival/tally'
import { countLives } from './count-life'
import { countSilent, nextDueDay, noSilent, silentFigures } from './silent-figures'

describe('nextDueDay', () => {
  it.each([
    [0, 30],
    [29, 30],
    [30, 90],
    [90, 180],
    [200, 365],
    [364, 365],
    [365, 730],
    [729, 730],
    [730, 1095]
  ])('after a last word on day %i it is day %i', (last, due) => {
    expect(nextDueDay(last)).toBe(due)
  })
})

describe('silentFigures', () => {
  it('are the bounds of the units one by one', () => {
    let silentMet = 0
    fc.assert(
      fc.property(arbitraryLives(), (lives) => {
        const counts = noSilent()
        const units = lives.flatMap((life): SilentUnit[] => {
          const seen = observationOf(life, livesAsOf, allReports)
          countSilent(counts, life, seen, livesAsOf)
          if (seen.kind !== 'observed') return []
          const toClose = daysBetween(life.installedOn, livesAsOf)
          const isOpen = seen.cause === null && !life.statements.some(({ statement }) => statement === 'parted')
          return [
            {
              observation: { entry: seen.entry, time: seen.time, event: seen.cause === null ? 0 : 1 },
              isSilent: isOpen && toClose > nextDueDay(seen.time) + 30,
              toClose
            }
          ]
        })
        const { days, totals } = countLives(lives, livesAsOf, allReports)
        const figures = silentFigures(days, totals, counts, causes, 365)
        const silent = units.filter((unit) => unit.isSilent).length
        silentMet += silent
        expect(figures.silent).toBe(silent)
        expect(figures.heardOf).toBe(units.filter((unit) => !unit.isSilent && unit.observation.event === 0).length)
        const bounds = silentBounds(units)
        const curveOf = (rows: TimedObservation[]) => kaplanMeier(tallyOf(columnsOf(rows)))
        for (const which of ['worst', 'best'] as const) {
          const curve = curveOf(bounds[which])
          expect(figures.atOneYear[which]).toBe(survivalAt(curve, 365).survival)
          for (const { time, survival } of figures[which]) expect(survival).toBe(survivalAt(curve, time).survival)
          expect(figures[which].length).toBe(
            [...curve.time.keys()].filter((i) => curve.events[i]! > 0 || i === curve.time.length - 1).length
          )
        }
        const { worst, reported, best } = figures.atOneYear
        if (worst !== null && reported !== null) expect(worst).toBeLessThanOrEqual(reported + 1e-12)
        if (best !== null && reported !== null) expect(best).toBeGreaterThanOrEqual(reported - 1e-12)
      }),
      { seed: 1 }
    )
    expect(silentMet).toBeGreaterThan(100)
  })

  it('leave out who was parted with', () => {
    const life = fc.sample(arbitraryLives(1, 1), 1)[0]![0]!
    const open = {
      ...life,
      firstPower: 'works' as const,
      exclusion: null,
      failure: null,
      installedOn: '2024-01-01',
      filedOn: '2024-01-02',
      statements: []
    }
    const silentOf = (one: typeof life) => {
      const counts = noSilent()
      countSilent(counts, one, observationOf(one, livesAsOf, allReports), livesAsOf)
      return counts.lastWords.size
    }
    expect(silentOf(open)).toBe(1)
    const parted = { statement: 'parted' as const, statedOn: '2024-02-01', filedOn: '2024-02-01' }
    expect(silentOf({ ...open, statements: [parted] })).toBe(0)
  })
})
