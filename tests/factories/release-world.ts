import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { createHash } from 'node:crypto'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { Actor } from '~/domain/accounts/can'
import {
  unknownFacts,
  type BundleCheck,
  type BundlePictures,
  type BundleRecord,
  type DeclaredDetails
} from '~/domain/bundle/bundle-check.types'
import type { Draft } from '~/domain/releases/release.schema'
import type { CheckBundle, IntakeDeps } from '~/domain/releases/take-in-bundle.server'
import { mustReadVersion } from '~/domain/releases/version'
import { createStorage, type Storage } from '~/server/storage.server'
import type { Db } from '~db/client.server'
import { startTestFake, testAccount } from '../../storage-fake/testing'
import { openTestDb } from './report-world'

const at = '2020-01-01T00:00:00.000Z'

/** A console with two revisions, the board `ledger` owned by Ann, the project's own object storage, and a check that answers what it is told. */
export async function openReleaseWorld() {
  const { db, close } = await openTestDb()
  const fake = await startTestFake()
  const storage: Storage = createStorage({ ...testAccount, endpoint: fake.url })
  const uploadDir = mkdtempSync(join(tmpdir(), 'fettle-uploads-'))
  await fill(db)
  const clock = { now: new Date('2026-01-01T10:00:00.000Z') }
  /* Stands in for the child process, whose own tests hold it: here its answer is the input. */
  const check: {
    next: BundleCheck
    record: BundleRecord | null
    pictures: Partial<BundlePictures>
    /** What the last check was told about the release. */
    asked: DeclaredDetails | null
    hook: () => Promise<void>
  } = {
    next: answerOf([]),
    record: null,
    asked: null,
    pictures: {},
    hook: async () => {}
  }
  const run: CheckBundle = async ({ path, ...asked }) => {
    const { next: answer, record } = check
    check.asked = asked
    await check.hook()
    const svg = (side: string) => `<svg xmlns="http://www.w3.org/2000/svg"><title>${side} ${path.length}</title></svg>`
    const layer = { file: 'f.gbr', function: 'copper' as const, side: 'top' as const, index: 1, svg: svg('copper') }
    const holes = { file: null, function: 'drill' as const, side: null, index: null, svg: svg('holes') }
    const png = (side: string) => new Uint8Array(Buffer.from(`png of ${side} ${path.length}`))
    const pictures = {
      box: { minX: 0, minY: 0, maxX: 10, maxY: 5 },
      top: svg('top'),
      bottom: svg('bottom'),
      thumbnails: { top: png('top'), bottom: png('bottom') },
      layers: [layer, holes]
    }
    return { check: answer, record, pictures: { ...pictures, ...check.pictures } }
  }
  const deps: IntakeDeps = { db, storage, now: () => clock.now, uploadDir, check: run }
  let files = 0
  return {
    db,
    storage,
    deps,
    check,
    clock,
    uploadDir,
    tick: (ms = 1000) => (clock.now = new Date(clock.now.getTime() + ms)),
    /** A received file with this content. */
    file: (content: string | Buffer) => {
      const path = join(uploadDir, `${++files}.part`)
      writeFileSync(path, content)
      return {
        path,
        bytes: Buffer.byteLength(content),
        sha256: createHash('sha256').update(content).digest('hex'),
        name: 'a.zip'
      }
    },
    close: async () => {
      await close()
      storage.close()
      await fake.stop()
      rmSync(uploadDir, { recursive: true, force: true })
    }
  }
}
export type ReleaseWorld = Awaited<ReturnType<typeof openReleaseWorld>>

async function fill(db: Db) {
  await db
    .insertInto('users')
    .values([
      { id: 'ann', display_name: 'Ann', created_at: at },
      { id: 'bo', display_name: 'Bo', created_at: at }
    ])
    .execute()
  for (const [id, name] of [
    ['talvi-16', 'Talvi 16'],
    ['talvi-pocket', 'Talvi Pocket']
  ] as const)
    await db.insertInto('consoles').values({ id, slug: id, name, maker: 'Talvi', kind: 'home', summary: 'A console.' }).execute()
  for (const [id, console_id, position] of [
    ['tm-1', 'talvi-16', 1],
    ['tm-2', 'talvi-16', 2],
    ['tp-1', 'talvi-pocket', 1]
  ] as const)
    await db
      .insertInto('console_revisions')
      .values({ id, console_id, code: id.toUpperCase(), position, recognise: 'Printed.' })
      .execute()
  await db
    .insertInto('boards')
    .values({
      id: 'b1',
      slug: 'ledger',
      name: 'Ledger',
      summary: 'Keeps the books.',
      replaces: 'the battery',
      console_id: 'talvi-16',
      licence: 'CERN-OHL-P-2.0',
      created_at: at,
      created_by: 'ann'
    })
    .execute()
  await db.insertInto('board_maintainers').values({ board_id: 'b1', user_id: 'ann', role: 'owner', added_at: at }).execute()
}

export const owner: Actor = { userId: 'ann', displayName: 'Ann', isSteward: false, maintains: new Map([['b1', 'owner']]) }
export const stranger: Actor = { userId: 'bo', displayName: 'Bo', isSteward: false, maintains: new Map() }

export const draftOf = (version: string, more: Partial<Draft> = {}): Draft => ({
  version: mustReadVersion(version),
  boardRevision: 'A',
  orderNote: '',
  notes: '',
  ...more
})

/** The answer of a check with these findings. */
export function answerOf(findings: BundleCheck['findings'], layers: BundleCheck['layers'] = []): BundleCheck {
  return {
    layers: [{ file: 'f.gbr', function: 'copper', side: 'top', index: 1, evidence: 'attribute' }, ...layers],
    facts: { ...unknownFacts(), width: 10, height: 5 },
    findings,
    ok: !findings.some((f) => f.severity === 'stop')
  }
}
export const caution = (message = 'No paste layer.') => ({
  code: 'paste-missing' as const,
  severity: 'caution' as const,
  file: null,
  message,
  expected: null,
  found: null,
  place: null
})
export const stop = () => ({ ...caution('No outline.'), code: 'outline-missing' as const, severity: 'stop' as const })
