import { createHash } from 'node:crypto'
import { existsSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { DeleteObjectsCommand, GetObjectCommand, ListObjectsV2Command, PutObjectCommand, S3Client } from '@aws-sdk/client-s3'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { send, sendSigned, startTestFake, testAccount, type Answer, type TestFake } from './testing'

let fake: TestFake
let client: S3Client
const Bucket = testAccount.bucket
const at = (key: string) => `/${Bucket}/${key}`
const call = (method: string, target: string, headers: Record<string, string> = {}, body = ''): Promise<Answer> =>
  sendSigned(fake.url, method, target, headers, body)
const md5 = (text: string) => `"${createHash('md5').update(text).digest('hex')}"`

beforeAll(async () => {
  fake = await startTestFake()
  client = new S3Client({ endpoint: fake.url, region: testAccount.region, credentials: testAccount, forcePathStyle: true })
})
afterAll(async () => {
  client.destroy()
  await fake.stop()
})

describe('an object', () => {
  it('keeps its type, its headers and its metadata', async () => {
    const Metadata = { board: 'buttress', 'line-two': 'a  b' }
    const put = {
      Bucket,
      Key: 'described',
      Body: 'x',
      ContentType: 'image/svg+xml',
      CacheControl: 'max-age=60',
      ContentEncoding: 'gzip',
      Metadata
    }
    await client.send(new PutObjectCommand(put))
    const got = await client.send(new GetObjectCommand({ Bucket, Key: 'described' }))
    expect(got).toMatchObject({ ContentType: 'image/svg+xml', CacheControl: 'max-age=60', ContentEncoding: 'gzip' })
    expect(got.Metadata).toEqual({ board: 'buttress', 'line-two': 'a b' })
    await call('PUT', at('plain'), {}, 'x')
    expect((await call('HEAD', at('plain'))).headers['content-type']).toBe('binary/octet-stream')
  })

  it('is answered with the headers a read asks for', async () => {
    const answer = await call('GET', `${at('plain')}?response-content-type=text%2Fcsv&response-content-disposition=inline`)
    expect(answer.headers).toMatchObject({
      'content-type': 'text/csv',
      'content-disposition': 'inline',
      etag: md5('x'),
      'accept-ranges': 'bytes'
    })
  })

  it('is not answered with a header that would be two', async () => {
    for (const value of ['a%0d%0aset-cookie:b', '%E2%82%AC']) {
      expect(await call('GET', `${at('plain')}?response-content-disposition=${value}`)).toMatchObject({
        status: 400,
        code: 'InvalidArgument'
      })
    }
  })

  it('is refused with too much metadata or too large a header', async () => {
    expect((await call('PUT', at('k'), { 'x-amz-meta-a': 'x'.repeat(2048) }, 'x')).code).toBe('MetadataTooLarge')
    expect((await call('PUT', at('k'), { 'x-amz-meta-a': 'x'.repeat(20_000) }, 'x')).status).toBe(431)
    expect((await call('HEAD', at('k'))).status).toBe(404)
  })

  it('is written under conditions', async () => {
    expect((await call('PUT', at('once'), { 'if-none-match': '*' }, 'first')).headers.etag).toBe(md5('first'))
    expect(await call('PUT', at('once'), { 'if-none-match': '*' }, 'second')).toMatchObject({
      status: 412,
      code: 'PreconditionFailed'
    })
    expect(await call('PUT', at('once'), { 'if-none-match': '"abc"' }, 'second')).toMatchObject({
      status: 501,
      code: 'NotImplemented'
    })
    expect(await call('PUT', at('once'), { 'if-match': md5('other') }, 'second')).toMatchObject({ status: 412 })
    expect(await call('PUT', at('never'), { 'if-match': md5('x') }, 'second')).toMatchObject({ status: 404, code: 'NoSuchKey' })
    expect((await call('GET', at('once'))).text).toBe('first')
    expect((await call('PUT', at('once'), { 'if-match': md5('first') }, 'second')).status).toBe(200)
    expect((await call('GET', at('once'))).text).toBe('second')
  })

  it('is read under conditions', async () => {
    await call('PUT', at('cond'), {}, 'abc')
    const read = (headers: Record<string, string>) => call('GET', at('cond'), headers)
    const [past, future] = ['Sat, 01 Jan 2000 00:00:00 GMT', new Date(Date.now() + 60_000).toUTCString()]
    const unmodified = await read({ 'if-none-match': `"other", W/${md5('abc')}` })
    expect(unmodified).toMatchObject({ status: 304, text: '' })
    expect(unmodified.headers.etag).toBe(md5('abc'))
    expect((await read({ 'if-none-match': '"other"' })).status).toBe(200)
    expect((await read({ 'if-modified-since': future })).status).toBe(304)
    expect((await read({ 'if-modified-since': past })).status).toBe(200)
    expect((await read({ 'if-none-match': '"other"', 'if-modified-since': future })).status).toBe(200)
    expect((await read({ 'if-match': md5('abc') })).status).toBe(200)
    expect(await read({ 'if-match': '"other"' })).toMatchObject({ status: 412, code: 'PreconditionFailed' })
    expect((await read({ 'if-unmodified-since': past })).status).toBe(412)
    expect((await read({ 'if-unmodified-since': future })).status).toBe(200)
    expect((await read({ 'if-match': md5('abc'), 'if-unmodified-since': past })).status).toBe(200)
  })

  it('is read in ranges', async () => {
    await call('PUT', at('digits'), {}, '0123456789')
    const part = await call('GET', at('digits'), { range: 'bytes=2-4' })
    expect(part).toMatchObject({ status: 206, text: '234' })
    expect(part.headers).toMatchObject({ 'content-range': 'bytes 2-4/10', 'content-length': '3' })
    expect(await call('GET', at('digits'), { range: 'bytes=-3' })).toMatchObject({ status: 206, text: '789' })
    const head = await call('HEAD', at('digits'), { range: 'bytes=5-' })
    expect(head).toMatchObject({ status: 206, text: '', headers: { 'content-length': '5', 'content-range': 'bytes 5-9/10' } })
    const beyond = await call('GET', at('digits'), { range: 'bytes=10-' })
    expect(beyond).toMatchObject({ status: 416, code: 'InvalidRange', headers: { 'content-range': 'bytes */10' } })
    expect(beyond.text).toContain('<ActualObjectSize>10</ActualObjectSize>')
    expect(await call('GET', at('digits'), { range: 'bytes=0-1,3-4' })).toMatchObject({ status: 200, text: '0123456789' })
  })

  it('is deleted with the same answer twice, and a HEAD of what is absent has no body', async () => {
    await call('PUT', at('gone'), {}, 'x')
    expect((await call('DELETE', at('gone'))).status).toBe(204)
    expect((await call('DELETE', at('gone'))).status).toBe(204)
    expect(await call('GET', at('gone'))).toMatchObject({ status: 404, code: 'NoSuchKey' })
    expect(await call('HEAD', at('gone'))).toMatchObject({ status: 404, text: '' })
  })
})

describe('deleting many', () => {
  const document = (keys: string[]) => `<Delete>${keys.map((key) => `<Object><Key>${key}</Key></Object>`).join('')}</Delete>`
  const post = (
    body: string,
    headers: Record<string, string> = { 'content-md5': createHash('md5').update(body).digest('base64') }
  ) => call('POST', `/${Bucket}?delete`, headers, body)

  it('removes all that are named, there or not', async () => {
    const Objects = ['many/a', 'many/<b> & "c"', 'many/absent'].map((Key) => ({ Key }))
    for (const { Key } of Objects.slice(0, 2)) await client.send(new PutObjectCommand({ Bucket, Key, Body: 'x' }))
    const { Deleted } = await client.send(new DeleteObjectsCommand({ Bucket, Delete: { Objects } }))
    expect(Deleted).toEqual(Objects)
    expect((await client.send(new ListObjectsV2Command({ Bucket, Prefix: 'many/' }))).KeyCount).toBe(0)
    expect((await client.send(new DeleteObjectsCommand({ Bucket, Delete: { Objects, Quiet: true } }))).Deleted).toBeUndefined()
  })

  it('refuses a document without a digest, with a wrong one, malformed, too long or too large', async () => {
    expect((await post(document(['a']), {})).code).toBe('InvalidRequest')
    expect((await post(document(['a']), { 'content-md5': createHash('md5').digest('base64') })).code).toBe('BadDigest')
    expect((await post('<Delete><Object>')).code).toBe('MalformedXML')
    expect((await post('<Delete></Delete>')).code).toBe('MalformedXML')
    expect((await post(document(Array.from({ length: 1001 }, (_, i) => `k${i}`)))).code).toBe('MalformedXML')
    expect((await post(document(['x'.repeat(1024 ** 2)]))).code).toBe('MaxMessageLengthExceeded')
  })
})

describe('names', () => {
  it('never lead out of the folder, plain or encoded', async () => {
    for (const [target, content] of [
      [at('../../../escaped'), 'plain'],
      [at('%2e%2e/%2e%2e/%2E%2E/escaped'), 'encoded'],
      [at('..%2f..%2f..%2fescaped'), 'slashes']
    ] as const) {
      expect((await call('PUT', target, {}, content)).status).toBe(200)
      expect((await call('GET', at('../../../escaped'))).text).toBe(content)
    }
    for (let folder = fake.dir; folder !== dirname(folder); folder = dirname(folder))
      expect(existsSync(join(folder, 'escaped'))).toBe(false)
    const listed = await client.send(new ListObjectsV2Command({ Bucket, Prefix: '..' }))
    expect(listed.Contents?.map((one) => one.Key)).toEqual(['../../../escaped'])
  })

  it('of buckets are checked', async () => {
    for (const name of ['..', 'A-b', 'ab', '-abc', '1.2.3.4', 'a..b', 'x'.repeat(64), '%2e%2e']) {
      expect((await call('PUT', `/${name}`)).code).toBe('InvalidBucketName')
    }
    expect(await call('GET', '/..?list-type=2')).toMatchObject({ status: 404, code: 'NoSuchBucket' })
    expect((await call('GET', '/absent-bucket/key')).code).toBe('NoSuchBucket')
    expect((await call('PUT', '/absent-bucket/key', {}, 'x')).code).toBe('NoSuchBucket')
    expect((await call('HEAD', '/absent-bucket')).status).toBe(404)
  })

  it('of keys have a length, and are UTF-8', async () => {
    expect((await call('PUT', at('%C3%A4'.repeat(512)), {}, 'x')).status).toBe(200)
    expect((await call('PUT', at(`${'%C3%A4'.repeat(512)}b`), {}, 'x')).code).toBe('KeyTooLongError')
    for (const key of ['%zz', '%ff', '%c3']) expect((await send(fake.url, 'GET', at(key))).code).toBe('InvalidURI')
  })
})

describe('buckets', () => {
  const location = (region: string) =>
    `<CreateBucketConfiguration><LocationConstraint>${region}</LocationConstraint></CreateBucketConfiguration>`

  it('are made once, in this region only', async () => {
    expect((await call('PUT', '/new-bucket', {}, location('elsewhere'))).code).toBe('IllegalLocationConstraintException')
    expect((await call('PUT', '/new-bucket', {}, '<Other/>')).code).toBe('MalformedXML')
    expect((await call('HEAD', '/new-bucket')).status).toBe(404)
    expect(await call('PUT', '/new-bucket', {}, location(testAccount.region))).toMatchObject({
      status: 200,
      headers: { location: '/new-bucket' }
    })
    expect((await call('HEAD', '/new-bucket')).headers['x-amz-bucket-region']).toBe(testAccount.region)
    expect(await call('PUT', '/new-bucket')).toMatchObject({ status: 409, code: 'BucketAlreadyOwnedByYou' })
    expect((await call('GET', '/new-bucket?list-type=2')).text).toContain('<KeyCount>0</KeyCount>')
  })

  it('are listed in pages with prefix and delimiter through the SDK', async () => {
    const keys = ['list/a/1', 'list/a/2', 'list/b', 'list/c d+e', 'list/d/1', 'list/ä']
    for (const Key of keys) await client.send(new PutObjectCommand({ Bucket, Key, Body: Key }))
    const found: (string | undefined)[] = []
    let ContinuationToken: string | undefined
    do {
      const page = await client.send(
        new ListObjectsV2Command({ Bucket, Prefix: 'list/', Delimiter: '/', MaxKeys: 2, ContinuationToken })
      )
      found.push(...(page.CommonPrefixes ?? []).map((one) => one.Prefix), ...(page.Contents ?? []).map((one) => one.Key))
      ContinuationToken = page.NextContinuationToken
    } while (ContinuationToken)
    expect(found.sort()).toEqual(['list/a/', 'list/b', 'list/c d+e', 'list/d/', 'list/ä'])
    const encoded = await call('GET', `/${Bucket}?list-type=2&prefix=list%2F&encoding-type=url`)
    expect(encoded.text).toContain('<Key>list/c%20d%2Be</Key>')
  })

  it.each([
    ['max-keys=x', 'InvalidArgument'],
    ['max-keys=-1', 'InvalidArgument'],
    ['continuation-token=rubbish', 'InvalidArgument'],
    ['encoding-type=base64', 'InvalidArgument']
  ])('are not listed with %s', async (query, code) => {
    expect((await call('GET', `/${Bucket}?list-type=2&${query}`)).code).toBe(code)
  })
})

it.each([
  ['GET', `/${Bucket}`, {}],
  ['GET', '/', {}],
  ['GET', at('k?acl'), {}],
  ['PUT', at('k?tagging'), {}],
  ['GET', at('k?versionId=1'), {}],
  ['GET', `/${Bucket}?policy`, {}],
  ['DELETE', `/${Bucket}`, {}],
  ['PUT', at('k'), { 'x-amz-copy-source': at('digits') }],
  ['PUT', at('k'), { 'x-amz-server-side-encryption': 'AES256' }],
  ['POST', at('k'), {}],
  ['PATCH', at('k'), {}]
])('%s %s %j is refused as beyond this server', async (method, target, headers) => {
  const { status, code } = await call(method, target, headers as Record<string, string>)
  expect([`501 NotImplemented`, `405 MethodNotAllowed`]).toContain(`${status} ${code}`)
})
