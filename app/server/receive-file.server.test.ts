import { createHash, randomBytes } from 'node:crypto'
import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { receiveFile } from './receive-file.server'

const boundary = 'frontier7'
const head = (name: string, filename: string) =>
  `--${boundary}\r\nContent-Disposition: form-data; name="${name}"; filename="${filename}"\r\nContent-Type: application/zip\r\n\r\n`
const tail = `\r\n--${boundary}--\r\n`

let dir: string
beforeEach(() => (dir = mkdtempSync(join(tmpdir(), 'fettle-receive-'))))
afterEach(() => rmSync(dir, { recursive: true, force: true }))

/** A request whose body comes in these pieces; an Error among them breaks it off there. */
function request(pieces: (string | Buffer | Error)[], headers: Record<string, string> = {}) {
  let i = 0
  const body = new ReadableStream<Uint8Array>({
    pull(controller) {
      const piece = pieces[i++]
      if (piece === undefined) controller.close()
      else if (piece instanceof Error) controller.error(piece)
      else controller.enqueue(Buffer.from(piece as string))
    }
  })
  return new Request('http://localhost/x', {
    method: 'POST',
    body,
    duplex: 'half',
    headers: { 'Content-Type': `multipart/form-data; boundary=${boundary}`, ...headers }
  } as RequestInit)
}
const receive = (r: Request, max = 1024 * 1024) => receiveFile(r, 'bundle', dir, max)

describe('receiveFile', () => {
  it('keeps the bytes and their hash, whatever the pieces', async () => {
    const content = randomBytes(300_000)
    const whole = Buffer.concat([Buffer.from(head('bundle', 'a.zip')), content, Buffer.from(tail)])
    const pieces: Buffer[] = []
    for (let at = 0; at < whole.length; at += 7_777) pieces.push(whole.subarray(at, at + 7_777))
    const file = await receive(request(pieces))
    expect(file).toMatchObject({ bytes: 300_000, name: 'a.zip', sha256: createHash('sha256').update(content).digest('hex') })
    expect(readFileSync(file.path).equals(content)).toBe(true)
    expect(readdirSync(dir)).toHaveLength(1)
  })

  it('takes a file of exactly the limit', async () => {
    const file = await receive(request([head('bundle', 'a.zip'), Buffer.alloc(5000, 1), tail]), 5000)
    expect(file.bytes).toBe(5000)
  })

  it.each([
    ['past the limit', [head('bundle', 'a.zip'), Buffer.alloc(5001, 1), tail], {}, 'too-large'],
    ['announced past the limit', [head('bundle', 'a.zip')], { 'Content-Length': '999999' }, 'too-large'],
    ['a body without end', [head('bundle', 'a.zip'), ...Array.from({ length: 100 }, () => Buffer.alloc(4096))], {}, 'too-large'],
    [
      'slack of other parts',
      [head('other', 'b'), ...Array.from({ length: 100 }, () => Buffer.alloc(4096)), tail],
      {},
      'too-large'
    ],
    ['cut in the file', [head('bundle', 'a.zip'), Buffer.alloc(100)], {}, 'invalid'],
    ['cut in a head', [head('bundle', 'a.zip').slice(0, 40)], {}, 'invalid'],
    ['a connection that breaks', [head('bundle', 'a.zip'), Buffer.alloc(100), new Error('aborted')], {}, 'invalid'],
    ['nothing', [], {}, 'invalid'],
    ['an empty file', [head('bundle', ''), tail], {}, 'invalid'],
    ['another field', [head('picture', 'a.zip'), 'x', tail], {}, 'invalid'],
    ['no form', ['PK'], { 'Content-Type': 'application/zip' }, 'wrong-type'],
    ['no boundary', ['PK'], { 'Content-Type': 'multipart/form-data' }, 'wrong-type']
  ])('refuses %s and leaves nothing behind', async (_, pieces, headers, kind) => {
    await expect(receive(request(pieces, headers), 5000)).rejects.toMatchObject({ name: 'DomainError', kind })
    expect(readdirSync(dir)).toEqual([])
  })

  it('never takes a path from the client', async () => {
    const file = await receive(request([head('bundle', '../../etc/passwd\u202e'), 'x', tail]))
    expect(file.path.startsWith(dir)).toBe(true)
    expect(file.name).toBe('passwd')
  })

  it('keeps the first of two files with the field’s name', async () => {
    const file = await receive(request([head('bundle', 'a.zip'), 'first', '\r\n', head('bundle', 'b.zip'), 'second', tail]))
    expect(readFileSync(file.path, 'utf8')).toBe('first')
  })
})
