import type { FigureAt } from './figures.types'
import { exclusionWords, type ExclusionKind } from '../reports/report-words'

/** Under this many at risk a figure is not drawn, nor said. */
export const tooFew = 5

/** Whole percent of a share rounded away from the claim: lower limits down, upper ones up, and never "100". */
export const lowerPercent = (share: number): string => String(Math.floor(share * 100 + 1e-9))
export function upperPercent(share: number): string {
  const percent = Math.ceil(share * 100 - 1e-9)
  return percent >= 100 ? 'over 99' : String(percent)
}

/** An estimate in whole percent, never "100" nor "0" of something that is neither. */
export const shareText = (share: number): string =>
  share > 0.995 ? 'over 99' : share > 0 && share < 0.005 ? 'under 1' : String(Math.round(share * 100))

export const countText = (n: number, one: string, many: string) => `${n} ${n === 1 ? one : many}`

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
  return `${countText(total, 'report', 'reports')} excluded: ${parts.join(', ')}.`
}

/** A p value as printed: never 0. */
export const pText = (p: number): string => (p < 0.001 ? 'p < 0.001' : `p = ${p.toFixed(p < 0.1 ? 3 : 2)}`)

export function listOf(names: readonly string[]): string {
  if (names.length <= 1) return names.join('')
  return `${names.slice(0, -1).join(', ')} and ${names.at(-1)!}`
}
