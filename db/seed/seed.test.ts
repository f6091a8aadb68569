import { createHash } from 'node:crypto'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { compareFingerprints } from '~/domain/bundle/compare-fingerprints'
import { listEarlier, listFingerprints, listParts, listPlacements } from '~/domain/releases/record.repo.server'
import { createStorage, objectKey, type Storage } from '~/server/storage.server'
import { openDb, type Db } from '~db/client.server'
import { migrate } from '~db/migrate'
import { startStorageFake, type StorageFake } from '../../storage-fake/server'
import { bundlePath, readManifests } from './manifests'
import { realCheck, seedDemo } from './seed'

const folder = mkdtempSync(join(tmpdir(), 'fettle-seed-'))
const account = { region: 'us-east-1', accessKeyId: 'test', secretAccessKey: 'test-secret' }
let fake: StorageFake
let storage: Storage
const open: Db[] = []

beforeAll(async () => {
  fake = await startStorageFake({ dir: join(folder, 'storage'), ...account })
  storage = createStorage({ endpoint: fake.url, bucket: 'seed', ...account })
})

afterAll(async () => {
  for (const db of open) await db.destroy()
  storage.close()
  await fake.close()
  rmSync(folder, { recursive: true, force: true })
})

async function freshDb(name: string): Promise<Db> {
  const db = openDb(join(folder, `${name}.sqlite`))
  open.push(db)
  await migrate(db)
  return db
}

/** The real check, each bundle once for the whole file. */
const answers = new Map<string, ReturnType<typeof realCheck>>()
let checksRun = 0
const check: typeof realCheck = (input) => {
  if (!answers.has(input.path)) {
    checksRun++
    answers.set(input.path, realCheck(input))
  }
  return answers.get(input.path)!
}

/** A hash over every row of every table, in the order of their columns. */
async function dumpHash(db: Db): Promise<string> {
  const { rows: tables } = await sql<{
    name: string
  }>`select name from sqlite_schema where type = 'table' and name not like 'sqlite_%' and name not like 'kysely_%' order by name`.execute(
    db
  )
  const hash = createHash('sha256')
  for (const { name } of tables) {
    const { rows } = await sql<Record<string, unknown>>`select * from ${sql.table(name)}`.execute(db)
    for (const line of rows.map((row) => JSON.stringify(row)).sort()) hash.update(`${name} ${line}\n`)
  }
  return hash.digest('hex')
}

const count = async (db: Db, table: 'install_reports' | 'releases' | 'boards' | 'users' | 'staged_objects') =>
  Number(
    (
      await db
        .selectFrom(table)
        .select((eb) => eb.fn.countAll().as('n'))
        .executeTakeFirstOrThrow()
    ).n
  )

describe('the seeded world', () => {
  let db: Db
  beforeAll(async () => {
    db = await freshDb('one')
    expect(await seedDemo({ db, storage }, { check })).toBe('seeded')
  })

  it('holds what it should, and every reference is sound', async () => {
    expect(await count(db, 'boards')).toBe(3)
    expect(await count(db, 'releases')).toBe(10)
    expect(await count(db, 'install_reports')).toBe(811 + 5)
    expect(await count(db, 'staged_objects')).toBe(0)
    expect((await sql`pragma foreign_key_check`.execute(db)).rows).toEqual([])
    const states = await db
      .selectFrom('releases')
      .select(['version', 'state'])
      .where('state', '<>', 'released')
      .orderBy('version')
      .execute()
    expect(states).toEqual([
      { version: '0.9.0-beta.2', state: 'trial' },
      { version: '1.0.0', state: 'withdrawn' },
      { version: '1.0.0-beta.1', state: 'trial' }
    ])
  })

  it('changes nothing when it is run again', async () => {
    const before = await dumpHash(db)
    const runBefore = checksRun
    expect(await seedDemo({ db, storage }, { check })).toBe('present')
    expect(await dumpHash(db)).toBe(before)
    expect(checksRun).toBe(runBefore)
  })

  it('gives the same rows in another database', async () => {
    const other = await freshDb('two')
    await seedDemo({ db: other, storage }, { check })
    expect(await dumpHash(other)).toBe(await dumpHash(db))
  })

  it('holds every bundle in storage under its hash, byte for byte', async () => {
    for (const manifest of readManifests()) {
      const object = await storage.get(objectKey('bundle', manifest.bundle.sha256))
      expect(object).not.toBeNull()
      const bytes = Buffer.concat(await object!.stream.toArray())
      expect(createHash('sha256').update(bytes).digest('hex')).toBe(manifest.bundle.sha256)
      expect(bytes.equals(readFileSync(bundlePath(manifest)))).toBe(true)
    }
  })

  it('has facts as the manifests say, no stop, and an answer to each caution', async () => {
    const rows = await db
      .selectFrom('releases')
      .innerJoin('boards', 'boards.id', 'releases.board_id')
      .selectAll('releases')
      .select('boards.slug')
      .execute()
    for (const row of rows) {
      const manifest = readManifests().find((m) => m.board === row.slug && m.version === row.version)!
      const facts = JSON.parse(row.facts_json!)
      expect([facts.sha256, facts.copperLayers]).toEqual([manifest.bundle.sha256, manifest.declared.copperLayers])
      expect(row.is_check_ok).toBe(1)
      for (const sha256 of [row.picture_top_sha256, row.picture_bottom_sha256]) {
        expect(sha256).not.toBeNull()
        expect(await storage.head(objectKey('picture', sha256!))).toMatchObject({ contentType: 'image/svg+xml' })
      }
      for (const sha256 of [row.thumb_top_sha256, row.thumb_bottom_sha256])
        expect(await storage.head(objectKey('picture', sha256!))).toMatchObject({ contentType: 'image/png' })
      const layers = await db.selectFrom('layer_pictures').selectAll().where('release_id', '=', row.id).execute()
      expect(layers.filter((layer) => layer.function === 'copper')).toHaveLength(manifest.declared.copperLayers)
      expect(layers.at(-1)).toMatchObject({ function: 'drill', file: null })
      for (const { sha256 } of layers)
        expect(await storage.head(objectKey('picture', sha256))).toMatchObject({ contentType: 'image/svg+xml' })
    }
    const open = await db.selectFrom('findings').select(['code', 'severity', 'answer']).where('severity', '<>', 'note').execute()
    expect(open.length).toBeGreaterThan(0)
    for (const finding of open) expect(finding).toMatchObject({ severity: 'caution', answer: expect.stringMatching(/\S/) })
  })

  it('keeps the parts, places and fingerprints of every release, alike within a board revision', async () => {
    const rows = await db.selectFrom('releases').select(['id', 'board_id', 'board_revision', 'version', 'outline_json']).execute()
    for (const row of rows) {
      expect(JSON.parse(row.outline_json!)).toMatchObject({ minX: 0, minY: 0 })
      expect((await listParts(db, row.id)).length).toBeGreaterThan(3)
      expect((await listPlacements(db, row.id)).length).toBeGreaterThan(3)
      const own = await listFingerprints(db, row.id)
      expect(own.map((print) => print.function)).toEqual(expect.arrayContaining(['copper', 'outline', 'drill']))
      for (const { fingerprints } of await listEarlier(db, row)) expect(compareFingerprints(fingerprints, own)).toEqual([])
    }
    const [first] = rows
    const others = rows.filter((r) => r.board_id === first!.board_id && r.board_revision !== first!.board_revision)
    const own = await listFingerprints(db, first!.id)
    expect(others.length).toBeGreaterThan(0)
    for (const { id } of others) expect(compareFingerprints(await listFingerprints(db, id), own)).not.toEqual([])
  })

  it('puts back what storage lost', async () => {
    const { sha256 } = await db
      .selectFrom('layer_pictures')
      .select('sha256')
      .where('function', '=', 'drill')
      .executeTakeFirstOrThrow()
    const { thumb_top_sha256: thumb } = await db.selectFrom('releases').select('thumb_top_sha256').executeTakeFirstOrThrow()
    for (const key of [
      objectKey('bundle', readManifests()[3]!.bundle.sha256),
      ...[sha256, thumb!].map((sha) => objectKey('picture', sha))
    ]) {
      await storage.remove(key)
      expect(await seedDemo({ db, storage }, { check })).toBe('present')
      expect(await storage.head(key)).not.toBeNull()
    }
  })

  it('leaves nothing behind when a bundle does not pass', async () => {
    const other = await freshDb('three')
    const failing: typeof realCheck = async (input) => {
      const answer = await check(input)
      return { ...answer, check: { ...answer.check, ok: false } }
    }
    await expect(seedDemo({ db: other, storage }, { check: failing })).rejects.toThrow(/does not pass its check/)
    expect(await count(other, 'users')).toBe(0)
  })
})
