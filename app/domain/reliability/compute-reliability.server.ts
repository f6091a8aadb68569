import { DomainError } from '~/lib/domain-error'
import type { Db } from '~db/client.server'
import { countSelection, type Selection } from './count-selection.server'
import type { ReliabilityFigures } from './figures.types'
import { noCounts } from './group-counts'
import { reliabilityFigures } from './reliability-figures'
import { batchName, unknownNames, type ReliabilityFilters } from './reliability-filters'
import * as repo from './reliability.repo.server'

/**
 * Reads what a board's figures need in one snapshot and computes them. Runs in the worker.
 * @param detail as `reliabilityFigures` has it
 * @param count how the units are counted; both ways are held against each other in tests
 * @throws DomainError `not-found` for the board, `invalid` for names in the filters that it does not have
 */
export function computeReliability(
  db: Db,
  boardSlug: string,
  filters: ReliabilityFilters,
  detail: 'whole' | 'page' = 'whole',
  count: typeof countSelection = countSelection
): Promise<ReliabilityFigures> {
  return db.transaction().execute(async (tx) => {
    const board = await repo.findBoard(tx, boardSlug)
    if (!board) throw new DomainError('not-found', 'There is no such board.')
    const releases = await repo.listReleases(tx, board.id)
    const revisions = await repo.listRevisions(tx, board.console_id)
    const known = await repo.listBatches(tx, board.id, repo.maxBatches)
    const errors = unknownNames(filters, repo.choicesOf(releases, revisions, known))
    if (errors.length > 0) throw new DomainError('invalid', 'These figures cannot be computed.', errors)
    const counted = releases.filter((release) => isCounted(release, filters))
    const selection: Selection = {
      boardId: board.id,
      filters,
      releaseIds: counted.map(({ id }) => id),
      revisionId: revisions.find((r) => r.code === filters.revision)?.id ?? null,
      batchId: known.find((b) => batchName(b) === filters.batch)?.id ?? null,
      batches: known
        .filter((batch) => counted.some(({ id }) => id === batch.release_id))
        .map(({ id, release_id: releaseId, version, code, made_on: madeOn, quantity }) => ({
          ...{ id, releaseId, version, code, madeOn, quantity },
          counts: { ...noCounts(), lives: null }
        }))
    }
    return reliabilityFigures(
      {
        filters,
        ...(await count(tx, selection)),
        batches: selection.batches,
        revisions: revisions.map(({ id, code }) => ({ id, name: code })),
        releases: releases.map(({ id, version }) => ({ id, name: version }))
      },
      detail
    )
  })
}

const isCounted = (
  release: { version: string; board_revision: string },
  { release: version, boardRevision }: ReliabilityFilters
) => (version === null || release.version === version) && (boardRevision === null || release.board_revision === boardRevision)
