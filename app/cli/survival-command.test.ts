import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import { afterAll, describe, expect, test } from 'vitest'
import { runFettle } from './run-fettle'

const folder = mkdtempSync(join(tmpdir(), 'fettle-survival-'))
afterAll(() => rmSync(folder, { recursive: true }))

async function run(args: string[], stdin = '') {
  let out = ''
  let err = ''
  const io = {
    out: (text: string) => void (out += text),
    err: (text: string) => void (err += text),
    stdin: Readable.from([Buffer.from(stdin)])
  }
  const code = await runFettle(['survival', ...args], io)
  return { code, out, err }
}

const file = (name: string, content: string | Buffer) => {
  writeFileSync(join(folder, name), content)
  return join(folder, name)
}

const request = JSON.stringify({
  observations: [
    { time: 6, event: 1 },
    { time: 9, event: 0 }
  ]
})

describe('survival FILE', () => {
  test('prints the answer of a file or of standard input, exit 0', async () => {
    const fromFile = await run([file('good.json', request)])
    expect(fromFile).toMatchObject({ code: 0, err: '' })
    expect(JSON.parse(fromFile.out)).toMatchObject({ method: 'kaplan-meier', groups: [{ n: 2, events: 1 }], logRank: null })
    expect(await run(['-'], request)).toEqual(fromFile)
    // A byte order mark, as some editors write it.
    expect(await run(['-'], `\uFEFF${request}`)).toEqual(fromFile)
  })

  test.each<[string, () => string[], string, number]>([
    ['no file named', () => [], '', 400],
    ['two files named', () => ['a', 'b'], '', 400],
    ['an unknown option', () => ['--fast'], '', 400],
    ['a file that is not there', () => [join(folder, 'none.json')], '', 400],
    ['a folder', () => [folder], '', 400],
    ['no JSON', () => ['-'], '{"observations": [', 400],
    ['nothing', () => ['-'], '', 400],
    ['no UTF-8', () => [file('latin.json', Buffer.from([0x22, 0xe9, 0x22]))], '', 400],
    ['a negative time', () => ['-'], '{"observations": [{"time": -1, "event": 0}]}', 400],
    ['entry = exit', () => ['-'], '{"observations": [{"time": 5, "entry": 5, "event": 0}]}', 422],
    ['too large', () => ['-'], ' '.repeat(16 * 1024 * 1024 + 1), 413]
  ])('bad input: %s: a problem object on standard error, exit 2', async (_what, args, stdin, status) => {
    const { code, out, err } = await run(args(), stdin)
    expect({ code, out }).toEqual({ code: 2, out: '' })
    expect(JSON.parse(err)).toMatchObject({
      status,
      type: expect.any(String),
      title: expect.any(String),
      detail: expect.any(String),
      errors: expect.any(Array)
    })
  })
})
