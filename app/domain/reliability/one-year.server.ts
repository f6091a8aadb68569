import { dayOf } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import { logError } from '~/server/log.server'
import type { Services } from '~/server/services.server'
import { oneYearWords, type OneYearWords } from './one-year'
import { readFilters } from './reliability-filters'
import { reliabilityOf } from './reliability.server'

/** For each of a page of boards, how many of a hundred still work after a year, all reports counted. */
export async function oneYearOfBoards(services: Services, slugs: readonly string[]): Promise<Map<string, OneYearWords | null>> {
  const { filters } = readFilters(new URLSearchParams(), dayOf(services.now()))
  const figures = await Promise.all(slugs.map((slug) => reliabilityOf(services, slug, filters)))
  return new Map(slugs.map((slug, i) => [slug, oneYearWords(figures[i]!.all.atOneYear)]))
}

/**
 * For each of a few boards, how many of a hundred still work after a year on one console revision, all reports counted; null where too few were
 * followed. A board whose figures cannot be had just now is left out, which is noted and keeps nobody from the rest of the page.
 */
export async function oneYearOnRevision(
  services: Services,
  slugs: readonly string[],
  revision: string
): Promise<Map<string, OneYearWords | null>> {
  const { filters } = readFilters(new URLSearchParams(), dayOf(services.now()))
  const said = new Map<string, OneYearWords | null>()
  for (const slug of slugs)
    try {
      const { byRevision } = await reliabilityOf(services, slug, filters)
      const group = byRevision.find((g) => g.group === revision)
      said.set(slug, group ? oneYearWords(group.atOneYear) : null)
    } catch (error) {
      if (!(error instanceof DomainError) || error.kind !== 'unavailable') throw error
      logError('figures-unavailable', error, { board: slug })
    }
  return said
}
