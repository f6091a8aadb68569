import { dayOf, type Day } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import type { Services } from '~/server/services.server'
import { LruCache } from '~/lib/lru-cache'
import type { ReliabilityFigures } from './figures.types'
import { filtersFor, type ReliabilityTable } from './reliability-export'
import { filtersQuery, readFilters, unknownNames, type ReliabilityFilters } from './reliability-filters'
import * as repo from './reliability.repo.server'
import { pagesWorker } from './worker-client.server'

/** Figures and texts already computed, by file, board, how often its reports changed, and filters. */
const computed = new LruCache<string, Promise<ReliabilityFigures>>(32)
const texts = new LruCache<string, Promise<string>>(16)

/**
 * The figures that a board's pages show under filters (`page` detail), computed off the event loop or remembered since its reports last changed.
 * @throws DomainError `not-found`, `invalid` with messages at the filters, `unavailable` when it takes too long
 */
export const reliabilityOf = (services: Services, board: string, filters: ReliabilityFilters): Promise<ReliabilityFigures> =>
  remembered(computed, services, board, filters, '', (databaseFile) =>
    pagesWorker().run({ kind: 'reliability', databaseFile, board, filters })
  )

async function remembered<T>(
  cache: LruCache<string, Promise<T>>,
  { db, config: { databaseFile } }: Services,
  boardSlug: string,
  filters: ReliabilityFilters,
  as: string,
  compute: (databaseFile: string) => Promise<T>
): Promise<T> {
  const board = await repo.findBoard(db, boardSlug)
  if (!board) throw new DomainError('not-found', 'There is no such board.')
  const key = JSON.stringify([databaseFile, board.id, board.report_version ?? 0, filtersQuery(filters).toString(), as])
  const known = cache.get(key)
  if (known !== undefined) return known
  const value = compute(databaseFile)
  cache.set(key, value)
  value.catch(() => cache.delete(key))
  return value
}

/**
 * What a request for figures asks: the board, what can be chosen, and the filters of its address with what is wrong in them.
 * @throws DomainError `not-found`
 */
export async function reliabilityQuestion({ db, now }: Services, boardSlug: string, query: URLSearchParams) {
  const board = await repo.findBoard(db, boardSlug)
  if (!board) throw new DomainError('not-found', 'There is no such board.')
  const releases = await repo.listReleases(db, board.id)
  const revisions = await repo.listRevisions(db, board.console_id)
  const today = dayOf(now())
  const { filters, errors } = readFilters(query, today)
  const batches = await repo.listBatches(db, board.id, repo.maxBatches)
  errors.push(...unknownNames(filters, repo.choicesOf(releases, revisions, batches)))
  return { board, releases, revisions, batches, filters, errors, today }
}

/**
 * All figures that an address asks for as text, made off the event loop: the JSON of the API, or the CSV of a table.
 * @throws DomainError `not-found`, `invalid` with messages at the filters, `unavailable`
 */
export async function reliabilityTextAsked(
  services: Services,
  boardSlug: string,
  query: URLSearchParams,
  as: 'json' | ReliabilityTable
): Promise<{ text: string; asOf: Day }> {
  const { filters, errors } = await reliabilityQuestion(services, boardSlug, query)
  if (errors.length > 0) throw new DomainError('invalid', 'The filters do not add up.', errors)
  const asked = as === 'json' ? filters : filtersFor(as, filters)
  const text = await remembered(texts, services, boardSlug, asked, as, (databaseFile) =>
    pagesWorker().run({ kind: 'reliability-text', databaseFile, board: boardSlug, filters: asked, as })
  )
  return { text, asOf: filters.asOf }
}
