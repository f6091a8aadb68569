import { dayOf } from '~/lib/dates'
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
