import { spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterEach, describe, expect, it } from 'vitest'
import { send } from './testing'

const main = fileURLToPath(new URL('main.ts', import.meta.url))
const children: ChildProcess[] = []
const folders: string[] = []

async function start(env: Record<string, string>) {
  const dir = await mkdtemp(join(tmpdir(), 'storage-main-'))
  folders.push(dir)
  const child = spawn(process.execPath, ['--import', 'tsx', main], { env: { ...process.env, STORAGE_FAKE_DIR: dir, ...env } })
  children.push(child)
  const text = { out: '', error: '' }
  child.stdout.on('data', (piece) => (text.out += String(piece)))
  child.stderr.on('data', (piece) => (text.error += String(piece)))
  return { child, text, ended: once(child, 'exit') as Promise<[number | null]> }
}

afterEach(async () => {
  for (const child of children.splice(0)) if (child.exitCode === null) child.kill('SIGKILL')
  for (const folder of folders.splice(0)) await rm(folder, { recursive: true, force: true })
})

describe('the server as a process', () => {
  it('says where it listens, without its secret, and stops when told', async () => {
    const { child, text, ended } = await start({ STORAGE_FAKE_PORT: '0' })
    await expect.poll(() => text.out, { timeout: 20_000 }).toContain('\n')
    const said = JSON.parse(text.out) as { listening: string }
    expect(said).toEqual({
      listening: expect.stringMatching(/^http:\/\/127\.0\.0\.1:\d+$/),
      region: 'us-east-1',
      bucket: 'fettle',
      accessKeyId: 'fettle-demo'
    })
    expect(await send(said.listening, 'GET', '/fettle/x')).toMatchObject({ status: 403, code: 'AccessDenied' })
    child.kill('SIGTERM')
    expect((await ended)[0]).toBe(0)
  })

  it.each([
    [{ STORAGE_FAKE_PORT: 'http' }, 'STORAGE_FAKE_PORT'],
    [{ STORAGE_FAKE_HOST: '0.0.0.0' }, 'STORAGE_FAKE_SECRET_ACCESS_KEY']
  ])('does not start with %j', async (env, named) => {
    const { text, ended } = await start(env as Record<string, string>)
    expect((await ended)[0]).toBe(1)
    expect(text.error).toContain(named)
    expect(text.out).toBe('')
  })
})
