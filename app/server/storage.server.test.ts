import { createHash, randomBytes } from 'node:crypto'
import { readdir, readFile, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { buffer } from 'node:stream/consumers'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startTestFake, testAccount, type TestFake } from '../../storage-fake/testing'
import { createStorage, objectKey, RangeNotSatisfiable, type Storage, type StorageConfig } from './storage.server'

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

async function read(key: string, range?: { start: number; end?: number }): Promise<Buffer | null> {
  const object = await storage.get(key, range)
  return object && buffer(object.stream)
}

const text = (key: string, content: string) => {
  const body = Buffer.from(content)
  return { key, body, bytes: body.length, contentType: 'text/plain' }
}

describe('objectKey', () => {
  it('files a content under its hash', () => {
    const hash = sha256(Buffer.from('abc'))
    expect(objectKey('bundle', hash)).toBe('bundles/ba/ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad')
    expect(objectKey('picture', hash)).toMatch(/^pictures\/ba\/ba7816bf/)
  })

  it.each(['', 'abc', '../../etc/passwd', 'BA7816BF8F01CFEA414140DE5DAE2223B00361A396177A9CB410FF61F20015AD'])(
    'refuses %j as a hash',
    (name) => {
      expect(() => objectKey('bundle', name)).toThrow(TypeError)
    }
  )
})

describe('storing and reading', () => {
  it('makes the bucket once', async () => {
    const other = open({ bucket: 'made-here' })
    await expect(other.head('x')).resolves.toBeNull()
    await expect(other.putFile(text('x', 'y'))).rejects.toMatchObject({ name: 'NoSuchBucket' })
    await Promise.all([other.ensureBucket(), other.ensureBucket()])
    await other.ensureBucket()
    await expect(other.putFile(text('x', 'y'))).resolves.toBe('stored')
    other.close()
  })

  it('streams a file of several MiB there and back, its hash verified by the server', async () => {
    const data = randomBytes(6 * MiB + 123)
    const path = join(fake.dir, 'upload.bin')
    await writeFile(path, data)
    const key = objectKey('bundle', sha256(data))
    const input = { key, path, bytes: data.length, contentType: 'application/zip', sha256: sha256(data) }
    await expect(storage.putFile({ ...input, ifAbsent: true })).resolves.toBe('stored')
    await expect(storage.putFile({ ...input, ifAbsent: true })).resolves.toBe('already-there')
    await expect(storage.putFile(input)).resolves.toBe('stored')

    const object = await storage.get(key)
    const etag = `"${createHash('md5').update(data).digest('hex')}"`
    expect(object).toMatchObject({
      bytes: data.length,
      totalBytes: data.length,
      contentType: 'application/zip',
      etag,
      range: null
    })
    expect((await buffer(object!.stream)).equals(data)).toBe(true)
    await expect(storage.head(key)).resolves.toMatchObject({ totalBytes: data.length, etag, contentType: 'application/zip' })
  })

  it('refuses bytes that are not those of the stated hash, and stores nothing', async () => {
    const path = join(fake.dir, 'other.bin')
    await writeFile(path, 'not what was hashed')
    const input = { key: 'wrong-hash', path, bytes: 19, contentType: 'text/plain', sha256: sha256(Buffer.from('something else')) }
    await expect(storage.putFile(input)).rejects.toMatchObject({ name: 'XAmzContentSHA256Mismatch' })
    await expect(storage.head('wrong-hash')).resolves.toBeNull()
  })

  it('refuses a length that is not that of the content, and a file that is not there', async () => {
    const path = join(fake.dir, 'short.bin')
    await writeFile(path, 'four')
    await expect(storage.putFile({ key: 'k', path, bytes: 5, contentType: 'text/plain' })).rejects.toThrow('has 4 bytes')
    await expect(storage.putFile({ ...text('k', 'four'), bytes: 5 })).rejects.toThrow('has 4 bytes')
    await expect(
      storage.putFile({ key: 'k', path: join(fake.dir, 'none'), bytes: 4, contentType: 'text/plain' })
    ).rejects.toThrow('ENOENT')
    await expect(storage.putFile({ key: 'k', path: fake.dir, bytes: 4096, contentType: 'text/plain' })).rejects.toThrow()
  })

  it('stores and gives back nothing at all', async () => {
    const path = join(fake.dir, 'empty.bin')
    await writeFile(path, '')
    await storage.putFile({ key: 'empty', path, bytes: 0, contentType: 'text/plain' })
    expect(await read('empty')).toHaveLength(0)
  })

  it('reads ranges, and says when one lies past the end', async () => {
    await storage.putFile(text('digits', '0123456789'))
    const object = await storage.get('digits', { start: 2, end: 4 })
    expect(object).toMatchObject({ bytes: 3, totalBytes: 10, range: { start: 2, end: 4 } })
    expect((await buffer(object!.stream)).toString()).toBe('234')
    expect((await read('digits', { start: 7 }))?.toString()).toBe('789')
    expect((await read('digits', { start: 8, end: 100 }))?.toString()).toBe('89')
    const failure = await storage.get('digits', { start: 10 }).catch((error: unknown) => error)
    expect(failure).toBeInstanceOf(RangeNotSatisfiable)
    expect(failure).toMatchObject({ totalBytes: 10 })
  })

  it('answers null for what is absent, and removes twice without a fuss', async () => {
    await storage.putFile(text('short-lived', 'x'))
    await storage.remove('short-lived')
    await storage.remove('short-lived')
    await expect(storage.get('short-lived')).resolves.toBeNull()
    await expect(storage.head('short-lived')).resolves.toBeNull()
  })

  it.each([
    '../../x',
    '../../../../etc/passwd',
    '%2e%2e/x',
    '/leading',
    'a//b',
    './c',
    'with space',
    'plus+and&',
    'ä ö/日本/🎛',
    "quote'(1)*!~",
    '?q#h',
    'a\\b',
    'é'
  ])('keeps the key %j as it is', async (key) => {
    await storage.putFile(text(key, `content of ${key}`))
    expect((await read(key))?.toString()).toBe(`content of ${key}`)
    expect((await storage.list(key, 10)).objects.map((one) => one.key)).toContain(key)
    await storage.remove(key)
    expect(await storage.head(key)).toBeNull()
  })

  it('of many writers at once exactly one stores, and all read one content', async () => {
    const contents = Array.from({ length: 12 }, (_, i) => `writer ${i} ${'x'.repeat(1000 * i)}`)
    const outcomes = await Promise.all(contents.map((content) => storage.putFile({ ...text('race', content), ifAbsent: true })))
    expect(outcomes.filter((one) => one === 'stored')).toHaveLength(1)
    expect((await read('race'))?.toString()).toBe(contents[outcomes.indexOf('stored')])
    await Promise.all(contents.map((content) => storage.putFile(text('race', content))))
    expect(contents).toContain((await read('race'))?.toString())
  })
})

describe('list', () => {
  it('pages through a prefix', async () => {
    const keys = Array.from({ length: 7 }, (_, i) => `paged/${i}`)
    await Promise.all([...keys, 'page', 'pagee/1'].map((key) => storage.putFile(text(key, key))))
    const found: string[] = []
    const sizes: number[] = []
    for (let after: string | null | undefined; after !== null;) {
      const { objects, next } = await storage.list('paged/', 3, after)
      found.push(...objects.map((one) => one.key))
      sizes.push(objects.length)
      after = next
    }
    expect(found).toEqual(keys)
    expect(sizes).toEqual([3, 3, 1])
    expect((await storage.list('paged/', 1)).objects[0]).toMatchObject({
      bytes: 7,
      etag: `"${createHash('md5').update('paged/0').digest('hex')}"`
    })
    await expect(storage.list('nothing/', 5)).resolves.toEqual({ objects: [], next: null })
    for (const limit of [0, 1001, 1.5]) await expect(storage.list('', limit)).rejects.toThrow(RangeError)
  })
})

describe('presigned addresses', () => {
  it('lets anyone download under a file name', async () => {
    await storage.putFile(text('presigned/a b.txt', 'hello'))
    const url = await storage.presignGet('presigned/a b.txt', 60, 'Prüf "1".txt')
    const answer = await fetch(url)
    expect(answer.status).toBe(200)
    expect(await answer.text()).toBe('hello')
    expect(answer.headers.get('content-disposition')).toBe(
      `attachment; filename="Pr_f _1_.txt"; filename*=UTF-8''Pr%C3%BCf%20%221%22.txt`
    )
    expect((await fetch(await storage.presignGet('presigned/none', 60))).status).toBe(404)
  })

  it('holds to what was signed: key, method, name and time', async () => {
    await storage.putFile(text('presigned/b', 'hello'))
    const url = await storage.presignGet('presigned/b', 60, 'b.txt')
    expect((await fetch(url.replace('presigned/b', 'presigned/c'))).status).toBe(403)
    expect((await fetch(url, { method: 'DELETE' })).status).toBe(403)
    expect((await fetch(url.replace('b.txt', 'c.txt'))).status).toBe(403)
    expect((await fetch(url.replace('X-Amz-Expires=60', 'X-Amz-Expires=600'))).status).toBe(403)
  })

  it('lets anyone upload what was agreed, and nothing else', async () => {
    const body = 'uploaded'
    const put = (url: string, content: string, type: string) =>
      fetch(url, { method: 'PUT', body: content, headers: { 'content-type': type } })
    const url = await storage.presignPut('presigned/up', 60, 'image/png', body.length)
    expect((await put(url, body, 'text/html')).status).toBe(403)
    expect((await put(url, `${body}!`, 'image/png')).status).toBe(403)
    expect(await storage.head('presigned/up')).toBeNull()
    expect((await put(url, body, 'image/png')).status).toBe(200)
    expect(await storage.head('presigned/up')).toMatchObject({ contentType: 'image/png', totalBytes: body.length })
    expect((await put(await storage.presignPut('presigned/any', 60, 'image/png'), 'any length', 'image/png')).status).toBe(200)
  })
})

it('what is stored outlives the server', async () => {
  const first = await startTestFake()
  const writer = createStorage({ ...testAccount, endpoint: first.url })
  await writer.putFile(text('kept/über', 'still here'))
  await first.close()
  const second = await startTestFake({ dir: first.dir })
  const reader = createStorage({ ...testAccount, endpoint: second.url })
  expect((await reader.list('kept/', 5)).objects.map((one) => one.key)).toEqual(['kept/über'])
  expect((await buffer((await reader.get('kept/über'))!.stream)).toString()).toBe('still here')
  await expect(reader.putFile({ ...text('kept/über', 'other'), ifAbsent: true })).resolves.toBe('already-there')
  const files = await readdir(join(second.dir, 'buckets', testAccount.bucket, 'objects'), {
    recursive: true,
    withFileTypes: true
  })
  const file = files.find((one) => one.isFile())!
  expect((await readFile(join(file.parentPath, file.name))).subarray(0, 10).toString()).toBe('still here')
  writer.close()
  reader.close()
  await second.stop()
})
