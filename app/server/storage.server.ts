import { Readable } from 'node:stream'
import {
  CreateBucketCommand,
  DeleteObjectCommand,
  GetObjectCommand,
  HeadBucketCommand,
  HeadObjectCommand,
  ListObjectsV2Command,
  PutObjectCommand,
  S3Client,
  type BucketLocationConstraint
} from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { errorHeader, errorStatus, isNamed } from './storage-errors.server'
import {
  putFile,
  putStream,
  type PutFile,
  type PutOutcome,
  type PutStream,
  type StreamStored,
  type Target
} from './storage-put.server'

export type StorageConfig = {
  /** Left out for the provider's own address of the region. */
  endpoint?: string
  region: string
  bucket: string
  accessKeyId: string
  secretAccessKey: string
  /** `endpoint/bucket/key` rather than `bucket.endpoint/key`; the default whenever an endpoint is given. */
  forcePathStyle?: boolean
  /** Milliseconds: to connect, to the first byte of an answer, and of silence on a connection. */
  timeouts?: { connectMs?: number; answerMs?: number; idleMs?: number }
  /** Tries of one call in all, the first included. */
  attempts?: number
}

export type ObjectFacts = {
  /** Size of the whole object. */
  totalBytes: number
  contentType: string
  /** With its quotes, as it goes into a header. */
  etag: string
  modifiedAt: string
}

/**
 * An object being read. The reader must take `stream` to its end or destroy it: destroying it closes the connection at once.
 * `bytes` is what the stream will give, `range` the part of the object it is (`end` inclusive).
 */
export type ObjectRead = ObjectFacts & { stream: Readable; bytes: number; range: { start: number; end: number } | null }

export type ListedObject = { key: string; bytes: number; etag: string; modifiedAt: string }

/** A range that begins past the object's end: HTTP 416. */
export class RangeNotSatisfiable extends Error {
  readonly totalBytes: number | null

  constructor(totalBytes: number | null) {
    super('The range begins past the end of the object')
    this.name = 'RangeNotSatisfiable'
    this.totalBytes = totalBytes
  }
}

/** Object storage as the application sees it. Anything that storage refuses or does not answer is thrown as the SDK's error. */
export type Storage = {
  /** Makes the bucket when it is absent. */
  ensureBucket: () => Promise<void>
  /** Stores a file or a buffer under a key. See `PutFile`. */
  putFile: (input: PutFile) => Promise<PutOutcome>
  /** Stores a stream whose length is not known before its end, part by part. See `PutStream`. */
  putStream: (input: PutStream) => Promise<StreamStored>
  /**
   * Opens an object, or the bytes `start` to `end` inclusive of it; null when it is absent. Nothing is held in memory. `signal` ends the
   * call or, later, the stream. Throws RangeNotSatisfiable.
   */
  get: (key: string, range?: { start: number; end?: number }, signal?: AbortSignal) => Promise<ObjectRead | null>
  /** What is known of an object; null when it is absent. */
  head: (key: string) => Promise<ObjectFacts | null>
  /** Removes an object; nothing happens when it is absent. */
  remove: (key: string) => Promise<void>
  /** At most `limit` (1 to 1,000) objects by key, those after `after`; `next` is what to pass as `after` for the next page, null at the end. */
  list: (prefix: string, limit: number, after?: string) => Promise<{ objects: ListedObject[]; next: string | null }>
  /** An address from which anyone may download for so many seconds (at most 604,800); `fileName` is what browsers save it as. */
  presignGet: (key: string, seconds: number, fileName?: string) => Promise<string>
  /** An address to which anyone may PUT for so many seconds, with exactly this Content-Type and, when given, exactly this many bytes. */
  presignPut: (key: string, seconds: number, contentType: string, bytes?: number) => Promise<string>
  /** Closes idle connections. */
  close: () => void
}

const defaults = { connectMs: 3_000, answerMs: 30_000, idleMs: 60_000, attempts: 3 }
const connections = 256
const ignore = () => undefined

/** Kinds of content and the folder each lives in. */
const folders = { bundle: 'bundles', picture: 'pictures' } as const
export type ObjectKind = keyof typeof folders

/**
 * The key of a content: `bundles/ab/abcdef…`, by the SHA-256 of its bytes in lower-case hexadecimal, never by a name a client chose.
 */
export function objectKey(kind: ObjectKind, sha256: string): string {
  if (!/^[0-9a-f]{64}$/.test(sha256)) throw new TypeError('objectKey wants a SHA-256 as 64 lower-case hexadecimal digits')
  return `${folders[kind]}/${sha256.slice(0, 2)}/${sha256}`
}

/** Opens object storage that speaks the S3 API. No call is made until the first use. */
export function createStorage(config: StorageConfig): Storage {
  const { bucket, region, accessKeyId, secretAccessKey, endpoint } = config
  const times = { ...defaults, ...config.timeouts }
  const attempts = config.attempts ?? defaults.attempts
  const agent = { keepAlive: true, maxSockets: connections }
  const client = new S3Client({
    region,
    credentials: { accessKeyId, secretAccessKey },
    ...(endpoint === undefined ? {} : { endpoint }),
    forcePathStyle: config.forcePathStyle ?? endpoint !== undefined,
    // The SDK's defaults frame uploads in chunks, which some servers store as content, and sign presigned uploads over the checksum of nothing.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
    // What goes wrong is thrown; the SDK would also print a warning for each upload that is answered "already there".
    logger: { debug: ignore, info: ignore, warn: ignore, error: ignore },
    maxAttempts: attempts,
    retryMode: 'standard',
    requestHandler: {
      connectionTimeout: times.connectMs,
      requestTimeout: times.answerMs,
      throwOnRequestTimeout: true,
      socketTimeout: times.idleMs,
      httpAgent: agent,
      httpsAgent: agent,
      logger: console
    }
  })
  const target: Target = { client, bucket, attempts, answerMs: times.answerMs }

  return {
    ensureBucket: () => ensureBucket(client, bucket, region),
    putFile: (input) => putFile(target, input),
    putStream: (input) => putStream(target, input),
    get: (key, range, signal) => get(client, bucket, key, range, signal),
    head: (key) => head(client, bucket, key),
    remove: async (key) => {
      await client.send(new DeleteObjectCommand({ Bucket: bucket, Key: key }))
    },
    list: (prefix, limit, after) => list(client, bucket, prefix, limit, after),
    presignGet: (key, seconds, fileName) => {
      const disposition = fileName === undefined ? undefined : attachment(fileName)
      return getSignedUrl(client, new GetObjectCommand({ Bucket: bucket, Key: key, ResponseContentDisposition: disposition }), {
        expiresIn: seconds
      })
    },
    presignPut: (key, seconds, contentType, bytes) => {
      const command = new PutObjectCommand({ Bucket: bucket, Key: key, ContentType: contentType, ContentLength: bytes })
      return getSignedUrl(client, command, {
        expiresIn: seconds,
        signableHeaders: new Set(['host', 'content-type', 'content-length'])
      })
    },
    close: () => client.destroy()
  }
}

async function ensureBucket(client: S3Client, bucket: string, region: string): Promise<void> {
  try {
    await client.send(new HeadBucketCommand({ Bucket: bucket }))
    return
  } catch (error) {
    if (errorStatus(error) !== 404) throw error
  }
  // The API's oldest region must not be named as a constraint.
  const constraint = region === 'us-east-1' ? undefined : { LocationConstraint: region as BucketLocationConstraint }
  try {
    await client.send(new CreateBucketCommand({ Bucket: bucket, CreateBucketConfiguration: constraint }))
  } catch (error) {
    if (!isNamed(error, 'BucketAlreadyOwnedByYou')) throw error
  }
}

async function get(
  client: S3Client,
  bucket: string,
  key: string,
  range: { start: number; end?: number } | undefined,
  signal: AbortSignal | undefined
): Promise<ObjectRead | null> {
  const wanted = range && `bytes=${range.start}-${range.end ?? ''}`
  try {
    const answer = await client.send(new GetObjectCommand({ Bucket: bucket, Key: key, Range: wanted }), { abortSignal: signal })
    const stream = answer.Body
    if (!(stream instanceof Readable)) throw new Error('Object storage answered without a readable body')
    const bytes = answer.ContentLength
    const found = /^bytes (\d+)-(\d+)\/(\d+)$/.exec(answer.ContentRange ?? '')
    if (bytes === undefined || (answer.ContentRange !== undefined && !found)) {
      stream.destroy()
      throw new Error('Object storage answered without a usable length')
    }
    const part = found && { start: Number(found[1]), end: Number(found[2]) }
    return { stream, bytes, range: part, ...factsOf(answer, found ? Number(found[3]) : bytes) }
  } catch (error) {
    if (isNamed(error, 'NoSuchKey')) return null
    if (errorStatus(error) === 416) {
      const total = /\/(\d+)$/.exec(errorHeader(error, 'content-range') ?? '')?.[1]
      throw new RangeNotSatisfiable(total === undefined ? null : Number(total))
    }
    throw error
  }
}

async function head(client: S3Client, bucket: string, key: string): Promise<ObjectFacts | null> {
  try {
    const answer = await client.send(new HeadObjectCommand({ Bucket: bucket, Key: key }))
    if (answer.ContentLength === undefined) throw new Error('Object storage answered without a length')
    return factsOf(answer, answer.ContentLength)
  } catch (error) {
    if (errorStatus(error) === 404) return null
    throw error
  }
}

function factsOf(answer: { ContentType?: string; ETag?: string; LastModified?: Date }, totalBytes: number): ObjectFacts {
  return {
    totalBytes,
    contentType: answer.ContentType ?? 'application/octet-stream',
    etag: answer.ETag ?? '',
    modifiedAt: (answer.LastModified ?? new Date(0)).toISOString()
  }
}

async function list(
  client: S3Client,
  bucket: string,
  prefix: string,
  limit: number,
  after?: string
): ReturnType<Storage['list']> {
  if (!Number.isInteger(limit) || limit < 1 || limit > 1000) throw new RangeError('list wants a limit from 1 to 1,000')
  const answer = await client.send(
    new ListObjectsV2Command({ Bucket: bucket, Prefix: prefix, MaxKeys: limit, StartAfter: after })
  )
  const objects = (answer.Contents ?? []).map((one) => ({
    key: one.Key ?? '',
    bytes: one.Size ?? 0,
    etag: one.ETag ?? '',
    modifiedAt: (one.LastModified ?? new Date(0)).toISOString()
  }))
  return { objects, next: answer.IsTruncated ? (objects.at(-1)?.key ?? null) : null }
}

/** A Content-Disposition that saves under this name (RFC 6266; the name in full by RFC 8187, and in ASCII for old readers). */
function attachment(fileName: string): string {
  const plain = fileName.replace(/[^\x20-\x7e]|["\\%]/g, '_')
  const encoded = encodeURIComponent(Buffer.from(fileName).toString()).replace(
    /['()*]/g,
    (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`
  )
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`
}
