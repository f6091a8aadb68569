import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openDb, type Db } from '~db/client.server'
import { migrate } from '~db/migrate'
import { callerOf, countUse } from './rate-limit.server'

describe('countUse', () => {
  const dir = mkdtempSync(join(tmpdir(), 'fettle-rate-'))
  let db: Db
  let at = Date.parse('2026-12-01T10:00:00Z')
  const keeper = () => ({ db, config: { appSecret: 'a secret of the test' }, now: () => new Date(at) })
  const rate = { kind: 'trial', limit: 3, windowMs: 600_000 }

  beforeAll(async () => {
    db = openDb(join(dir, 'rate.sqlite'))
    await migrate(db)
  })
  afterAll(async () => {
    await db.destroy()
    rmSync(dir, { recursive: true })
  })

  it('lets the limit pass in each window, for each subject and kind by itself', async () => {
    for (let i = 0; i < 3; i++) await countUse(keeper(), rate, 'someone@test.example')
    await expect(countUse(keeper(), rate, 'someone@test.example')).rejects.toMatchObject({
      kind: 'rate-limited',
      message: 'Too many attempts. Try again in 10 minutes.'
    })
    await countUse(keeper(), rate, 'other@test.example')
    await countUse(keeper(), { ...rate, kind: 'another' }, 'someone@test.example')
    at += 599_000
    await expect(countUse(keeper(), rate, 'someone@test.example')).rejects.toMatchObject({ message: /in 1 minute\./ })
    at += 1_000
    await countUse(keeper(), rate, 'someone@test.example')
  })

  it('does not store whom it counts', async () => {
    const rows = await db.selectFrom('rate_counts').selectAll().execute()
    expect(rows.length).toBeGreaterThan(0)
    expect(JSON.stringify(rows)).not.toMatch(/someone|example/)
  })
})

describe('callerOf', () => {
  it.each([
    ['203.0.113.7', '203.0.113.7'],
    ['::ffff:203.0.113.7', '203.0.113.7'],
    ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
    ['2001:db8:1:2::1', '2001:db8:1:2::/64'],
    ['2001:DB8:0001:0002::9', '2001:db8:1:2::/64'],
    ['2001:db8::1', '2001:db8:0:0::/64'],
    ['::1', '0:0:0:0::/64'],
    ['fe80::1%eth0', 'fe80:0:0:0::/64'],
    ['', '']
  ])('takes %j as %j', (ip, caller) => {
    expect(callerOf(ip)).toBe(caller)
  })
})
