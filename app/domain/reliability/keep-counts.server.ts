import { logError } from '~/server/log.server'
import type { Tx } from '~db/client.server'
import { applyCounts, WrongCounts } from './apply-counts.server'
import { countLife, lastFiledOn, type CountsDelta } from './counts-delta'
import { findCountedBoard, isCounted } from './counts.repo.server'
import * as repo from './counts-writing.repo.server'
import { findLife } from './lives.repo.server'
import { recountBoard } from './recount-board.server'

/** More reports are not counted anew while somebody waits and everybody else waits for the event loop. */
export const maxRecountedAtOnce = 1_000

/**
 * Writes to one report, its check-ins or its failure, and keeps the stored counts true: everything that writes to these tables goes through here, in
 * the transaction that writes. The unit's life is read before and after, and the counts are changed by the difference. A board that was not
 * counted by the present rules, that was written to otherwise, or whose counts turn out to be wrong, is counted anew or, when it has very many reports,
 * left to the next start: its counts are not read until then. What somebody reports is never refused for the counts' sake.
 * @param work the writes, about the report `reportId` and no other
 */
export async function withCounts<T>(tx: Tx, reportId: string, work: () => Promise<T>): Promise<T> {
  const before = await findLife(tx, reportId)
  const knownBoard = before && (await repo.findBoardOfRelease(tx, before.releaseId)).board_id
  const wasCounted = knownBoard === null ? null : isCounted(await findCountedBoard(tx, knownBoard))
  const result = await work()
  const after = await findLife(tx, reportId)
  const life = after ?? before
  if (life === null) return result
  const { board_id: boardId } = await repo.findBoardOfRelease(tx, life.releaseId)
  if (knownBoard !== null && knownBoard !== boardId) throw new Error('A report cannot move to another board')

  const counted = await findCountedBoard(tx, boardId)
  // Only this report was written since the board was counted: nothing is lost between `before` and `after`.
  const isOnlyThis = counted !== undefined && (counted.uncounted === null || counted.uncounted === reportId)
  const isKept = isOnlyThis && isCounted({ ...counted, uncounted: null }) && wasCounted !== false
  if (!isKept) {
    await mendCounts(tx, boardId)
    return result
  }
  const delta: CountsDelta = new Map()
  if (before) countLife(delta, before, -1)
  if (after) countLife(delta, after, 1)
  try {
    await applyCounts(tx, repo.storedTables, boardId, delta)
  } catch (error) {
    if (!(error instanceof WrongCounts)) throw error
    logError('counts-wrong', error, { board: boardId })
    await mendCounts(tx, boardId)
    return result
  }
  const filedOn = lastFiledOn(life)
  const last = counted.last_filed_on
  await repo.markCounted(tx, boardId, last !== null && last > filedOn ? last : filedOn)
  return result
}

/** Counts a board anew, or marks its counts as not to be read. */
async function mendCounts(tx: Tx, boardId: string): Promise<void> {
  if (await repo.hasMoreReports(tx, boardId, maxRecountedAtOnce)) await repo.markUncounted(tx, boardId)
  else await recountBoard(tx, boardId)
}
