import fc from 'fast-check'
import { addDays } from '~/lib/dates'
import type { LifeHistory } from '~/domain/reports/observations'
import { causes, evidenceGrades, installMethods } from '~/domain/reports/report-words'

const firstDay = '2024-01-01'
/** The last day on which anything of an arbitrary life may have been filed. */
export const livesAsOf = '2026-12-01'

/** Lives as the filing rules allow them: late and prompt reports, check-ins, failures found early and late, parted and excluded units. */
const life = fc
  .record({
    installed: fc.integer({ min: 0, max: 300 }),
    filedAfter: fc.oneof({ weight: 4, arbitrary: fc.integer({ min: 0, max: 14 }) }, fc.integer({ min: 15, max: 120 })),
    firstPower: fc.constantFrom('works', 'works', 'works', 'works', 'works', 'partly', 'no-change', 'worse'),
    running: fc.uniqueArray(fc.integer({ min: 1, max: 600 }), { maxLength: 3 }),
    end: fc.constantFrom('none', 'none', 'failed', 'failed', 'parted'),
    endAfter: fc.integer({ min: 0, max: 200 }),
    isLastDayTold: fc.boolean(),
    cause: fc.constantFrom(...causes),
    evidence: fc.constantFrom(...evidenceGrades),
    method: fc.constantFrom(null, ...installMethods),
    revisionId: fc.constantFrom('tm-1', 'tm-2', 'tm-3'),
    releaseId: fc.constantFrom('v1', 'v2'),
    batchId: fc.constantFrom(null, 'a', 'b', 'c'),
    isExcluded: fc.integer({ min: 0, max: 19 }).map((n) => n === 0)
  })
  .map((drawn): LifeHistory => {
    const on = (day: number) => addDays(firstDay, drawn.installed + day)
    const days = [...drawn.running].sort((a, b) => a - b)
    const last = days.at(-1) ?? 0
    const worked = drawn.firstPower === 'works'
    const end = Math.max(1, last) + drawn.endAfter
    const isFound = worked && drawn.end === 'failed'
    const running = days.map((day) => ({
      statement: 'running' as const,
      statedOn: on(day),
      filedOn: on(Math.max(day, drawn.filedAfter))
    }))
    const parted = { statement: 'parted' as const, statedOn: on(end), filedOn: on(Math.max(end, drawn.filedAfter)) }
    const failure = isFound
      ? {
          lastRunningOn: drawn.isLastDayTold ? on(Math.max(last, end - (drawn.endAfter % 40))) : null,
          foundOn: on(end),
          cause: drawn.cause,
          filedOn: on(Math.max(end, drawn.filedAfter))
        }
      : { lastRunningOn: null, foundOn: on(0), cause: drawn.cause, filedOn: on(drawn.filedAfter) }
    return {
      reportId: '',
      releaseId: drawn.releaseId,
      revisionId: drawn.revisionId,
      batchId: drawn.batchId,
      evidence: drawn.evidence,
      method: drawn.method,
      firstPower: drawn.firstPower as LifeHistory['firstPower'],
      installedOn: on(0),
      filedOn: on(drawn.filedAfter),
      exclusion: drawn.isExcluded ? { kind: 'duplicate', on: on(drawn.filedAfter) } : null,
      statements: !worked ? [] : drawn.end === 'parted' ? [...running, parted] : running,
      failure: isFound || !worked ? failure : null
    }
  })

export const arbitraryLives = (minLength = 1, maxLength = 60) => fc.array(life, { minLength, maxLength })
