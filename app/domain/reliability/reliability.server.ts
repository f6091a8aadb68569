import { dayOf } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import type { Services } from '~/server/services.server'
import { LruCache } from '~/lib/lru-cache'
import type { ReliabilityFigures } from './figures.types'
import { filtersQuery, readFilters, unknownNames, type ReliabilityFilters } from './reliability-filters'
import * as repo from './reliability.repo.server'
import { pagesWorker } from './worker-client.server'

/** Figures already computed, by file, board, how often its reports changed, and filters. */
const computed = new LruCache<string, Promise<ReliabilityFigures>>(32)

/**
 * The reliability figures of a board under filters, computed off the event loop or remembered since its reports last changed.
 * @throws DomainError `not-found`, `invalid` with messages at the filters, `unavailable` when it takes too long
 */
export async function reliabilityOf(
  { db, config }: Services,
  boardSlug: string,
  filters: ReliabilityFilters
): Promise<ReliabilityFigures> {
  const board = await repo.findBoard(db, boardSlug)
  if (!board) throw new DomainError('not-found', 'There is no such board.')
  const { databaseFile } = config
  const key = JSON.stringify([databaseFile, board.id, board.report_version ?? 0, filtersQuery(filters).toString()])
  const known = computed.get(key)
  if (known !== undefined) return known
  const figures = pagesWorker().run({ kind: 'reliability', databaseFile, board: boardSlug, filters })
  computed.set(key, figures)
  figures.catch(() => computed.delete(key))
  return figures
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
 * The figures that an address asks for.
 * @param adapted what its filters are changed to before anything is computed
 * @throws DomainError `not-found`, `invalid` with messages at the filters, `unavailable`
 */
export async function reliabilityAsked(
  services: Services,
  boardSlug: string,
  query: URLSearchParams,
  adapted: (filters: ReliabilityFilters) => ReliabilityFilters = (filters) => filters
): Promise<ReliabilityFigures> {
  const { filters, errors } = await reliabilityQuestion(services, boardSlug, query)
  if (errors.length > 0) throw new DomainError('invalid', 'The filters do not add up.', errors)
  return reliabilityOf(services, boardSlug, adapted(filters))
}
