import type { FigureAt } from './figures.types'
import { evidenceFilterWords, methodFilterWords } from './filter-words'
import type { CauseFilter, ReliabilityFilters } from './reliability-filters'
import { countText, lowerPercent, shareText, tooFew, upperPercent } from './reliability-words'

export type SaidOf = { n: number; events: number; atOneYear: FigureAt; filters: ReliabilityFilters }

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
 * a year with its limits, the exact lower bound where nothing failed, that too few were followed, or that the day of failures is not known.
 */
export function plainSentence({ n, events, atOneYear, filters }: SaidOf): string {
  if (n === 0) return 'No unit has been followed yet, so nothing can be said.'
  const { cause } = filters
  const failed =
    events === 0
      ? `none is known to have failed${byCause[cause]}`
      : `${events} ${events === 1 ? 'has' : 'have'} failed${byCause[cause]}`
  const others = cause === 'all' ? '' : ' Units that failed otherwise left the count when last known to run.'
  return `Of ${unitsText(n, filters)}, ${failed}. ${afterAYear(n, events, atOneYear, cause)}${others}`
}

/** "43 units of batch 2024-09 followed (fitted on 2025-01-01 or later)": those counted, as far as the page's heading does not say it. */
function unitsText(n: number, { batch, firstPower, evidence, method, since }: ReliabilityFilters): string {
  const code = batch === null ? '' : ` of batch ${batch.slice(batch.indexOf('/') + 1)}`
  const kept = firstPower === 'set-aside' ? 'that worked at first power' : 'followed'
  const only = [
    evidence === 'any' ? null : `fault ${evidenceFilterWords[evidence]}`,
    method === 'any' ? null : methodFilterWords[method],
    since && `fitted on ${since} or later`
  ].filter(Boolean)
  return `${countText(n, 'unit', 'units')}${code} ${kept}${only.length === 0 ? '' : ` (${only.join(', ')})`}`
}

function afterAYear(n: number, events: number, atOneYear: FigureAt, cause: CauseFilter): string {
  const { survival, lower, upper, bound, atRisk, open } = atOneYear
  const last = cause === 'all' ? 'work after a year' : 'get through a year without that'
  // A curve ends at 0 also where the last one followed failed, after the others had left it.
  if (survival === 0 && events === n) return 'None of them lasted a year.'
  if (survival === null && open !== null)
    return `How many ${last} cannot be said: between day ${open.from} and day ${open.to} it is not known when they failed.`
  if (survival === null || survival === 0 || atRisk < tooFew)
    return `Too few have been followed for a year (${atRisk}) to say how many last that long.`
  if (bound !== null && lower !== null)
    return `With ${atRisk} still followed, at least ${lowerPercent(lower)} of 100 ${last} (exact lower bound, 95\u00a0% confidence).`
  if (survival >= 1 || lower === null)
    return 'No failure within the first year is known, and what its limits are cannot be said from days that are known so loosely.'
  const share = shareText(survival)
  const about = /^\d/.test(share) ? `About ${share}` : share[0]!.toUpperCase() + share.slice(1)
  const interval = `(95\u00a0% interval ${lowerPercent(lower)} to ${upperPercent(upper ?? 1)})`
  const still = cause === 'all' ? 'still ' : ''
  if (open === null) return `${about} of 100 ${still}${last} ${interval}.`
  return `${about} of 100 or more ${still}${last} ${interval}: between day ${open.from} and day ${open.to} it is not known when some failed.`
}
