import { DomainError } from '~/lib/domain-error'
import type { Services } from '~/server/services.server'
import { filingWarnings, normalTag } from './filing-rules'
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

export type FilingStep = Awaited<ReturnType<typeof filingStep>>

/**
 * How far the choices of an address have come: `board` (nothing chosen yet, or a tag that no unit has), `which` (release and revision are
 * open) or `report` (the form itself, with the warnings that the choices call for).
 * @throws DomainError `not-found` for a board that does not exist
 */
export async function filingStep(services: Services, query: URLSearchParams) {
  const text = (name: string) => query.get(name)?.trim() || null
  const tag = text('unit')
  const unit = tag === null ? null : await unitByTag(services, tag)
  if (tag !== null && unit === null) {
    const tagError = `No unit has the tag “${tag.slice(0, 40)}”. Read the label again, or choose the board below.`
    return { kind: 'board' as const, consoles: await boardsToReport(services), tag, tagError }
  }
  const boardSlug = unit?.board_slug ?? text('board')
  if (boardSlug === null) return { kind: 'board' as const, consoles: await boardsToReport(services), tag: null, tagError: null }
  const { board, releases, revisions } = await filingChoices(services, boardSlug)
  const release = unit ? releases.find((r) => r.id === unit.release_id) : releases.find((r) => r.version === text('release'))
  const revision = revisions.find((r) => r.code === text('revision'))
  const usual = releases.find((r) => r.state === 'released') ?? releases[0]
  const errors = [
    ...(text('release') !== null && !release ? [{ path: 'release', message: 'There is no such published release.' }] : []),
    ...(text('revision') !== null && !revision
      ? [{ path: 'revision', message: `The ${board.console_name} has no such revision.` }]
      : [])
  ]
  if (!release || !revision)
    return { kind: 'which' as const, board, releases, revisions, unit, chosen: { release: release ?? usual, revision }, errors }
  const warnings = filingWarnings({
    version: release.version,
    state: release.state,
    withdrawnReason: release.withdrawn_reason,
    revisionCode: revision.code,
    claim: revision.claim,
    claimReason: revision.reason,
    boardName: board.name,
    unit: unit && { tag: unit.tag, reports: unit.reports }
  })
  return { kind: 'report' as const, board, release, revision, unit, warnings }
}
