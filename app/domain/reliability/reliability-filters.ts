import { isDay, type Day } from '~/lib/dates'
import type { FieldError } from '~/lib/domain-error'
import { causes, evidenceGrades, installMethods, type Cause, type EvidenceGrade } from '../reports/report-words'
import { countsAgainstBoard, type ObservationFilters } from '../reports/observations'

/** `established` is measured or read from a code: the fault was more than guessed. */
export const evidenceFilters = ['any', 'established', ...evidenceGrades] as const
export type EvidenceFilter = (typeof evidenceFilters)[number]
export const firstPowerFilters = ['counted', 'set-aside'] as const
/** `board` counts failures of unknown cause too; with one cause, failures by the others end the following of their units. */
export const causeFilters = ['all', ...causes] as const
export type CauseFilter = (typeof causeFilters)[number]
/** `untold`: fitted by a method that the author did not give. */
export const methodFilters = ['any', ...installMethods, 'untold'] as const
export type MethodFilter = (typeof methodFilters)[number]
export const silentFilters = ['as-reported', 'bounds'] as const

/**
 * What a reliability figure counts. `release` is a version, `boardRevision` a board revision's letter, `revision` a console revision's code and
 * `batch` a version and a batch's code, `1.1.1/2024-09`; null for all.
 */
export type ReliabilityFilters = {
  release: string | null
  boardRevision: string | null
  revision: string | null
  batch: string | null
  cause: CauseFilter
  evidence: EvidenceFilter
  method: MethodFilter
  /** `set-aside`: only units that worked at first power, so that the curve says how long a working one lasts. */
  firstPower: (typeof firstPowerFilters)[number]
  /** Only units fitted on this day or later. */
  since: Day | null
  /** `bounds`: what the silent units could hide is computed as well. */
  silent: (typeof silentFilters)[number]
  asOf: Day
}

/** The names of the filters in an address. */
export const filterNames = {
  release: 'release',
  boardRevision: 'board-revision',
  revision: 'revision',
  batch: 'batch',
  cause: 'cause',
  evidence: 'evidence',
  method: 'method',
  firstPower: 'first-power',
  since: 'since',
  silent: 'silent',
  asOf: 'as-of'
} as const

/** What a board has that a filter can name. */
export type FilterChoices = {
  releases: readonly { version: string; boardRevision: string }[]
  revisions: readonly string[]
  batches: readonly { version: string; code: string }[]
}
export const batchName = ({ version, code }: { version: string; code: string }): string => `${version}/${code}`

/**
 * Reads the filters of an address; what is absent or empty stands at its default. Versions, codes and batches are checked against the board by
 * `unknownNames`.
 * @param today the as-of day when none is given; later ones are refused
 */
export function readFilters(query: URLSearchParams, today: Day): { filters: ReliabilityFilters; errors: FieldError[] } {
  const errors: FieldError[] = []
  const text = (name: string) => query.get(name)?.trim() ?? ''
  const pick = <T extends string>(name: string, values: readonly T[], usual: T): T => {
    const given = text(name)
    if (given === '') return usual
    const known = values.find((value) => value === given)
    if (known === undefined) errors.push({ path: name, message: `“${shown(given)}” is not one of ${values.join(', ')}.` })
    return known ?? usual
  }
  const free = (name: string) => {
    const given = text(name)
    if (given.length <= 128) return given === '' || given === 'all' ? null : given
    errors.push({ path: name, message: 'Too long.' })
    return null
  }
  const day = (name: string): Day | null => {
    const given = text(name)
    if (given === '') return null
    if (!isDay(given)) errors.push({ path: name, message: `“${shown(given)}” is no day of the calendar. Write it as ${today}.` })
    else if (given > today) errors.push({ path: name, message: `${given} has not come yet. Today is ${today}.` })
    else return given
    return null
  }
  const filters: ReliabilityFilters = {
    release: free(filterNames.release),
    boardRevision: free(filterNames.boardRevision),
    revision: free(filterNames.revision),
    batch: free(filterNames.batch),
    cause: pick(filterNames.cause, causeFilters, 'all'),
    evidence: pick(filterNames.evidence, evidenceFilters, 'any'),
    method: pick(filterNames.method, methodFilters, 'any'),
    firstPower: pick(filterNames.firstPower, firstPowerFilters, 'counted'),
    since: day(filterNames.since),
    silent: pick(filterNames.silent, silentFilters, 'as-reported'),
    asOf: day(filterNames.asOf) ?? today
  }
  return { filters, errors }
}

const shown = (text: string) => (text.length > 40 ? `${text.slice(0, 40)}…` : text)

/** Names in the filters that the board does not have, or that do not go together. */
export function unknownNames(filters: ReliabilityFilters, { releases, revisions, batches }: FilterChoices): FieldError[] {
  const errors: FieldError[] = []
  const say = (name: keyof typeof filterNames, message: string) => void errors.push({ path: filterNames[name], message })
  const { release, boardRevision, revision, batch } = filters
  const chosen = releases.find(({ version }) => version === release)
  if (release !== null && !chosen) say('release', `There is no published release “${shown(release)}”.`)
  if (boardRevision !== null && !releases.some((r) => r.boardRevision === boardRevision))
    say('boardRevision', `No published release is of board revision “${shown(boardRevision)}”.`)
  else if (boardRevision !== null && chosen && chosen.boardRevision !== boardRevision)
    say('boardRevision', `Release ${chosen.version} is of board revision ${chosen.boardRevision}.`)
  if (revision !== null && !revisions.includes(revision)) say('revision', `This console has no revision “${shown(revision)}”.`)
  if (batch === null) return errors
  const made = batches.find((b) => batchName(b) === batch)
  const madeOf = made && releases.find(({ version }) => version === made.version)
  if (!made || !madeOf) say('batch', `There is no batch “${shown(batch)}”. It is named by its release and its code.`)
  else if (chosen && chosen !== madeOf) say('batch', `This batch is of release ${made.version}.`)
  else if (boardRevision !== null && madeOf.boardRevision !== boardRevision)
    say('batch', `This batch is of board revision ${madeOf.boardRevision}.`)
  return errors
}

const defaults: Partial<ReliabilityFilters> = {
  cause: 'all',
  evidence: 'any',
  method: 'any',
  firstPower: 'counted',
  silent: 'as-reported'
}

/** The filters as a query that gives the same figures on any later day: the as-of day is always named. */
export function filtersQuery(filters: ReliabilityFilters): URLSearchParams {
  const query = new URLSearchParams()
  for (const key of Object.keys(filterNames) as (keyof typeof filterNames)[]) {
    const value = filters[key]
    if (value !== null && value !== defaults[key]) query.set(filterNames[key], value)
  }
  return query
}

export const observationFilters = (filters: ReliabilityFilters): ObservationFilters => ({
  evidence: gradesOf(filters.evidence),
  method: filters.method,
  since: filters.since,
  worksAtFirstPowerOnly: filters.firstPower === 'set-aside'
})

/** The causes whose failures a curve counts. */
export function countedCauses(filter: CauseFilter): readonly Cause[] {
  if (filter === 'all') return causes
  return filter === 'board' ? causes.filter(countsAgainstBoard) : [filter]
}

function gradesOf(filter: EvidenceFilter): readonly EvidenceGrade[] | 'any' {
  if (filter === 'any') return 'any'
  return filter === 'established' ? ['measured', 'code-read'] : [filter]
}
