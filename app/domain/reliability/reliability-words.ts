import type { FigureAt } from './figures.types'
import { exclusionWords, type ExclusionKind } from '../reports/report-words'
import type { CauseFilter } from './reliability-filters'

/** Under this many at risk a figure is not drawn, nor said. */
export const tooFew = 5

/** Whole percent of a share rounded away from the claim: lower limits down, upper ones up, and never "100". */
export const lowerPercent = (share: number): string => String(Math.floor(share * 100 + 1e-9))
export function upperPercent(share: number): string {
  const percent = Math.ceil(share * 100 - 1e-9)
  return percent >= 100 ? 'over 99' : String(percent)
}

const estimate = (share: number): string =>
  share > 0.995 ? 'over 99' : share > 0 && share < 0.005 ? 'under 1' : String(Math.round(share * 100))

const count = (n: number, one: string, many: string) => `${n} ${n === 1 ? one : many}`

export type SaidOf = { n: number; events: number; atOneYear: FigureAt; worksAtFirstPowerOnly: boolean; cause: CauseFilter }

const byCause: Record<CauseFilter, string> = {
  all: '',
  board: ' by the board or for no known reason',
  fitting: ' by the fitting',
  'other-fault': ' by another fault of the console',
  'wrong-diagnosis': ' by a wrong diagnosis',
  accident: ' by an accident',
  unknown: ' for no known reason'
}

/**
 * What the figures say in plain words, never more than the interval: how many were followed, how many failed, and the share working after
 * a year with its limits, the exact lower bound where nothing failed, or that too few were followed.
 */
export function plainSentence({ n, events, atOneYear, worksAtFirstPowerOnly, cause }: SaidOf): string {
  const units = worksAtFirstPowerOnly ? 'that worked at first power' : 'followed'
  if (n === 0) return 'No unit has been followed yet, so nothing can be said.'
  const start =
    events === 0
      ? `Of ${count(n, 'unit', 'units')} ${units}, none is known to have failed${byCause[cause]}.`
      : `Of ${count(n, 'unit', 'units')} ${units}, ${events} ${events === 1 ? 'has' : 'have'} failed${byCause[cause]}.`
  const { survival, lower, upper, bound, atRisk, open } = atOneYear
  if (survival === 0) return `${start} None of them lasted a year.`
  if (survival === null || atRisk < tooFew)
    return `${start} Too few have been followed for a year (${atRisk}) to say how many last that long.`
  const isAll = cause === 'all'
  const lastAYear = isAll ? 'work after a year' : 'get through a year without that'
  if (bound !== null && lower !== null)
    return `${start} With ${atRisk} still followed, at least ${lowerPercent(lower)} of 100 ${lastAYear} (exact lower bound, 95\u00a0% confidence).`
  if (survival >= 1 || lower === null)
    return `${start} No failure within the first year is known, and what its limits are cannot be said from days that are known so loosely.`
  const interval = `(95\u00a0% interval ${lowerPercent(lower)} to ${upperPercent(upper ?? 1)})`
  const others = isAll ? '' : ', were there no other cause'
  return `${start} ${aboutShare(survival)} of 100 ${isAll ? 'still ' : ''}${lastAYear} ${interval}${others}.${openWords(open)}`
}

function aboutShare(survival: number): string {
  const share = estimate(survival)
  return /^\d/.test(share) ? `About ${share}` : share[0]!.toUpperCase() + share.slice(1)
}

const openWords = (open: FigureAt['open']): string =>
  open ? ` It is read on day ${open.to}: between days ${open.from} and ${open.to} the failures leave it open.` : ''

/** Which groups have too few followed for a year; null when all have enough. */
export function tooFewSentence(groups: readonly { group: string; atOneYear: FigureAt }[]): string | null {
  const names = groups.filter((g) => g.atOneYear.atRisk < tooFew).map((g) => g.group)
  if (names.length === 0 || names.length === groups.length) return null
  return `For ${listOf(names)} there are too few to say.`
}

/** "3 reports excluded: 2 duplicates, 1 other board." */
export function excludedSentence(excluded: readonly { kind: ExclusionKind; count: number }[]): string | null {
  const total = excluded.reduce((sum, e) => sum + e.count, 0)
  if (total === 0) return null
  const parts = excluded.map(({ kind, count: n }) => `${n} ${n === 1 ? exclusionWords[kind].one : exclusionWords[kind].many}`)
  return `${count(total, 'report', 'reports')} excluded: ${parts.join(', ')}.`
}

/** A p value as printed: never 0. */
export const pText = (p: number): string => (p < 0.001 ? 'p < 0.001' : `p = ${p.toFixed(p < 0.1 ? 3 : 2)}`)

export function listOf(names: readonly string[]): string {
  if (names.length <= 1) return names.join('')
  return `${names.slice(0, -1).join(', ')} and ${names.at(-1)!}`
}
