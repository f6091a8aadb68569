import { spawn } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { sql, type Migration } from 'kysely'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { holdDataFolder, openDb } from './client.server'
import { migrate } from './migrate'

let folder: string
let file: string
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'fettle-migrate-'))
  file = join(folder, 'a.sqlite')
})
afterEach(() => rmSync(folder, { recursive: true }))

const tables = async (path: string) => {
  const db = openDb(path)
  const { rows } = await sql<{
    name: string
    sql: string
  }>`select name, sql from sqlite_schema where type = 'table' order by name`.execute(db)
  await db.destroy()
  return rows
}

describe('migrate', () => {
  it('makes every table STRICT and runs nothing the second time', async () => {
    const db = openDb(file)
    expect((await migrate(db)).length).toBeGreaterThan(0)
    expect(await migrate(db)).toEqual([])
    await db.destroy()
    const own = (await tables(file)).filter((t) => !t.name.startsWith('kysely_') && !t.name.startsWith('sqlite_'))
    expect(own.length).toBeGreaterThan(15)
    for (const table of own) expect(table.sql, table.name).toMatch(/strict(, without rowid)?$/i)
  })

  it('leaves nothing of a failing migration behind, and throws', async () => {
    const db = openDb(file)
    const list: Record<string, Migration> = {
      '0001-a': { up: async (d) => void (await sql`create table a (x integer) strict`.execute(d)) },
      '0002-b': {
        up: async (d) => {
          await sql`create table b (x integer) strict`.execute(d)
          throw new Error('0002 is broken')
        }
      }
    }
    await expect(migrate(db, list)).rejects.toThrow('0002 is broken')
    await db.destroy()
    expect((await tables(file)).map((t) => t.name)).not.toContain('b')
  })

  it('survives kill -9 in the middle: the next start migrates from where it was', async () => {
    const script = fileURLToPath(new URL('./testing/slow-migration.ts', import.meta.url))
    const child = spawn(process.execPath, ['--import', 'tsx', script, file], { stdio: ['ignore', 'pipe', 'inherit'] })
    await new Promise<void>((resolve, reject) => {
      child.once('error', reject)
      child.stdout.once('data', () => resolve())
    })
    child.kill('SIGKILL')
    await new Promise((resolve) => child.once('exit', resolve))
    expect((await tables(file)).map((t) => t.name)).not.toContain('half')
    const db = openDb(file)
    expect((await migrate(db)).length).toBeGreaterThan(0)
    await db.destroy()
  })
})

describe('holdDataFolder', () => {
  it('lets one process in, and the next after it let go', () => {
    const release = holdDataFolder(file)
    expect(() => holdDataFolder(file)).toThrow('Another Fettle process')
    release()
    holdDataFolder(file)()
  })
})
