import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { expect, it } from 'vitest'
import { openDb } from '~db/client.server'
import { migrate } from '~db/migrate'
import * as attempts from './oauth-attempts.repo.server'
import * as counts from './rate-counts.repo.server'
import * as sessions from './sessions.repo.server'
import * as tokens from './sign-in-tokens.repo.server'
import { sweepAccounts } from './sweep.server'
import * as users from './users.repo.server'

it('sweeps away what has lapsed and leaves what holds', async () => {
  const dir = mkdtempSync(join(tmpdir(), 'fettle-sweep-'))
  const db = openDb(join(dir, 'sweep.sqlite'))
  try {
    await migrate(db)
    const now = new Date('2026-12-01T12:00:00.000Z')
    const at = '2026-11-01T00:00:00.000Z'
    await users.insert(db, { id: 'u', displayName: 'U', email: null, github: null, at })
    for (const [name, expiresAt] of [
      ['over', '2026-11-30T11:59:59.999Z'],
      ['holds', '2026-12-01T12:00:00.001Z']
    ] as const) {
      await sessions.insert(db, { idHash: name, userId: 'u', at, expiresAt })
      await tokens.insert(db, { tokenHash: name, email: 'a@test.example', returnTo: '/', at, expiresAt })
      await attempts.insert(db, { stateHash: name, browserHash: 'b', codeVerifier: 'v', returnTo: '/', at, expiresAt })
    }
    await counts.add(db, 'old', now.getTime() - 25 * 3_600_000)
    await counts.add(db, 'new', now.getTime() - 3_600_000)
    await sweepAccounts({ db, now: () => now })
    expect(await db.selectFrom('sessions').select('id_hash').execute()).toEqual([{ id_hash: 'holds' }])
    expect(await db.selectFrom('sign_in_tokens').select('token_hash').execute()).toEqual([{ token_hash: 'holds' }])
    expect(await db.selectFrom('oauth_attempts').select('state_hash').execute()).toEqual([{ state_hash: 'holds' }])
    expect(await db.selectFrom('rate_counts').select('bucket').execute()).toEqual([{ bucket: 'new' }])
  } finally {
    await db.destroy()
    rmSync(dir, { recursive: true })
  }
})
