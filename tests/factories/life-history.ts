import type { LifeHistory, LifeOutcome } from '~/domain/reports/observations'
import type { Cause, ExclusionKind, FirstPower } from '~/domain/reports/report-words'
import type { Day } from '~/lib/dates'

/**
 * A life history as one would write it down, its facts parted by semicolons:
 * `fitted 2025-01-10; filed 2025-01-12: works; ran 2025-04-10; failed 2025-04-20 board, last ran 2025-04-15`.
 * Each of `ran`, `parted` and `failed` may end in `, told DAY` where Fettle heard of it on another day; `excluded DAY kind` is the steward's.
 */
export function lifeOf(text: string): LifeHistory {
  const life: LifeHistory = {
    reportId: 'r',
    releaseId: 'v',
    revisionId: 'c',
    batchId: null,
    evidence: 'measured',
    method: 'iron',
    firstPower: 'works',
    installedOn: '',
    filedOn: '',
    exclusion: null,
    statements: [],
    failure: null
  }
  for (const fact of text.split(';').map((part) => part.trim())) {
    const [first, ...more] = fact.split(', ')
    const [word, day, what] = first!.replace(':', '').split(' ') as [string, Day, string | undefined]
    const extra = (name: string) => more.find((part) => part.startsWith(name))?.slice(name.length + 1) ?? null
    const filedOn = extra('told') ?? day
    if (word === 'fitted') life.installedOn = day
    else if (word === 'filed') Object.assign(life, { filedOn: day, firstPower: what as FirstPower })
    else if (word === 'ran') life.statements.push({ statement: 'running', statedOn: day, filedOn })
    else if (word === 'parted') life.statements.push({ statement: 'parted', statedOn: day, filedOn })
    else if (word === 'failed') life.failure = { lastRunningOn: extra('last ran'), foundOn: day, cause: what as Cause, filedOn }
    else if (word === 'excluded') life.exclusion = { kind: what as ExclusionKind, on: day }
    else throw new Error(`no such fact: ${fact}`)
  }
  return life
}

/** An outcome in words: `60 to 180, running`, `0 to 120, board after 90` (known to lie between), `apart: board`. */
export function outcomeText(outcome: LifeOutcome): string {
  if (outcome.kind === 'excluded') return `excluded: ${outcome.exclusion}`
  if (outcome.kind === 'failed-before-registration') return `apart: ${outcome.cause}`
  if (outcome.kind !== 'observed') return outcome.kind
  const { entry, time, cause, interval } = outcome
  const between = interval === null ? '' : ` after ${interval.lower}`
  return `${entry} to ${time}, ${cause ?? 'running'}${between}`
}
