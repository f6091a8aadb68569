import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { sql } from 'kysely'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { SqliteKysely } from './sqlite-dialect'

type Tables = { note: { id: number; text: string } }

let folder: string
let db: SqliteKysely<Tables>

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'fettle-dialect-'))
  db = new SqliteKysely<Tables>(join(folder, 'a.sqlite'))
  await sql`create table note (id integer primary key, text text not null) strict`.execute(db)
})
afterEach(async () => {
  await db.destroy()
  rmSync(folder, { recursive: true })
})

const pragma = async (name: string) =>
  Object.values((await sql.raw<Record<string, unknown>>(`pragma ${name}`).execute(db)).rows[0]!)[0]
const insert = (id: number, text = 'x') => db.insertInto('note').values({ id, text })

describe('the SQLite dialect', () => {
  it('runs in WAL; the writer syncs fully and both connections hold foreign keys', async () => {
    expect(await pragma('journal_mode')).toBe('wal')
    expect(await pragma('foreign_keys')).toBe(1)
    const onWriter = await db
      .transaction()
      .execute(async (tx) => [
        Object.values((await sql.raw<Record<string, number>>('pragma synchronous').execute(tx)).rows[0]!)[0],
        Object.values((await sql.raw<Record<string, number>>('pragma foreign_keys').execute(tx)).rows[0]!)[0]
      ])
    // https://www.sqlite.org/pragma.html#pragma_synchronous: FULL is 2
    expect(onWriter).toEqual([2, 1])
  })

  it('gives rows, counts and row ids', async () => {
    const first = await insert(7).executeTakeFirstOrThrow()
    expect(first).toMatchObject({ insertId: 7n, numInsertedOrUpdatedRows: 1n })
    expect(await insert(8, 'y').returning('text').executeTakeFirst()).toEqual({ text: 'y' })
    const changed = await db.updateTable('note').set({ text: 'z' }).executeTakeFirstOrThrow()
    expect(changed.numUpdatedRows).toBe(2n)
    expect(await db.selectFrom('note').selectAll().orderBy('id').execute()).toEqual([
      { id: 7, text: 'z' },
      { id: 8, text: 'z' }
    ])
  })

  it('sends a raw statement that writes to the writer', async () => {
    await expect(sql`select * from note where id = (select 1)`.execute(db)).resolves.toBeDefined()
    await sql`insert into note values (1, 'raw')`.execute(db)
    expect((await db.selectFrom('note').selectAll().execute()).length).toBe(1)
  })

  it('lets reads through while a transaction is open, which see what was there before', async () => {
    let go!: () => void
    const gate = new Promise<void>((resolve) => (go = resolve))
    let begun!: () => void
    const hasBegun = new Promise<void>((resolve) => (begun = resolve))
    const writing = db.transaction().execute(async (tx) => {
      await tx.insertInto('note').values({ id: 1, text: 'in' }).execute()
      begun()
      await gate
    })
    await hasBegun
    expect(await db.selectFrom('note').selectAll().execute()).toEqual([])
    go()
    await writing
    expect((await db.selectFrom('note').selectAll().execute()).length).toBe(1)
  })

  it('reads then writes in many transactions at once without losing an update (BEGIN IMMEDIATE, one after another)', async () => {
    await insert(1, '0').execute()
    const add = () =>
      db.transaction().execute(async (tx) => {
        const { text } = await tx.selectFrom('note').select('text').where('id', '=', 1).executeTakeFirstOrThrow()
        await new Promise((resolve) => setImmediate(resolve))
        await tx
          .updateTable('note')
          .set({ text: String(Number(text) + 1) })
          .where('id', '=', 1)
          .execute()
      })
    await Promise.all(Array.from({ length: 25 }, add))
    expect(await db.selectFrom('note').select('text').executeTakeFirst()).toEqual({ text: '25' })
  })

  it('serves writers in the order in which they came', async () => {
    const order: number[] = []
    const one = (n: number) =>
      db.transaction().execute(async (tx) => {
        order.push(n)
        await tx.insertInto('note').values({ id: n, text: '' }).execute()
      })
    await Promise.all([
      one(1),
      insert(2)
        .execute()
        .then(() => order.push(2)),
      one(3),
      one(4)
    ])
    expect(order.filter((n) => n !== 2)).toEqual([1, 3, 4])
  })

  it('rolls back on an error and stays usable', async () => {
    await expect(
      db.transaction().execute(async (tx) => {
        await tx.insertInto('note').values({ id: 1, text: 'no' }).execute()
        throw new Error('stop')
      })
    ).rejects.toThrow('stop')
    expect(await db.selectFrom('note').selectAll().execute()).toEqual([])
    await insert(1).execute()
  })

  it('answers `db` inside a transaction with an error at once, reads and writes alike', async () => {
    const inside = (work: () => Promise<unknown>) => db.transaction().execute(work)
    await expect(inside(() => db.selectFrom('note').selectAll().execute())).rejects.toThrow('inside db.transaction()')
    await expect(inside(() => insert(1).execute())).rejects.toThrow('inside db.transaction()')
    await expect(inside(() => db.transaction().execute(async () => 1))).rejects.toThrow('inside a transaction')
    await insert(1).execute()
  })

  it('streams rows on a connection of its own', async () => {
    for (let id = 1; id <= 3; id++) await insert(id).execute()
    const seen: number[] = []
    for await (const row of db.selectFrom('note').select('id').orderBy('id').stream()) {
      seen.push(row.id)
      await insert(row.id + 10).execute()
    }
    expect(seen).toEqual([1, 2, 3])
  })

  it('opened read-only it reads, holds a snapshot through a transaction, and refuses to write', async () => {
    await insert(1).execute()
    const reader = new SqliteKysely<Tables>(join(folder, 'a.sqlite'), { isReadOnly: true })
    let begin!: () => void
    let goOn!: () => void
    const begun = new Promise<void>((resolve) => (begin = resolve))
    const written = new Promise<void>((resolve) => (goOn = resolve))
    const counts = reader.transaction().execute(async (tx) => {
      const before = await tx.selectFrom('note').selectAll().execute()
      begin()
      await written
      return [before.length, (await tx.selectFrom('note').selectAll().execute()).length]
    })
    await begun
    await insert(2).execute()
    goOn()
    expect(await counts).toEqual([1, 1])
    expect(await reader.selectFrom('note').selectAll().execute()).toHaveLength(2)
    await expect(reader.insertInto('note').values({ id: 3, text: 'x' }).execute()).rejects.toThrow('readonly')
    await reader.destroy()
  })
})
