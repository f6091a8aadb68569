import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { Actor } from '~/domain/accounts/can'
import { mustReadVersion, precedenceKey } from '~/domain/releases/version'
import { openDb, type Db } from '~db/client.server'
import { migrate } from '~db/migrate'

const at = '2020-01-01T00:00:00.000Z'

/** Two consoles, one board for the first with four releases (one a draft, one withdrawn), a batch with one unit, three people. */
export async function fillReportWorld(db: Db): Promise<void> {
  const person = (id: string, name: string, isSteward: 0 | 1 = 0) => ({
    id,
    display_name: name,
    is_steward: isSteward,
    created_at: at
  })
  await db
    .insertInto('users')
    .values([person('ann', 'Ann'), person('bo', 'Bo'), person('stu', 'Stu', 1)])
    .execute()
  const machine = (id: string, name: string) => ({
    id,
    slug: id,
    name,
    maker: 'Talvi',
    kind: 'home' as const,
    summary: 'A console.'
  })
  await db
    .insertInto('consoles')
    .values([machine('talvi-16', 'Talvi 16'), machine('talvi-pocket', 'Talvi Pocket')])
    .execute()
  const revision = (id: string, consoleId: string, position: number) => ({
    id,
    console_id: consoleId,
    code: id.toUpperCase(),
    position,
    recognise: 'Printed beside the slot.'
  })
  await db
    .insertInto('console_revisions')
    .values([revision('tm-1', 'talvi-16', 1), revision('tm-2', 'talvi-16', 2), revision('tp-1', 'talvi-pocket', 1)])
    .execute()
  await db
    .insertInto('boards')
    .values({
      id: 'b1',
      slug: 'buttress',
      name: 'Buttress',
      summary: 'Holds the rail up.',
      replaces: 'the electrolytic cluster',
      console_id: 'talvi-16',
      licence: 'CERN-OHL-P-2.0',
      created_at: at
    })
    .execute()
  await db
    .insertInto('fit_claims')
    .values({
      board_id: 'b1',
      console_revision_id: 'tm-2',
      claim: 'fits-with-care',
      reason: 'The shield is low.',
      updated_at: at
    })
    .execute()
  const release = (id: string, version: string, state: 'draft' | 'trial' | 'released' | 'withdrawn') => ({
    id,
    board_id: 'b1',
    version,
    precedence_key: precedenceKey(mustReadVersion(version)),
    board_revision: 'A',
    state,
    created_at: at,
    updated_at: at,
    ...(state === 'draft' ? {} : { bundle_sha256: 'a'.repeat(64), bundle_bytes: 1, published_at: at }),
    ...(state === 'withdrawn' ? { withdrawn_at: at, withdrawn_reason: 'C13 can short.' } : {})
  })
  for (const row of [
    release('v1', '1.0.0', 'released'),
    release('v2', '1.1.0', 'withdrawn'),
    release('v3', '2.0.0-beta.1', 'trial'),
    release('v4', '2.0.0', 'draft')
  ])
    await db.insertInto('releases').values(row).execute()
  await db
    .insertInto('batches')
    .values({
      id: 't1',
      release_id: 'v1',
      code: '2020-01',
      made_on: '2020-01-01',
      quantity: 5,
      assembled_by: 'Ann',
      created_at: at
    })
    .execute()
  await db.insertInto('units').values({ tag: 'BT-1', batch_id: 't1', created_at: at }).execute()
}

export const actorOf = (userId: string, isSteward = false): Actor => ({
  userId,
  displayName: userId,
  isSteward,
  maintains: new Map()
})

/** A migrated database file of its own; `close` removes it. */
export async function openTestDb(): Promise<{ db: Db; file: string; close: () => Promise<void> }> {
  const folder = mkdtempSync(join(tmpdir(), 'fettle-test-'))
  const file = join(folder, 'fettle.sqlite')
  const db = openDb(file)
  await migrate(db)
  return {
    db,
    file,
    close: async () => {
      await db.destroy()
      rmSync(folder, { recursive: true })
    }
  }
}
