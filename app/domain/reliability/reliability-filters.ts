import { isDay, type Day } from '~/lib/dates'
import type { FieldError } from '~/lib/domain-error'
import { evidenceGrades, type EvidenceGrade } from '../reports/report-words'
import type { ObservationFilters } from '../reports/observations'

/** `established` is measured or read from a code: the fault was more than guessed. */
export const evidenceFilters = ['any', 'established', ...evidenceGrades] as const
export type EvidenceFilter = (typeof evidenceFilters)[number]
export const firstPowerFilters = ['counted', 'set-aside'] as const

/** Which reports a reliability figure counts. `release` is a version and `revision` a console revision's code; null for all. */
export type ReliabilityFilters = {
  release: string | null
  revision: string | null
  evidence: EvidenceFilter
  /** `set-aside`: only units that worked at first power, so that the curve says how long a working one lasts. */
  firstPower: (typeof firstPowerFilters)[number]
  asOf: Day
}

/** The names of the filters in an address. */
export const filterNames = {
  release: 'release',
  revision: 'revision',
  evidence: 'evidence',
  firstPower: 'first-power',
  asOf: 'as-of'
} as const

/**
 * Reads the filters of an address; what is absent or empty stands at its default. Versions and codes are checked against the board by
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
    if (given.length <= 64) return given === '' || given === 'all' ? null : given
    errors.push({ path: name, message: 'Too long.' })
    return null
  }
  const release = free(filterNames.release)
  const revision = free(filterNames.revision)
  const evidence = pick(filterNames.evidence, evidenceFilters, 'any')
  const firstPower = pick(filterNames.firstPower, firstPowerFilters, 'counted')
  let asOf = text(filterNames.asOf) || today
  if (!isDay(asOf)) {
    errors.push({ path: filterNames.asOf, message: `“${shown(asOf)}” is no day of the calendar. Write it as ${today}.` })
    asOf = today
  } else if (asOf > today) {
    errors.push({ path: filterNames.asOf, message: `${asOf} has not come yet. Today is ${today}.` })
    asOf = today
  }
  return { filters: { release, revision, evidence, firstPower, asOf }, errors }
}

const shown = (text: string) => (text.length > 40 ? `${text.slice(0, 40)}…` : text)

/** Names in the filters that the board does not have. */
export function unknownNames(filters: ReliabilityFilters, versions: readonly string[], codes: readonly string[]): FieldError[] {
  const errors: FieldError[] = []
  if (filters.release !== null && !versions.includes(filters.release))
    errors.push({ path: filterNames.release, message: `There is no published release “${shown(filters.release)}”.` })
  if (filters.revision !== null && !codes.includes(filters.revision))
    errors.push({ path: filterNames.revision, message: `This console has no revision “${shown(filters.revision)}”.` })
  return errors
}

/** The filters as a query that gives the same figures on any later day: the as-of day is always named. */
export function filtersQuery(filters: ReliabilityFilters): URLSearchParams {
  const query = new URLSearchParams()
  if (filters.release !== null) query.set(filterNames.release, filters.release)
  if (filters.revision !== null) query.set(filterNames.revision, filters.revision)
  if (filters.evidence !== 'any') query.set(filterNames.evidence, filters.evidence)
  if (filters.firstPower !== 'counted') query.set(filterNames.firstPower, filters.firstPower)
  query.set(filterNames.asOf, filters.asOf)
  return query
}

export const observationFilters = (filters: ReliabilityFilters): ObservationFilters => ({
  evidence: gradesOf(filters.evidence),
  worksAtFirstPowerOnly: filters.firstPower === 'set-aside'
})

function gradesOf(filter: EvidenceFilter): readonly EvidenceGrade[] | 'any' {
  if (filter === 'any') return 'any'
  return filter === 'established' ? ['measured', 'code-read'] : [filter]
}
