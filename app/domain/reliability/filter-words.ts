import type { Day } from '~/lib/dates'
import type { Cause } from '../reports/report-words'
import {
  filterNames,
  filtersQuery,
  type CauseFilter,
  type EvidenceFilter,
  type MethodFilter,
  type ReliabilityFilters
} from './reliability-filters'

type FilterKey = keyof typeof filterNames

export const evidenceFilterWords: Record<EvidenceFilter, string> = {
  any: 'established in any way',
  established: 'measured or read from a code',
  measured: 'measured',
  'code-read': 'read from a code',
  'symptom-only': 'told only from the symptom',
  none: 'not checked'
}
export const methodFilterWords: Record<MethodFilter, string> = {
  any: 'fitted by any method',
  iron: 'fitted with a soldering iron',
  'hot-air': 'fitted with hot air',
  'hot-plate': 'fitted on a hot plate',
  several: 'fitted by several methods',
  untold: 'fitted by a method not told'
}
/** What a curve falls at. */
export const causeFilterWords: Record<CauseFilter, string> = {
  all: 'any failure',
  board: 'failures by the board, or unexplained',
  fitting: 'failures by the fitting',
  'other-fault': 'failures by another fault',
  'wrong-diagnosis': 'failures by a wrong diagnosis',
  accident: 'failures by an accident',
  unknown: 'unexplained failures'
}

/** What the share of a curve is one of: "% still working", or of one cause what has not failed by it. */
export const shareWords: Record<CauseFilter, string> = {
  all: 'still working',
  board: 'not failed by the board',
  fitting: 'not failed by the fitting',
  'other-fault': 'not failed by another fault',
  'wrong-diagnosis': 'not failed by a wrong diagnosis',
  accident: 'not failed by an accident',
  unknown: 'not failed unexplained'
}

/** A cause as the row of a table or the name of a line. */
export const causeNames: Record<Cause, string> = {
  board: 'The board',
  fitting: 'The fitting',
  'other-fault': 'Another fault',
  'wrong-diagnosis': 'Wrong diagnosis',
  accident: 'An accident',
  unknown: 'Not known'
}

/** "Buttress 1.1.1, batch 2024-09": what is counted, without the console. */
function selectionName(board: string, { release, boardRevision, batch }: ReliabilityFilters): string {
  const [madeOf, code] = batch === null ? [null, null] : [batch.slice(0, batch.indexOf('/')), batch.slice(batch.indexOf('/') + 1)]
  const version = release ?? madeOf
  const name = version === null ? board : `${board} ${version}`
  if (code !== null) return `${name}, batch ${code}`
  return version === null && boardRevision !== null ? `${name} board revision ${boardRevision}` : name
}

/** "How long Buttress 1.1.1 lasts in TM-3": the heading of a page of figures. */
export function selectionHeading(board: string, filters: ReliabilityFilters): string {
  return `How long ${selectionName(board, filters)}${filters.batch === null ? '' : ','} lasts${placeOf(filters)}`
}
const placeOf = ({ revision }: ReliabilityFilters) => (revision === null ? '' : ` in ${revision}`)

/** The same in a trail: "Buttress 1.1.1 in TM-3"; null for the whole board. */
export function selectionLabel(board: string, filters: ReliabilityFilters): string | null {
  const label = `${selectionName(board, filters)}${placeOf(filters)}`
  return label === board ? null : label
}

export type FilterInForce = { name: string; words: string; without: string }

/**
 * The filters that are not at their defaults, in the order of the form, each in words and with the query of the same figures without it. The
 * as-of day is one when it is not today.
 */
export function filtersInForce(filters: ReliabilityFilters, today: Day): FilterInForce[] {
  return (Object.keys(filterNames) as FilterKey[]).flatMap((key) => {
    const words = wordsOf(key, filters, today)
    return words === null ? [] : [{ name: filterNames[key], words, without: queryWith(filters, { [key]: null }, today) }]
  })
}

const usual = { cause: 'all', evidence: 'any', method: 'any', firstPower: 'counted', silent: 'as-reported' } as const

/**
 * The query of the same figures with some filters changed; null puts one back to its default. The as-of day is named only when it is not today, so
 * that a link from today's page stays one to the newest figures.
 */
export function queryWith(
  filters: ReliabilityFilters,
  change: { [Key in FilterKey]?: ReliabilityFilters[Key] | null },
  today: Day
): string {
  const changed = { ...filters, ...change }
  for (const key of ['cause', 'evidence', 'method', 'firstPower', 'silent'] as const)
    if (changed[key] === null) Object.assign(changed, { [key]: usual[key] })
  const query = filtersQuery({ ...(changed as ReliabilityFilters), asOf: changed.asOf ?? today })
  if (query.get(filterNames.asOf) === today) query.delete(filterNames.asOf)
  return query.toString()
}

function wordsOf(key: FilterKey, filters: ReliabilityFilters, today: Day): string | null {
  const { release, boardRevision, revision, batch, cause, evidence, method, firstPower, since, silent, asOf } = filters
  switch (key) {
    case 'release':
      return release && `release ${release}`
    case 'boardRevision':
      return boardRevision && `board revision ${boardRevision}`
    case 'revision':
      return revision && `console revision ${revision}`
    case 'batch':
      return batch && `batch ${batch.replace('/', ', ')}`
    case 'cause':
      return cause === 'all' ? null : causeFilterWords[cause]
    case 'evidence':
      return evidence === 'any' ? null : `fault ${evidenceFilterWords[evidence]}`
    case 'method':
      return method === 'any' ? null : methodFilterWords[method]
    case 'firstPower':
      return firstPower === 'counted' ? null : 'given it worked on the bench'
    case 'since':
      return since && `fitted on ${since} or later`
    case 'silent':
      return silent === 'as-reported' ? null : 'with what the silent could hide'
    case 'asOf':
      return asOf === today ? null : `as known on ${asOf}`
  }
}
