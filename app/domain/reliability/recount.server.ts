import type { Day } from '~/lib/dates'
import type { Tx } from '~db/client.server'
import { countingRules } from './count-slices'
import type { listBoards } from './counts.repo.server'
import { deleteCounts, markCounted } from './counts-writing.repo.server'
import { blockDays, counterOf, dayInBlock, readBlock } from './day-block'
import { countReports } from './recount-board.server'
import * as repo from './recount.repo.server'

/** Differences that are named; of more only the number is said. */
export const maxDifferences = 100

/** Something that was stored otherwise than the reports give it. `of`: a version, a version and a batch, or empty for the board's own row. */
export type CountDifference = {
  board: string
  kind: 'board' | 'totals' | 'days' | 'lives'
  of: string
  revision: string
  evidence: string
  method: string
  firstPower: string
  place: string
  stored: string | number | null
  counted: string | number | null
}

export type BoardRecount = {
  reports: number
  rows: number
  /** All of them, of which at most `maxDifferences` are named. */
  differing: number
  differences: CountDifference[]
}

export type BoardToCount = Awaited<ReturnType<typeof listBoards>>[number]

/**
 * Counts a board's reports anew beside what is stored, and compares every row: totals, blocks of days and joint observations of every release,
 * batch, revision and slice.
 * @param isMended whether the fresh counts take the place of the stored ones when they differ
 */
export async function compareCounts(tx: Tx, board: BoardToCount, isMended: boolean): Promise<BoardRecount> {
  await repo.emptyFreshTables(tx)
  const { reports, lastFiledOn } = await countReports(tx, repo.freshTables, board.id)
  const lists = [
    ['totals', await repo.listDifferingTotals(tx, board.id, maxDifferences)],
    ['days', await repo.listDifferingDays(tx, board.id, maxDifferences)],
    ['lives', await repo.listDifferingLives(tx, board.id, maxDifferences)]
  ] as const
  const ofBoard = boardDifference(board, lastFiledOn)
  const differences = [
    ...ofBoard,
    ...lists.flatMap(([kind, rows]) => rows.map((row) => differenceOf(board.slug, kind, row)))
  ].slice(0, maxDifferences)
  const differing = ofBoard.length + lists.reduce((sum, [, rows]) => sum + (rows[0]?.total ?? 0), 0)
  const rows = await repo.countFresh(tx)
  if (isMended && differing > 0) {
    await deleteCounts(tx, board.id)
    await repo.keepFresh(tx)
    await markCounted(tx, board.id, lastFiledOn)
  }
  return { reports, rows, differing, differences }
}

/** What a board's own row says otherwise. A last day later than the last thing that is still filed is none: what was there may be gone. */
function boardDifference(board: BoardToCount, lastFiledOn: Day | null): CountDifference[] {
  const say = (place: string, stored: string | number | null, counted: string | number | null): CountDifference => ({
    ...{ board: board.slug, kind: 'board', of: '', revision: '', evidence: '', method: '', firstPower: '' },
    ...{ place, stored, counted }
  })
  const found: CountDifference[] = []
  if (board.rules !== countingRules) found.push(say('rules', board.rules, countingRules))
  if (board.uncounted !== null) found.push(say('written past the counts', board.uncounted, null))
  if (board.rules !== null && (board.last_filed_on ?? '') < (lastFiledOn ?? ''))
    found.push(say('last filed on', board.last_filed_on, lastFiledOn))
  return found
}

const differenceOf = (board: string, kind: CountDifference['kind'], row: repo.DifferingRow): CountDifference => ({
  board,
  kind,
  of: row.scope,
  revision: row.revision,
  evidence: row.evidence,
  method: row.method,
  firstPower: row.first_power,
  place: row.place,
  stored: shown(row.stored, row.place),
  counted: shown(row.counted, row.place)
})

const maxShown = 200

function shown(value: repo.DifferingRow['stored'], place: string): string | number | null {
  if (value === null || typeof value === 'number') return value
  const text = typeof value === 'string' ? value : blockText(value, Number(place.replace('block ', '')))
  return text.length > maxShown ? `${text.slice(0, maxShown)}…` : text
}

/** A block in words, as far as it can be read: `left 33: 2, failed:board 40: 1`. */
function blockText(bytes: Uint8Array, block: number): string {
  const parts: string[] = []
  try {
    readBlock(bytes, (slot, count) => {
      parts.push(`${counterOf(slot)} ${block * blockDays + dayInBlock(slot)}: ${count}`)
    })
  } catch (error) {
    parts.push(`broken (${(error as Error).message})`)
  }
  return parts.join(', ')
}
