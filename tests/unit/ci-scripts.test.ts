import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, symlinkSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
// @ts-expect-error a plain module that runs before anything is installed, hence without types
import { countReport } from '../../.ci/count-report.mjs'

const folder = mkdtempSync(join(tmpdir(), 'fettle-ci-'))
afterAll(() => rmSync(folder, { recursive: true }))

/** Runs one of the scripts to its end; each of these cases ends before anything is installed, built or started. */
function runScript(name: 'demo' | 'verify', env: Record<string, string>) {
  const { status, stdout, stderr } = spawnSync(process.execPath, [`.ci/${name}.mjs`], {
    env: { PATH: process.env.PATH, DATA_DIR: join(folder, 'data'), ...env },
    encoding: 'utf8',
    timeout: 20_000
  })
  return { status, out: stdout.trim(), err: stderr.trim() }
}

/** A PATH on which there is nothing but these commands. */
function pathWith(...commands: string[]): string {
  const dir = mkdtempSync(join(folder, 'path-'))
  for (const command of commands) {
    const found = spawnSync('sh', ['-c', `command -v ${command}`], { encoding: 'utf8' }).stdout.trim()
    symlinkSync(found, join(dir, command))
  }
  return dir
}

describe('the set-up', () => {
  it.each(['demo', 'verify'] as const)(
    'of %s says in one sentence which packages are missing, before anything starts',
    (name) => {
      const { status, out, err } = runScript(name, { PATH: pathWith('node', 'npm', 'git') })
      expect(status).toBe(1)
      expect(out).toBe('')
      expect(err).toMatch(/^Missing: python3, make, a C\+\+ compiler\..*`build-essential python3`/)
      expect(err.split('\n')).toHaveLength(1)
    }
  )

  it('says that git is missing', () => {
    const { status, err } = runScript('demo', { PATH: pathWith('node', 'npm') })
    expect([status, err]).toEqual([1, 'Fettle needs git, which is not on the PATH.'])
  })

  it('says that the port is taken', async () => {
    const server = createServer()
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
    const { port } = server.address() as AddressInfo
    try {
      const { status, err } = runScript('demo', { PORT: String(port) })
      expect(status).toBe(1)
      expect(err).toContain(`Port ${port} is taken`)
      expect(err.split('\n')).toHaveLength(1)
    } finally {
      server.close()
    }
  })

  it.each(['http', '70000', '-1', '3e3'])('refuses the port %s', (port) => {
    const { status, err } = runScript('demo', { PORT: port })
    expect([status, err]).toEqual([1, `PORT must be a port number, not "${port}".`])
  })
})

describe('counting vitest’s report', () => {
  const test = (status: string, fullName = 'a b') => ({
    status,
    fullName,
    failureMessages: status === 'failed' ? ['Error: no\n at x'] : []
  })

  it('counts passed, failed and skipped tests', () => {
    const report = {
      testResults: [
        {
          name: '/p/a.test.ts',
          status: 'failed',
          message: '',
          assertionResults: [test('passed'), test('failed', 'one fails'), test('skipped')]
        },
        { name: '/p/b.test.ts', status: 'passed', message: '', assertionResults: [test('passed'), test('todo')] }
      ]
    }
    expect(countReport(report, '/p')).toEqual({
      passed: 2,
      failed: 1,
      skipped: 2,
      failures: ['a.test.ts: one fails\n    Error: no\n     at x']
    })
  })

  it('counts a file that could not be run, and one whose set-up failed after its tests', () => {
    const report = {
      testResults: [
        { name: '/p/a.test.ts', status: 'failed', message: 'no such module', assertionResults: [] },
        { name: '/p/b.test.ts', status: 'failed', message: 'afterAll broke', assertionResults: [test('passed')] }
      ]
    }
    expect(countReport(report, '/p')).toMatchObject({
      passed: 1,
      failed: 2,
      failures: ['a.test.ts: no such module', 'b.test.ts: afterAll broke']
    })
  })
})
