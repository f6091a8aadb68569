import { DomainError } from '~/lib/domain-error'
import type { Db } from '~db/client.server'
import { reliabilityFigures, type ReliabilityFigures } from './reliability-figures'
import { batchName, unknownNames, type ReliabilityFilters } from './reliability-filters'
import * as repo from './reliability.repo.server'
import type { LifeHistory } from '../reports/observations'

/**
 * Reads what a board's figures need in one snapshot and computes them. Runs in the worker.
 * @throws DomainError `not-found` for the board, `invalid` for a release or revision it does not have
 */
export function computeReliability(db: Db, boardSlug: string, filters: ReliabilityFilters): Promise<ReliabilityFigures> {
  return db.transaction().execute(async (tx) => {
    const board = await repo.findBoard(tx, boardSlug)
    if (!board) throw new DomainError('not-found', 'There is no such board.')
    const releases = await repo.listReleases(tx, board.id)
    const revisions = await repo.listRevisions(tx, board.console_id)
    const batches = await repo.listBatches(tx, board.id, repo.maxBatches)
    const errors = unknownNames(filters, repo.choicesOf(releases, revisions, batches))
    if (errors.length > 0) throw new DomainError('invalid', 'These figures cannot be computed.', errors)
    const revision = filters.revision === null ? null : revisions.find((r) => r.code === filters.revision)!
    const batch = filters.batch === null ? null : batches.find((b) => batchName(b) === filters.batch)!
    const lives: LifeHistory[] = []
    for (const release of releases)
      if (isCounted(release, filters))
        for (const life of await repo.listLives(tx, release.id, revision?.id ?? null, filters.asOf))
          if (batch === null || life.batchId === batch.id) lives.push(life)
    return reliabilityFigures(
      lives,
      revisions.map(({ id, code }) => ({ id, name: code })),
      releases.map(({ id, version }) => ({ id, name: version })),
      filters
    )
  })
}

const isCounted = (
  release: { version: string; board_revision: string },
  { release: version, boardRevision }: ReliabilityFilters
) => (version === null || release.version === version) && (boardRevision === null || release.board_revision === boardRevision)
