import { mkdirSync } from 'node:fs'
import { dirname } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { sql, type Kysely, type Transaction } from 'kysely'
import type { Schema } from './schema'
import { SqliteKysely } from './sqlite-dialect'

export type Db = Kysely<Schema>
export type Tx = Transaction<Schema>
/** What a repository function takes: the database, or the open transaction. */
export type DbOrTx = Db | Tx

/** Opens (and creates) the database file. It does not migrate. */
export function openDb(file: string): Db {
  mkdirSync(dirname(file), { recursive: true })
  return new SqliteKysely<Schema>(file)
}

/** The database file for a thread that only reads; writing through it is an error. */
export const openDbReadOnly = (file: string): Db => new SqliteKysely<Schema>(file, { isReadOnly: true })

/** Whether the database answers a read. */
export async function answers(db: Db): Promise<boolean> {
  const { rows } = await sql<{ ok: number }>`select 1 as ok`.execute(db)
  return rows[0]?.ok === 1
}

/**
 * Holds the data folder for this process: two writing processes starve each other. The lock is an open exclusive transaction on a
 * file beside the database, so the operating system drops it whatever becomes of the process.
 * @throws Error when another process holds it
 */
export function holdDataFolder(databaseFile: string): () => void {
  mkdirSync(dirname(databaseFile), { recursive: true })
  const lock = new BetterSqlite(`${databaseFile}.lock`, { timeout: 0 })
  try {
    lock.exec('begin exclusive')
  } catch (error) {
    lock.close()
    throw new Error(`Another Fettle process is writing to ${databaseFile}. Stop it first.`, { cause: error })
  }
  return () => lock.close()
}
