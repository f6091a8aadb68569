import { existsSync } from 'node:fs'
import { DomainError } from '~/lib/domain-error'
import { databaseFileOf } from '~/server/config.server'
import { holdDataFolder, openDb, openDbReadOnly, type Db } from '~db/client.server'
import { migrate } from '~db/migrate'
import { listBoards } from './counts.repo.server'
import { hasCounts } from './recount.repo.server'
import { compareCounts, maxDifferences, type BoardRecount, type CountDifference } from './recount.server'

export type RecountAnswer = {
  boards: number
  /** Reports counted, and rows that their counts take. */
  reports: number
  rows: number
  /** How many rows were stored otherwise than the reports give them; at most 100 are named. */
  differing: number
  mended: boolean
  differences: CountDifference[]
}

export type RecountOptions = {
  env: Record<string, string | undefined>
  /** Compares only: nothing is changed, and the server may run. */
  isCheck: boolean
  /** Told a board's name before it is counted. */
  tell: (board: string) => void
}

/**
 * Rebuilds the counts of every board of the server's database from its reports, and says where what was stored differed.
 * @throws DomainError `not-found` without a database, `wrong-type` when the file is none, `conflict` when another process writes to it or it is of
 * another version
 */
export async function recountDatabase({ env, isCheck, tell }: RecountOptions): Promise<RecountAnswer> {
  const file = databaseFileOf(env)
  if (!existsSync(file)) throw new DomainError('not-found', `There is no database ${file}. DATA_DIR names its folder.`)
  const release = isCheck ? () => {} : held(file)
  try {
    const db = isCheck ? openDbReadOnly(file) : openDb(file)
    try {
      return await recountAll(db, isCheck, tell)
    } finally {
      await db.destroy()
    }
  } catch (error) {
    if ((error as { code?: unknown }).code !== 'SQLITE_NOTADB') throw error
    throw new DomainError('wrong-type', `${file} is not a database.`)
  } finally {
    release()
  }
}

function held(file: string): () => void {
  try {
    return holdDataFolder(file)
  } catch (error) {
    throw new DomainError('conflict', `${(error as Error).message} With --check it can be compared while it runs.`)
  }
}

async function recountAll(db: Db, isCheck: boolean, tell: (board: string) => void): Promise<RecountAnswer> {
  const each: BoardRecount[] = []
  if (isCheck)
    // One snapshot for all boards, whatever the server writes meanwhile.
    await db.transaction().execute(async (tx) => {
      if (!(await hasCounts(tx)))
        throw new DomainError('conflict', 'This database is of an earlier version and has no counts yet. Start the server once.')
      for (const board of await listBoards(tx)) {
        tell(board.slug)
        each.push(await compareCounts(tx, board, false))
      }
    })
  else {
    await migrateHeld(db)
    for (const board of await listBoards(db)) {
      tell(board.slug)
      each.push(await db.transaction().execute((tx) => compareCounts(tx, board, true)))
    }
  }
  const sum = (of: (one: BoardRecount) => number) => each.reduce((total, one) => total + of(one), 0)
  const differing = sum((one) => one.differing)
  return {
    boards: each.length,
    reports: sum((one) => one.reports),
    rows: sum((one) => one.rows),
    differing,
    mended: !isCheck && differing > 0,
    differences: each.flatMap((one) => one.differences).slice(0, maxDifferences)
  }
}

async function migrateHeld(db: Db): Promise<void> {
  try {
    await migrate(db)
  } catch (error) {
    if ((error as { code?: unknown }).code === 'SQLITE_NOTADB') throw error
    throw new DomainError('conflict', `This database cannot be brought to this version: ${(error as Error).message}`)
  }
}
