import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { openDb, type Db } from '~db/client.server'
import { migrate } from '~db/migrate'
import { enqueueMail } from '~/domain/mail/enqueue-mail.server'
import type { Config } from './config.server'
import { startMailFake, type MailFake } from './fakes/mail-fake'
import { backOffMs, startMailWorker } from './mail-worker.server'

const dir = mkdtempSync(join(tmpdir(), 'fettle-mail-'))
let db: Db
let fake: MailFake
let written: string[] = []
let workers: { close(): Promise<void> }[] = []
const config = () => ({ mail: { apiUrl: fake.url, apiKey: 'key', from: 'Fettle <f@test.example>', fakeUrl: null } }) as Config
const given = () => ({ db, config: config(), now: () => new Date() })
/** Waits as long as a busy machine needs. */
const soon = { timeout: 20_000 }
const start = (...args: Parameters<typeof startMailWorker>) => {
  const worker = startMailWorker(...args)
  workers.push(worker)
  return worker
}
const quick = { pollMs: 5, firstWaitMs: 5, maxAttempts: 3 }

beforeAll(async () => {
  db = openDb(join(dir, 'mail.sqlite'))
  await migrate(db)
})
afterAll(async () => {
  await db.destroy()
  rmSync(dir, { recursive: true })
})
beforeEach(async () => {
  fake = await startMailFake({ apiKey: 'key' })
  written = []
  /* The worker's log lines are looked at, and kept out of the tests' own output. */
  vi.spyOn(process.stderr, 'write').mockImplementation((text) => written.push(String(text)) > 0)
})
afterEach(async () => {
  await Promise.all(workers.map((worker) => worker.close()))
  workers = []
  vi.restoreAllMocks()
  await fake.close()
  await db.deleteFrom('mail_outbox').execute()
})

const put = (n: number, to = `m${n}@test.example`, subject = `Mail ${n}`) =>
  db.transaction().execute((tx) => enqueueMail(tx, { dedupeKey: `test/${n}`, to, subject, text: `secret ${n}` }, new Date()))
const row = (n: number) =>
  db.selectFrom('mail_outbox').selectAll().where('dedupe_key', '=', `test/${n}`).executeTakeFirstOrThrow()

describe('the outbox', () => {
  it('keeps a mail only when the transaction of its event is committed, and one for each event', async () => {
    await expect(
      db.transaction().execute(async (tx) => {
        await enqueueMail(tx, { dedupeKey: 'test/0', to: 'a@test.example', subject: 's', text: 't' }, new Date())
        throw new Error('undone')
      })
    ).rejects.toThrow('undone')
    await put(1)
    await put(1, 'other@test.example')
    const rows = await db.selectFrom('mail_outbox').select(['dedupe_key', 'to_address']).execute()
    expect(rows).toEqual([{ dedupe_key: 'test/1', to_address: 'm1@test.example' }])
  })

  it('refuses a subject or an address of two lines', async () => {
    await expect(put(1, 'a@test.example\r\nBcc: b@test.example')).rejects.toThrow(RangeError)
    await expect(put(1, undefined, 'a\nb')).rejects.toThrow(RangeError)
  })
})

describe('the mail worker', () => {
  it('sends what is due, each mail once, and erases its text', async () => {
    for (let n = 1; n <= 25; n++) await put(n)
    const worker = start(given(), quick)
    await expect.poll(() => fake.sent().length, soon).toBe(25)
    await worker.close()
    expect(new Set(fake.sent().map((mail) => mail.to[0])).size).toBe(25)
    const rows = await db.selectFrom('mail_outbox').select(['sent_at', 'text_body', 'attempts', 'provider_id']).execute()
    expect(rows.every((r) => r.sent_at !== null && r.text_body === '' && r.attempts === 1 && r.provider_id !== null)).toBe(true)
  })

  it.each([429, 500] as const)('puts a mail off when the service answers %d, and sends it later', async (status) => {
    fake.failNext(2, status)
    await put(1)
    const worker = start(given(), quick)
    await expect.poll(async () => (await row(1)).sent_at, soon).not.toBeNull()
    await worker.close()
    expect(fake.sent()).toHaveLength(1)
    expect((await row(1)).attempts).toBe(3)
    expect(written.join('')).toContain('mail-put-off')
    expect(written.join('')).not.toMatch(/m1@test|secret/)
  })

  it('gives up after the last attempt, in its row and in the log', async () => {
    fake.failNext(99)
    await put(1)
    const worker = start(given(), quick)
    await expect.poll(async () => (await row(1)).given_up_at, soon).not.toBeNull()
    await worker.close()
    expect(await row(1)).toMatchObject({ attempts: 3, sent_at: null, next_attempt_at: null, last_error: '500 application_error' })
    expect(written.join('')).toContain('mail-given-up')
  })

  it('gives up at once on a mail that can never go out', async () => {
    await put(1, 'not-an-address')
    const worker = start(given(), quick)
    await expect.poll(async () => (await row(1)).given_up_at, soon).not.toBeNull()
    await worker.close()
    expect(await row(1)).toMatchObject({ attempts: 1, last_error: '422 validation_error' })
  })

  it('survives a service that is not there', async () => {
    const gone = await startMailFake({ apiKey: 'key' })
    await gone.close()
    await put(1)
    const worker = start(
      { ...given(), config: { mail: { ...config().mail, apiUrl: gone.url } } as Config },
      { ...quick, maxAttempts: 99 }
    )
    await expect.poll(async () => (await row(1)).last_error, soon).toBe('no answer application_error')
    await worker.close()
    const second = start(given(), quick)
    await expect.poll(() => fake.sent().length, soon).toBe(1)
    await second.close()
  })

  it('does not send a second mail when it died between sending and noting it', async () => {
    await put(1)
    const first = start(given(), quick)
    await expect.poll(async () => (await row(1)).sent_at, soon).not.toBeNull()
    await first.close()
    const asBefore = { sent_at: null, provider_id: null, text_body: 'secret 1', next_attempt_at: new Date().toISOString() }
    await db.updateTable('mail_outbox').set(asBefore).execute()
    const second = start(given(), quick)
    await expect.poll(async () => (await row(1)).sent_at, soon).not.toBeNull()
    await second.close()
    expect(fake.sent()).toHaveLength(1)
  })

  it('takes nothing more once it is closed', async () => {
    const worker = start(given(), quick)
    await worker.close()
    await put(1)
    await new Promise((resolve) => setTimeout(resolve, 50))
    expect(await row(1)).toMatchObject({ attempts: 0, sent_at: null })
  })
})

describe('backOffMs', () => {
  it('doubles, is spread over the upper half, and never passes an hour', () => {
    const at = (attempts: number, random: number) => backOffMs(attempts, 5_000, () => random)
    expect([1, 2, 3, 4].map((n) => at(n, 1))).toEqual([5_000, 10_000, 20_000, 40_000])
    expect(at(1, 0)).toBe(2_500)
    expect(at(60, 1)).toBe(3_600_000)
  })
})
