import { execFile } from 'node:child_process'
import { createRequire } from 'node:module'
import { fileURLToPath, pathToFileURL } from 'node:url'
import { describe, expect, it } from 'vitest'
import { Readable } from 'node:stream'
import { runFettle } from './run-fettle'

const root = fileURLToPath(new URL('../../', import.meta.url))
const bundle = `${root}db/seed/bundles/almanac-1.0.1.zip`

/** Runs the command line as `npm run fettle` does, as a process of its own. */
function fettle(...args: string[]): Promise<{ code: number; out: string; err: string }> {
  const tsx = pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href
  return new Promise((resolve) => {
    execFile(process.execPath, ['--import', tsx, 'app/cli/fettle.ts', ...args], { cwd: root }, (error, out, err) => {
      resolve({ code: error ? Number(error.code) : 0, out, err })
    })
  })
}

/** Runs it in this process, for the many ways to get the arguments wrong. */
async function run(...args: string[]) {
  let out = ''
  let err = ''
  const code = await runFettle(args, { out: (text) => (out += text), err: (text) => (err += text), stdin: Readable.from([]) })
  return { code, out, err }
}

describe('the command line', () => {
  it('prints the answer of a check and exits with 0, also when there is a stop', async () => {
    const { code, out, err } = await fettle('check', bundle, '--layers', '4', '--thickness', '1.0')
    expect([code, err]).toEqual([0, ''])
    expect(JSON.parse(out)).toMatchObject({
      ok: false,
      facts: { width: 24 },
      findings: [{ code: 'layer-count', severity: 'stop' }]
    })
  })

  it('exits with 2 and a problem object on standard error', async () => {
    const { code, out, err } = await fettle('check', 'no-such-file.zip')
    expect([code, out]).toEqual([2, ''])
    expect(JSON.parse(err)).toMatchObject({
      type: expect.any(String),
      title: expect.any(String),
      status: 404,
      errors: [{ path: 'file' }]
    })
  })

  it.each([
    [[], 'Name a command'],
    [['nonsense'], 'There is no command "nonsense"'],
    [['check'], 'One zip file'],
    [['check', 'a.zip', 'b.zip'], 'One zip file'],
    [['check', bundle, '--colour', 'red'], '--colour'],
    [['check', bundle, '--layers', 'two'], '--layers takes a whole number'],
    [['check', bundle, '--layers', '0'], '--layers takes a whole number'],
    [['check', bundle, '--layers', '2.5'], '--layers takes a whole number'],
    [['check', bundle, '--thickness', '-1'], '--thickness'],
    [['check', root], 'is no file']
  ])('refuses %j', async (args, detail) => {
    const { code, out, err } = await run(...args)
    expect([code, out]).toEqual([2, ''])
    const problem = JSON.parse(err) as { status: number; detail: string }
    expect(problem.detail).toContain(detail)
    expect(problem.status).toBeGreaterThanOrEqual(400)
  })

  it('lists its commands', async () => {
    const { code, out } = await run('--help')
    expect(code).toBe(0)
    expect(out).toContain('fettle check FILE.zip')
  })
})
