import type { Day } from '~/lib/dates'
import type { Db, Tx } from '~db/client.server'
import { applyCounts } from './apply-counts.server'
import { countLife, lastFiledOn, type CountsDelta } from './counts-delta'
import * as repo from './counts-writing.repo.server'
import { isCounted, listBoards } from './counts.repo.server'
import { pagesOfLives } from './lives.repo.server'

/** Lives counted in memory before they are added to the tables. */
const livesAtOnce = 20_000

export type Counted = { reports: number; lastFiledOn: Day | null }

/** Counts all reports of a board into empty tables, release by release. Memory is bounded whatever their number. */
export async function countReports(tx: Tx, tables: repo.CountTables, boardId: string): Promise<Counted> {
  let reports = 0
  let last: Day | null = null
  for (const { id } of await repo.listReleaseIds(tx, boardId)) {
    let delta: CountsDelta = new Map()
    let waiting = 0
    for await (const page of pagesOfLives(tx, { releaseId: id })) {
      for (const life of page) {
        countLife(delta, life, 1)
        const filedOn = lastFiledOn(life)
        if (last === null || filedOn > last) last = filedOn
      }
      reports += page.length
      waiting += page.length
      if (waiting < livesAtOnce) continue
      await applyCounts(tx, tables, boardId, delta)
      delta = new Map()
      waiting = 0
    }
    await applyCounts(tx, tables, boardId, delta)
  }
  return { reports, lastFiledOn: last }
}

/** Rebuilds the stored counts of a board from its reports. */
export async function recountBoard(tx: Tx, boardId: string): Promise<Counted> {
  await repo.deleteCounts(tx, boardId)
  const counted = await countReports(tx, repo.storedTables, boardId)
  await repo.markCounted(tx, boardId, counted.lastFiledOn)
  return counted
}

/**
 * Counts every board whose counts cannot be read: never counted, counted by other rules, or written to past them. For the start of the server,
 * before it serves. Each board is a transaction of its own, so that a start that is broken off goes on where it was.
 */
export async function countMissing(db: Db, tell: (board: string, counted: Counted) => void): Promise<void> {
  for (const board of await listBoards(db)) {
    if (board.rules !== null && isCounted({ rules: board.rules, uncounted: board.uncounted })) continue
    tell(board.slug, await db.transaction().execute((tx) => recountBoard(tx, board.id)))
  }
}
