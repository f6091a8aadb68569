import { DomainError } from '~/lib/domain-error'
import type { Services } from '~/server/services.server'
import { normalTag } from './filing-rules'
import * as repo from './filing.repo.server'

const maxBoards = 200
const maxReleases = 200

/** The boards that a report can be about, by console: the first step. */
export async function boardsToReport({ db }: Services) {
  const boards = await repo.listReportableBoards(db, maxBoards)
  const consoles = new Map<string, typeof boards>()
  for (const board of boards) consoles.set(board.console_name, [...(consoles.get(board.console_name) ?? []), board])
  return [...consoles].map(([consoleName, list]) => ({ consoleName, boards: list }))
}

/**
 * What can be chosen for a board: its published releases, the revisions of its console and what is claimed of each.
 * @throws DomainError `not-found`
 */
export async function filingChoices({ db }: Services, boardSlug: string) {
  const board = await repo.findBoard(db, boardSlug)
  if (!board) throw new DomainError('not-found', 'There is no such board.')
  const releases = await repo.listPublishedReleases(db, board.id, maxReleases)
  const claims = new Map((await repo.listFitClaims(db, board.id)).map((claim) => [claim.console_revision_id, claim]))
  const revisions = (await repo.listRevisions(db, board.console_id)).map((revision) => {
    const claim = claims.get(revision.id)
    return { ...revision, claim: claim?.claim ?? ('untested' as const), reason: claim?.reason ?? '' }
  })
  return { board, releases, revisions }
}

/** The unit behind a tag as somebody typed it, with the number of reports that stand on it; null when there is none. */
export async function unitByTag({ db }: Services, tag: string) {
  const unit = await repo.findUnit(db, normalTag(tag))
  return unit ? { ...unit, reports: await repo.countReportsOfUnit(db, unit.tag) } : null
}
