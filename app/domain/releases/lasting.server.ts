import { drawnCurves, type CurvePoint } from '~/domain/reliability/curve-points'
import { oneYearWords, type OneYearWords } from '~/domain/reliability/one-year'
import { readFilters } from '~/domain/reliability/reliability-filters'
import { tooFew } from '~/domain/reliability/reliability-words'
import { reliabilityOf } from '~/domain/reliability/reliability.server'
import { dayOf, type Day } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import { logError } from '~/server/log.server'
import type { Services } from '~/server/services.server'

/**
 * What a page says of how long something lasts: the share after a year (null: too few followed), what stands behind it, and the curve of all
 * units together (null: nobody is followed). `asOf` is the day up to which reports are counted.
 */
export type Lasting = {
  oneYear: OneYearWords | null
  fitted: number
  failed: number
  followedAYear: number
  curve: CurvePoint[] | null
  /** As the charts take it, see `drawnCurves`. */
  grain: number | null
  asOf: Day
}

/**
 * How a board, or one release of it, lasts by all its reports; null when the figures cannot be had just now, which is noted and keeps nobody
 * from the rest of the page.
 */
export async function lastingOf(services: Services, slug: string, version?: string): Promise<Lasting | null> {
  const { filters } = readFilters(new URLSearchParams(), dayOf(services.now()))
  try {
    const figures = await reliabilityOf(services, slug, filters)
    const group = version === undefined ? figures.all : figures.byRelease.find((g) => g.group === version)
    if (!group) return { oneYear: null, fitted: 0, failed: 0, followedAYear: 0, curve: null, grain: null, asOf: filters.asOf }
    const { curves, grain } = drawnCurves([group])
    return {
      oneYear: oneYearWords(group.atOneYear),
      fitted: group.fitted,
      failed: group.events,
      followedAYear: group.atOneYear.atRisk,
      curve: group.curve.some((row) => row.time > 0 && row.atRisk >= tooFew) ? curves[0]! : null,
      grain,
      asOf: filters.asOf
    }
  } catch (error) {
    if (!(error instanceof DomainError) || error.kind !== 'unavailable') throw error
    logError('figures-unavailable', error, { board: slug })
    return null
  }
}
