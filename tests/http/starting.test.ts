import { spawn } from 'node:child_process'
import { existsSync, mkdirSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { sql } from 'kysely'
import { expect, it } from 'vitest'
import { startSite } from './harness'

const buildFile = fileURLToPath(new URL('../../build/server/index.js', import.meta.url))

it('refuses to serve a database that a newer version wrote, and says so', async () => {
  const newer = startSite({
    prepare: ({ db }) => sql`insert into kysely_migration values ('9999-from-the-future', '2030-01-01T00:00:00.000Z')`.execute(db)
  })
  await expect(newer).rejects.toThrow(/ended with 1 before it answered:[\s\S]*start-failed[\s\S]*9999-from-the-future/)
})

it('refuses to share its data folder, and clears what a killed process was receiving', async () => {
  let leftover = ''
  const site = await startSite({
    prepare: async ({ db }) => {
      const { rows } = await sql<{ file: string }>`pragma database_list`.execute(db)
      leftover = join(dirname(rows[0]!.file), 'uploads', 'left.part')
      mkdirSync(dirname(leftover))
      writeFileSync(leftover, 'half a zip')
    }
  })
  try {
    expect([leftover.startsWith(site.dataDir), existsSync(leftover)]).toEqual([true, false])
    expect(
      await site
        .browser()
        .fetch('/health')
        .then((answer) => answer.json())
    ).toEqual({ status: 'ok' })
    const second = await run({ DATA_DIR: site.dataDir })
    expect(second.code).toBe(1)
    expect(second.err).toContain('Another Fettle process is writing to')
    expect((await site.browser().fetch('/health')).status).toBe(200)
  } finally {
    await site.close()
  }
})

it('names each setting that is wrong, one line each, and starts nothing', async () => {
  const { code, err } = await run({ PORT: '70000', APP_SECRET: 'hunter2', MAIL_FROM: '' })
  expect(code).toBe(1)
  for (const name of ['PORT', 'APP_SECRET', 'MAIL_FROM']) expect(err).toMatch(new RegExp(`^  - ${name} `, 'm'))
  expect(err).not.toContain('hunter2')
})

/** The built server with whole settings for a test but for these, until it ends by itself. */
function run(env: Record<string, string>): Promise<{ code: number | null; err: string }> {
  const nowhere = 'http://127.0.0.1:9'
  const child = spawn(process.execPath, [buildFile], {
    env: {
      PATH: process.env.PATH,
      NODE_ENV: 'production',
      FETTLE_MODE: 'test',
      PORT: '0',
      APP_SECRET: 'a secret for tests that is long enough',
      STORAGE_ENDPOINT: nowhere,
      STORAGE_BUCKET: 'fettle',
      STORAGE_ACCESS_KEY_ID: 'test',
      STORAGE_SECRET_ACCESS_KEY: 'test-secret',
      MAIL_API_URL: nowhere,
      MAIL_API_KEY: 'key',
      MAIL_FROM: 'Fettle <fettle@test.example>',
      GITHUB_CLIENT_ID: 'client',
      GITHUB_CLIENT_SECRET: 'client-secret',
      ...env
    },
    stdio: ['ignore', 'ignore', 'pipe']
  })
  let err = ''
  child.stderr.on('data', (part: Buffer) => (err += part.toString()))
  return new Promise((resolve) => child.once('exit', (code) => resolve({ code, err })))
}
