import { createHash, randomBytes } from 'node:crypto'
import { readdir } from 'node:fs/promises'
import { request as httpRequest } from 'node:http'
import { connect } from 'node:net'
import { join } from 'node:path'
import { Readable } from 'node:stream'
import { GetObjectCommand, PutObjectCommand, S3Client } from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { checksumHeader, checksumNames, startChecksum } from './checksums'
import { chunkStringToSign, sha256Hex, sign, signingKey, trailerStringToSign } from './signature'
import { send, sendSigned, signedHeaders, startTestFake, testAccount, type Answer, type TestFake } from './testing'

let fake: TestFake
/** The SDK as it comes: chunked framing and a checksum in the trailer, which our own client turns off. */
let plainClient: S3Client
const Bucket = testAccount.bucket
const objectBytes = 300_000
const at = (key: string) => `/${Bucket}/${key}`
const put = (headers: Record<string, string>, body: Buffer | string = 'content', payload?: string): Promise<Answer> =>
  sendSigned(fake.url, 'PUT', at('target'), headers, body, payload)
const unsigned = 'UNSIGNED-PAYLOAD'

beforeAll(async () => {
  fake = await startTestFake({ limits: { objectBytes } })
  plainClient = new S3Client({
    endpoint: fake.url,
    region: testAccount.region,
    credentials: testAccount,
    forcePathStyle: true,
    maxAttempts: 1
  })
})
afterAll(async () => {
  plainClient.destroy()
  await fake.stop()
})

const isStored = async (key = 'target') => (await sendSigned(fake.url, 'HEAD', at(key))).status === 200
afterEach(async () => {
  await sendSigned(fake.url, 'DELETE', at('target'))
  await expect.poll(() => readdir(join(fake.dir, 'buckets', Bucket, 'temporary'))).toEqual([])
})

function checksum(name: (typeof checksumNames)[number], body: string | Buffer): string {
  const digester = startChecksum(name)
  digester.update(Buffer.from(body))
  return digester.digest().toString('base64')
}

describe('what is stated about a body is verified', () => {
  it('the payload hash', async () => {
    const answer = await put({}, 'tampered', sha256Hex('original'))
    expect(answer).toMatchObject({ status: 400, code: 'XAmzContentSHA256Mismatch' })
    expect(await isStored()).toBe(false)
    expect((await put({}, 'content', 'nonsense')).code).toBe('InvalidArgument')
    expect((await put({}, 'content', unsigned)).status).toBe(200)
  })

  it('Content-MD5', async () => {
    const md5 = (text: string) => createHash('md5').update(text).digest('base64')
    expect((await put({ 'content-md5': md5('other') })).code).toBe('BadDigest')
    expect((await put({ 'content-md5': 'AAAA' })).code).toBe('InvalidDigest')
    expect((await put({ 'content-md5': 'not base64' })).code).toBe('InvalidDigest')
    expect(await isStored()).toBe(false)
    expect((await put({ 'content-md5': md5('content') })).status).toBe(200)
  })

  it.each(checksumNames)('x-amz-checksum-%s, which is then given back on demand', async (name) => {
    const header = checksumHeader(name)
    const right = checksum(name, 'content')
    expect((await put({ [header]: checksum(name, 'other') })).code).toBe('BadDigest')
    expect((await put({ [header]: 'AAAA' })).code).toBe('InvalidRequest')
    expect(await isStored()).toBe(false)
    expect((await put({ [header]: right })).headers[header]).toBe(right)
    expect((await sendSigned(fake.url, 'GET', at('target'), { 'x-amz-checksum-mode': 'ENABLED' })).headers[header]).toBe(right)
    expect((await sendSigned(fake.url, 'GET', at('target'))).headers[header]).toBeUndefined()
  })

  it('one checksum at a time, and one that is announced must come', async () => {
    const both = { 'x-amz-checksum-crc32': checksum('crc32', 'content'), 'x-amz-checksum-sha1': checksum('sha1', 'content') }
    expect((await put(both)).code).toBe('InvalidRequest')
    expect((await put({ 'x-amz-sdk-checksum-algorithm': 'CRC32' })).code).toBe('InvalidRequest')
    expect((await put({ 'x-amz-trailer': 'x-amz-checksum-crc32' })).code).toBe('InvalidRequest')
  })

  it('its length', async () => {
    expect((await put({}, randomBytes(objectBytes + 1))).code).toBe('EntityTooLarge')
    expect((await put({}, randomBytes(objectBytes))).status).toBe(200)
    const chunked = signedHeaders(fake.url, 'PUT', at('k'), { 'transfer-encoding': 'chunked' }, unsigned)
    expect(await send(fake.url, 'PUT', at('k'), chunked, 'content')).toMatchObject({ status: 501, code: 'NotImplemented' })
    const none = await rawPut(signedHeaders(fake.url, 'PUT', at('k'), {}, unsigned), '')
    expect(none).toContain('<Code>MissingContentLength</Code>')
  })

  it('a body that breaks off leaves nothing behind', async () => {
    const headers = signedHeaders(fake.url, 'PUT', at('target'), { 'content-length': '200000' }, unsigned)
    const request = httpRequest(new URL(fake.url), { method: 'PUT', path: at('target'), headers, agent: false })
    const gone = new Promise((resolve) => request.on('error', resolve))
    request.write(randomBytes(100_000), () => request.destroy(new Error('gone')))
    await gone
    expect(await isStored()).toBe(false)
  })
})

/** Sends a request by hand and gives the answer's text. */
function rawPut(headers: Record<string, string>, body: string): Promise<string> {
  const { hostname, port } = new URL(fake.url)
  return new Promise((resolve, reject) => {
    const socket = connect(Number(port), hostname)
    let text = ''
    socket.on('data', (piece) => (text += piece.toString('latin1')))
    socket.on('end', () => resolve(text))
    socket.on('error', reject)
    const lines = Object.entries({ ...headers, connection: 'close' }).map(([name, value]) => `${name}: ${value}\r\n`)
    socket.write(`PUT ${at('k')} HTTP/1.1\r\n${lines.join('')}\r\n${body}`)
  })
}

describe('Expect: 100-continue', () => {
  const ask = (extra: Record<string, string>): Promise<{ status: number; isInvited: boolean }> =>
    new Promise((resolve, reject) => {
      const body = randomBytes(1000)
      const headers = signedHeaders(
        fake.url,
        'PUT',
        at('target'),
        { 'content-length': '1000', expect: '100-continue', ...extra },
        unsigned
      )
      const request = httpRequest(new URL(fake.url), { method: 'PUT', path: at('target'), headers, agent: false })
      let isInvited = false
      request.on('continue', () => {
        isInvited = true
        request.end(body)
      })
      request.on('response', (response) => {
        response.resume()
        resolve({ status: response.statusCode!, isInvited })
        if (!isInvited) request.destroy()
      })
      request.on('error', reject)
      request.flushHeaders()
    })

  it('invites a body that will be taken, and refuses another one before it is sent', async () => {
    await expect(ask({})).resolves.toEqual({ status: 200, isInvited: true })
    await expect(ask({ 'if-none-match': '*' })).resolves.toEqual({ status: 412, isInvited: false })
    await expect(ask({ 'content-length': String(objectBytes + 1) })).resolves.toEqual({ status: 400, isInvited: false })
  })
})

describe('chunked bodies', () => {
  it('of the SDK as it comes are decoded, with their checksum', async () => {
    const data = randomBytes(200_000)
    for (const Body of [data, Readable.from([data.subarray(0, 100_000), data.subarray(100_000)])]) {
      const input = { Bucket, Key: 'target', Body, ContentLength: data.length, ChecksumAlgorithm: 'CRC32C' as const }
      await plainClient.send(new PutObjectCommand(input))
      const got = await plainClient.send(new GetObjectCommand({ Bucket, Key: 'target' }))
      expect(Buffer.from(await got.Body!.transformToByteArray()).equals(data)).toBe(true)
      expect(got.ContentEncoding).toBeUndefined()
    }
  })

  type Shape = {
    chunks: Buffer[]
    trailer?: string
    decoded?: number
    isUnsigned?: boolean
    tamper?: (body: Buffer) => Buffer
    headers?: Record<string, string>
  }

  /** Frames, signs and sends an upload in chunks. */
  function sendChunks({ chunks, trailer, decoded, isUnsigned, tamper = (body) => body, headers = {} }: Shape): Promise<Answer> {
    const payload = isUnsigned
      ? 'STREAMING-UNSIGNED-PAYLOAD-TRAILER'
      : `STREAMING-AWS4-HMAC-SHA256-PAYLOAD${trailer === undefined ? '' : '-TRAILER'}`
    const size = decoded ?? chunks.reduce((sum, one) => sum + one.length, 0)
    const stated: Record<string, string> = {
      'content-encoding': 'aws-chunked',
      'x-amz-decoded-content-length': String(size),
      ...headers
    }
    if (trailer !== undefined) stated['x-amz-trailer'] = 'x-amz-checksum-crc32'
    const head = signedHeaders(fake.url, 'PUT', at('target'), stated, payload)
    const when = head['x-amz-date']!
    const scope = `${when.slice(0, 8)}/${testAccount.region}/s3/aws4_request`
    const key = signingKey(testAccount.secretAccessKey, when.slice(0, 8), testAccount.region, 's3')
    let previous = head.authorization!.slice(-64)
    const framed = [...chunks, Buffer.alloc(0)].map((data) => {
      previous = sign(key, chunkStringToSign(when, scope, previous, sha256Hex(data)))
      const line = isUnsigned ? '' : `;chunk-signature=${previous}`
      return Buffer.concat([
        Buffer.from(`${data.length.toString(16)}${line}\r\n`),
        data,
        Buffer.from(data.length > 0 ? '\r\n' : '')
      ])
    })
    let end = ''
    if (trailer !== undefined) {
      end = `x-amz-checksum-crc32:${trailer}\r\n`
      if (!isUnsigned)
        end += `x-amz-trailer-signature:${sign(key, trailerStringToSign(when, scope, previous, `x-amz-checksum-crc32:${trailer}\n`))}\r\n`
    }
    const body = tamper(Buffer.concat([...framed, Buffer.from(`${end}\r\n`)]))
    return send(fake.url, 'PUT', at('target'), { ...head, 'content-length': String(body.length) }, body)
  }

  const chunks = [randomBytes(10_000), randomBytes(8192), randomBytes(5)]
  const whole = Buffer.concat(chunks)
  const flipAt = (position: number) => (body: Buffer) => {
    const other = Buffer.from(body)
    other[position]! ^= 1
    return other
  }

  it('signed, with and without trailer, and unsigned with trailer, are stored as their content', async () => {
    for (const shape of [{}, { trailer: checksum('crc32', whole) }, { trailer: checksum('crc32', whole), isUnsigned: true }]) {
      expect((await sendChunks({ chunks, ...shape, headers: { 'content-encoding': 'gzip,aws-chunked' } })).status).toBe(200)
      const got = await sendSigned(fake.url, 'GET', at('target'))
      expect(got.body.equals(whole)).toBe(true)
      expect(got.headers['content-encoding']).toBe('gzip')
    }
  })

  it.each<[string, Shape, string]>([
    ['a byte changed', { chunks, tamper: flipAt(500) }, 'SignatureDoesNotMatch'],
    [
      'a byte changed in an unsigned body',
      { chunks, trailer: checksum('crc32', whole), isUnsigned: true, tamper: flipAt(500) },
      'BadDigest'
    ],
    ['a wrong checksum in the trailer', { chunks, trailer: checksum('crc32', 'other') }, 'BadDigest'],
    ['rubbish for a checksum', { chunks, trailer: 'rubbish' }, 'InvalidRequest'],
    ['fewer bytes than stated', { chunks, decoded: whole.length + 1 }, 'IncompleteBody'],
    ['more bytes than stated', { chunks, decoded: whole.length - 1 }, 'IncompleteBody'],
    ['a small chunk in the middle', { chunks: [chunks[2]!, chunks[0]!] }, 'InvalidChunkSizeError'],
    ['more than is allowed', { chunks, decoded: objectBytes + 1 }, 'EntityTooLarge'],
    ['no stated size', { chunks, headers: { 'x-amz-decoded-content-length': '' } }, 'MissingContentLength'],
    ['no frames', { chunks, tamper: () => Buffer.from('just text, no frames\r\n') }, 'InvalidRequest'],
    ['an endless line', { chunks, tamper: () => Buffer.alloc(5000, '0') }, 'InvalidRequest'],
    ['an early end', { chunks, tamper: (body) => body.subarray(0, 9000) }, 'IncompleteBody']
  ])('with %s are refused', async (_what, shape, code) => {
    expect((await sendChunks(shape)).code).toBe(code)
    expect(await isStored()).toBe(false)
  })

  it('in a form that is not implemented, or framed without saying so, are refused', async () => {
    expect((await put({}, 'x', 'STREAMING-AWS4-ECDSA-P256-SHA256-PAYLOAD')).code).toBe('NotImplemented')
    expect((await put({ 'content-encoding': 'aws-chunked' }, 'x', unsigned)).code).toBe('InvalidRequest')
  })
})

describe('time', () => {
  it('a presigned address ends', async () => {
    let now = new Date()
    const other = await startTestFake({ now: () => now })
    const client = new S3Client({
      endpoint: other.url,
      region: testAccount.region,
      credentials: testAccount,
      forcePathStyle: true
    })
    const url = await getSignedUrl(client, new GetObjectCommand({ Bucket, Key: 'k' }), { expiresIn: 60 })
    expect((await fetch(url)).status).toBe(404)
    now = new Date(now.getTime() + 62_000)
    const late = await fetch(url)
    expect(late.status).toBe(403)
    expect(await late.text()).toContain('<Message>Request has expired</Message>')
    now = new Date(now.getTime() + 16 * 60_000)
    expect(await sendSigned(other.url, 'GET', at('k'))).toMatchObject({ status: 403, code: 'RequestTimeTooSkewed' })
    client.destroy()
    await other.stop()
  })

  it('a presigned upload that signs the checksum of nothing takes nothing else', async () => {
    const url = await getSignedUrl(plainClient, new PutObjectCommand({ Bucket, Key: 'target' }), { expiresIn: 60 })
    expect(url).toContain('x-amz-checksum-crc32=AAAAAA%3D%3D')
    const answer = await fetch(url, { method: 'PUT', body: 'content' })
    expect(answer.status).toBe(400)
    expect(await answer.text()).toContain('<Code>BadDigest</Code>')
  })

  it('a silent client is told so and let go', async () => {
    const other = await startTestFake({ idleMs: 150 })
    const headers = signedHeaders(other.url, 'PUT', at('k'), { 'content-length': '10' }, unsigned)
    const answer = await new Promise<number>((resolve, reject) => {
      const request = httpRequest(new URL(other.url), { method: 'PUT', path: at('k'), headers, agent: false }, (response) => {
        response.resume()
        resolve(response.statusCode!)
        response.on('end', () => request.destroy())
      })
      request.on('error', reject)
      request.write('12345')
    })
    expect(answer).toBe(400)
    await other.stop()
  })
})
