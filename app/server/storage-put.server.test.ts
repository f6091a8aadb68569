import { createHash, randomBytes } from 'node:crypto'
import { readdir, writeFile } from 'node:fs/promises'
import { createServer, type RequestListener, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import { buffer } from 'node:stream/consumers'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DomainError } from '~/lib/domain-error'
import { startTestFake, testAccount, type TestFake } from '../../storage-fake/testing'
import { createStorage, type Storage, type StorageConfig } from './storage.server'

const MiB = 1024 ** 2
const sha256 = (data: Uint8Array) => createHash('sha256').update(data).digest('hex')

let fake: TestFake
let storage: Storage
const open = (changes: Partial<StorageConfig> = {}): Storage => createStorage({ ...testAccount, endpoint: fake.url, ...changes })

beforeAll(async () => {
  fake = await startTestFake()
  storage = open()
})
afterAll(async () => {
  storage.close()
  await fake.stop()
})

const read = async (key: string): Promise<Buffer> => buffer((await storage.get(key))!.stream)

const text = (key: string, content: string) => {
  const body = Buffer.from(content)
  return { key, body, bytes: body.length, contentType: 'text/plain' }
}

describe('putStream', () => {
  /** Pieces of odd sizes, so that they never meet the parts' borders. */
  async function* pieces(data: Buffer, size = 77_777) {
    for (let at = 0; at < data.length; at += size) yield data.subarray(at, at + size)
  }
  const input = (key: string, stream: Readable | ReadableStream<Uint8Array>) => ({
    key,
    stream,
    contentType: 'application/zip',
    maxBytes: 64 * MiB,
    partBytes: 5 * MiB
  })
  const uploadsLeft = async () => readdir(join(fake.dir, 'buckets', testAccount.bucket, 'uploads'))

  it.each([0, 1, 5 * MiB - 1, 5 * MiB, 10 * MiB, 11 * MiB + 5])('stores a stream of %i bytes', async (size) => {
    const data = randomBytes(size)
    await expect(storage.putStream(input('stream', Readable.from(pieces(data))))).resolves.toEqual({
      outcome: 'stored',
      bytes: size,
      sha256: sha256(data)
    })
    expect((await read('stream')).equals(data)).toBe(true)
    const { etag, contentType } = (await storage.head('stream'))!
    expect(etag.includes('-')).toBe(size >= 5 * MiB)
    expect(contentType).toBe('application/zip')
    expect(await uploadsLeft()).toEqual([])
  })

  it('takes a web stream, and keeps what is there when asked', async () => {
    const data = randomBytes(6 * MiB)
    const web = () => Readable.toWeb(Readable.from(pieces(data))) as ReadableStream<Uint8Array>
    await expect(storage.putStream({ ...input('web', web()), ifAbsent: true })).resolves.toMatchObject({
      outcome: 'stored',
      sha256: sha256(data)
    })
    await expect(storage.putStream({ ...input('web', web()), ifAbsent: true })).resolves.toMatchObject({
      outcome: 'already-there'
    })
    expect(await uploadsLeft()).toEqual([])
  })

  it('leaves no parts behind when the stream is too long or fails', async () => {
    const long = storage.putStream({ ...input('never', Readable.from(pieces(randomBytes(8 * MiB)))), maxBytes: 7 * MiB })
    await expect(long).rejects.toBeInstanceOf(DomainError)
    await expect(long).rejects.toMatchObject({ kind: 'too-large' })
    const failing = Readable.from(
      (async function* () {
        yield randomBytes(6 * MiB)
        throw new Error('the line went dead')
      })()
    )
    await expect(storage.putStream(input('never', failing))).rejects.toThrow('the line went dead')
    expect(await uploadsLeft()).toEqual([])
    expect(await storage.head('never')).toBeNull()
  })

  it('lets go of the stream when storage refuses', async () => {
    const stranger = open({ secretAccessKey: 'wrong' })
    const source = Readable.from(pieces(randomBytes(7 * MiB)))
    await expect(stranger.putStream(input('never', source))).rejects.toMatchObject({ name: 'SignatureDoesNotMatch' })
    expect(source.destroyed).toBe(true)
    stranger.close()
  })
})

describe('refusals and trouble', () => {
  it.each([
    ['a wrong secret', { secretAccessKey: 'wrong' }, 'SignatureDoesNotMatch'],
    ['an unknown key', { accessKeyId: 'nobody' }, 'InvalidAccessKeyId'],
    ['an absent bucket', { bucket: 'absent' }, 'NoSuchBucket']
  ])('%s is thrown by its name', async (_what, changes, name) => {
    const stranger = open(changes)
    await expect(stranger.putFile(text('k', 'v'))).rejects.toMatchObject({ name })
    await expect(stranger.list('', 1)).rejects.toMatchObject({ name })
    stranger.close()
  })

  /** A server that does what the test says, for what a correct one never does. */
  async function withServer<T>(handler: RequestListener, run: (url: string, server: Server) => Promise<T>): Promise<T> {
    const server = createServer(handler)
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
    try {
      return await run(`http://127.0.0.1:${(server.address() as AddressInfo).port}`, server)
    } finally {
      server.closeAllConnections()
      await new Promise((resolve) => server.close(resolve))
    }
  }

  it('tries a file again, from its beginning, when the server is faulty; not for ever', async () => {
    const path = join(fake.dir, 'again.bin')
    const data = randomBytes(200_000)
    await writeFile(path, data)
    const seen: string[] = []
    const failing = (times: number): RequestListener => {
      return async (request, response) => {
        seen.push(sha256(await buffer(request)))
        response.writeHead(seen.length <= times ? 503 : 200).end()
      }
    }
    const input = { key: 'k', path, bytes: data.length, contentType: 'text/plain' }
    await withServer(failing(1), async (url) => {
      await expect(open({ endpoint: url }).putFile(input)).resolves.toBe('stored')
    })
    expect(seen).toEqual([sha256(data), sha256(data)])
    seen.length = 0
    await withServer(failing(99), async (url) => {
      await expect(open({ endpoint: url, attempts: 2 }).putFile(input)).rejects.toMatchObject({
        $metadata: { httpStatusCode: 503 }
      })
    })
    expect(seen).toHaveLength(2)
  })

  it('gives up on a server that never answers', async () => {
    let calls = 0
    const handler = () => void calls++
    await withServer(handler, async (url) => {
      const silent = open({ endpoint: url, attempts: 2, timeouts: { answerMs: 200 } })
      await expect(silent.head('k')).rejects.toMatchObject({ name: 'TimeoutError' })
    })
    expect(calls).toBe(2)
  })

  it('closes the connection when a reader goes away', async () => {
    const closed: string[] = []
    const endless: RequestListener = (request, response) => {
      response.writeHead(200, { 'content-length': String(1024 * MiB), etag: '"e"', 'last-modified': new Date().toUTCString() })
      const more = () => {
        while (response.write(Buffer.alloc(65_536)));
      }
      response.on('drain', more)
      response.on('error', () => undefined)
      request.socket.on('close', () => closed.push(request.url!))
      more()
    }
    await withServer(endless, async (url, server) => {
      const reader = open({ endpoint: url })
      const destroyed = await reader.get('destroyed')
      destroyed!.stream.destroy()
      await expect.poll(() => closed.length).toBe(1)

      const cancelled = Readable.toWeb((await reader.get('cancelled'))!.stream).getReader()
      await cancelled.read()
      await cancelled.cancel()
      await expect.poll(() => closed.length).toBe(2)

      const abort = new AbortController()
      const aborted = (await reader.get('aborted', undefined, abort.signal))!.stream
      abort.abort()
      await expect(buffer(aborted)).rejects.toThrow()
      await expect.poll(() => closed.length).toBe(3)
      await expect.poll(() => new Promise((resolve) => server.getConnections((_error, count) => resolve(count)))).toBe(0)
    })
  })
})
