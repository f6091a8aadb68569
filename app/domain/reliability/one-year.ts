import { lowerPercent, tooFew, upperPercent } from './reliability-words'
import type { FigureAt } from './figures.types'

/** A share as it stands beside a name: the figure, and its interval in the same breath. */
export type OneYearWords = { figure: string; interval: string }

/**
 * How many of a hundred still work after a year, in as few words as a list has room for; null where too few were followed to say. Without
 * a failure it is the exact lower bound, never 100.
 */
export function oneYearWords({ survival, lower, upper, bound, atRisk }: FigureAt): OneYearWords | null {
  if (survival === null || lower === null || atRisk < tooFew) return null
  if (bound !== null) return { figure: `≥ ${lowerPercent(lower)} of 100`, interval: 'none failed' }
  return {
    figure: `${Math.min(99, Math.round(survival * 100))} of 100`,
    interval: `${lowerPercent(lower)} to ${upperPercent(upper ?? 1)}`
  }
}
