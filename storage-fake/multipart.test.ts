import { createHash, randomBytes } from 'node:crypto'
import { readdir } from 'node:fs/promises'
import { join } from 'node:path'
import { buffer } from 'node:stream/consumers'
import type { Readable } from 'node:stream'
import {
  AbortMultipartUploadCommand,
  CompleteMultipartUploadCommand,
  CreateMultipartUploadCommand,
  GetObjectCommand,
  HeadObjectCommand,
  ListPartsCommand,
  S3Client,
  UploadPartCommand,
  type CompletedPart
} from '@aws-sdk/client-s3'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { sendSigned, startTestFake, testAccount, type TestFake } from './testing'

let fake: TestFake
let client: S3Client
const Bucket = testAccount.bucket
const partBytes = 1000

beforeAll(async () => {
  fake = await startTestFake({ limits: { partBytes, objectBytes: 20_000 } })
  client = new S3Client({
    endpoint: fake.url,
    region: testAccount.region,
    credentials: testAccount,
    forcePathStyle: true,
    maxAttempts: 1
  })
})
afterAll(async () => {
  client.destroy()
  await fake.stop()
})

async function start(Key: string, more: { ContentType?: string; Metadata?: Record<string, string> } = {}) {
  const { UploadId } = await client.send(new CreateMultipartUploadCommand({ Bucket, Key, ...more }))
  const upload = async (PartNumber: number, Body: Buffer): Promise<CompletedPart> => {
    const { ETag } = await client.send(new UploadPartCommand({ Bucket, Key, UploadId, PartNumber, Body }))
    expect(ETag).toBe(`"${createHash('md5').update(Body).digest('hex')}"`)
    return { PartNumber, ETag }
  }
  const complete = (Parts: CompletedPart[], IfNoneMatch?: string) =>
    client.send(new CompleteMultipartUploadCommand({ Bucket, Key, UploadId, MultipartUpload: { Parts }, IfNoneMatch }))
  return { UploadId: UploadId!, upload, complete }
}

describe('a multipart upload', () => {
  it('joins parts by number, whatever the order they came in', async () => {
    const { upload, complete } = await start('joined', { ContentType: 'application/zip', Metadata: { a: 'b' } })
    const [one, two, three] = [randomBytes(1500), randomBytes(1000), randomBytes(10)]
    const third = await upload(7, three)
    const first = await upload(1, one)
    await upload(2, randomBytes(1200))
    const second = await upload(2, two)
    const { ETag } = await complete([first, second, third])

    // The ETag of the S3 user guide, "Checking object integrity": the MD5 of the parts' MD5s, then the number of parts.
    const md5 = (data: Buffer) => createHash('md5').update(data).digest()
    const expected = `"${md5(Buffer.concat([md5(one), md5(two), md5(three)])).toString('hex')}-3"`
    expect(ETag).toBe(expected)
    const got = await client.send(new GetObjectCommand({ Bucket, Key: 'joined' }))
    expect(got).toMatchObject({ ETag: expected, ContentType: 'application/zip', Metadata: { a: 'b' }, ContentLength: 2510 })
    expect((await buffer(got.Body as Readable)).equals(Buffer.concat([one, two, three]))).toBe(true)
  })

  it('leaves out parts that are not named, and cleans up', async () => {
    const { upload, complete, UploadId } = await start('chosen')
    await upload(1, randomBytes(1000))
    await complete([await upload(2, Buffer.from('only this'))])
    const got = await client.send(new GetObjectCommand({ Bucket, Key: 'chosen' }))
    expect(await got.Body!.transformToString()).toBe('only this')
    expect(await readdir(join(fake.dir, 'buckets', Bucket, 'uploads'))).not.toContain(UploadId)
    await expect(complete([{ PartNumber: 2, ETag: '"x"' }])).rejects.toMatchObject({ name: 'NoSuchUpload' })
  })

  it('lists its parts in pages', async () => {
    const { upload, UploadId } = await start('listed')
    for (const number of [3, 1, 10, 2]) await upload(number, randomBytes(number))
    const page = (PartNumberMarker?: string) =>
      client.send(new ListPartsCommand({ Bucket, Key: 'listed', UploadId, MaxParts: 3, PartNumberMarker }))
    const first = await page()
    expect(first.Parts?.map((one) => [one.PartNumber, one.Size])).toEqual([
      [1, 1],
      [2, 2],
      [3, 3]
    ])
    expect(first).toMatchObject({ IsTruncated: true, NextPartNumberMarker: '3' })
    const second = await page(first.NextPartNumberMarker)
    expect(second.Parts?.map((one) => one.PartNumber)).toEqual([10])
    expect(second.IsTruncated).toBe(false)
  })

  it('is refused when the parts are wrong', async () => {
    const { upload, complete } = await start('refused')
    const [one, two] = [await upload(1, randomBytes(partBytes)), await upload(2, randomBytes(partBytes - 1))]
    const three = await upload(3, randomBytes(5))
    await expect(complete([two, one])).rejects.toMatchObject({ name: 'InvalidPartOrder' })
    await expect(complete([one, one])).rejects.toMatchObject({ name: 'InvalidPartOrder' })
    await expect(complete([one, { PartNumber: 2, ETag: one.ETag }])).rejects.toMatchObject({ name: 'InvalidPart' })
    await expect(complete([one, { PartNumber: 4, ETag: one.ETag }])).rejects.toMatchObject({ name: 'InvalidPart' })
    await expect(complete([one, two, three])).rejects.toMatchObject({ name: 'EntityTooSmall' })
    await expect(complete([])).rejects.toMatchObject({ name: 'MalformedXML' })
    await expect(upload(0, Buffer.from('x'))).rejects.toMatchObject({ name: 'InvalidArgument' })
    await expect(upload(10_001, Buffer.from('x'))).rejects.toMatchObject({ name: 'InvalidArgument' })
    await expect(client.send(new HeadObjectCommand({ Bucket, Key: 'refused' }))).rejects.toMatchObject({ name: 'NotFound' })
    await expect(complete([one, two])).resolves.toMatchObject({ Key: 'refused' })
  })

  it('is refused when the whole is too large', async () => {
    const { upload, complete } = await start('large')
    const parts = [await upload(1, randomBytes(15_000)), await upload(2, randomBytes(6_000))]
    await expect(complete(parts)).rejects.toMatchObject({ name: 'EntityTooLarge' })
    await expect(upload(3, randomBytes(20_001))).rejects.toMatchObject({ name: 'EntityTooLarge' })
  })

  it('does not replace what is there when told not to', async () => {
    const [first, second] = [await start('guarded'), await start('guarded')]
    const parts = [await first.upload(1, Buffer.from('first')), await second.upload(1, Buffer.from('second'))]
    await first.complete([parts[0]!], '*')
    await expect(second.complete([parts[1]!], '*')).rejects.toMatchObject({ name: 'PreconditionFailed' })
    const got = await client.send(new GetObjectCommand({ Bucket, Key: 'guarded' }))
    expect(await got.Body!.transformToString()).toBe('first')
  })

  it('ends once, when completed twice at the same time', async () => {
    const { upload, complete } = await start('twice')
    const part = await upload(1, Buffer.from('content'))
    const outcomes = await Promise.allSettled([complete([part]), complete([part])])
    expect(outcomes.some((one) => one.status === 'fulfilled')).toBe(true)
    for (const one of outcomes)
      if (one.status === 'rejected') expect(['OperationAborted', 'NoSuchUpload']).toContain(one.reason.name)
    const got = await client.send(new GetObjectCommand({ Bucket, Key: 'twice' }))
    expect(await got.Body!.transformToString()).toBe('content')
  })

  it('can be given up, and belongs to its key alone', async () => {
    const { upload, complete, UploadId } = await start('given-up')
    const part = await upload(1, Buffer.from('x'))
    const foreign = new UploadPartCommand({ Bucket, Key: 'another', UploadId, PartNumber: 1, Body: 'x' })
    await expect(client.send(foreign)).rejects.toMatchObject({ name: 'NoSuchUpload' })
    await client.send(new AbortMultipartUploadCommand({ Bucket, Key: 'given-up', UploadId }))
    await expect(upload(2, Buffer.from('x'))).rejects.toMatchObject({ name: 'NoSuchUpload' })
    await expect(complete([part])).rejects.toMatchObject({ name: 'NoSuchUpload' })
    await expect(client.send(new ListPartsCommand({ Bucket, Key: 'given-up', UploadId }))).rejects.toMatchObject({
      name: 'NoSuchUpload'
    })
  })

  it.each(['..', '../../..', '%2e%2e%2f', 'f'.repeat(48), ''])('has no id %j', async (id) => {
    for (const method of ['PUT', 'GET', 'DELETE']) {
      const answer = await sendSigned(
        fake.url,
        method,
        `/${Bucket}/k?uploadId=${id}&partNumber=1`,
        {},
        method === 'PUT' ? 'x' : ''
      )
      expect(answer).toMatchObject({ status: 404, code: 'NoSuchUpload' })
    }
    expect(await readdir(fake.dir)).toEqual(['buckets'])
  })
})
