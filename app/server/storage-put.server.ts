import { createHash } from 'node:crypto'
import { open } from 'node:fs/promises'
import { Readable } from 'node:stream'
import type { ReadableStream as NodeReadableStream } from 'node:stream/web'
import { setTimeout as pause } from 'node:timers/promises'
import {
  AbortMultipartUploadCommand,
  CompleteMultipartUploadCommand,
  CreateMultipartUploadCommand,
  PutObjectCommand,
  UploadPartCommand,
  type CompletedPart,
  type S3Client
} from '@aws-sdk/client-s3'
import { DomainError } from '~/lib/domain-error'
import { errorStatus, isConflict, isPassing } from './storage-errors.server'

/** `already-there`: `ifAbsent` was asked and the key is taken; what is stored stays as it is. */
export type PutOutcome = 'stored' | 'already-there'

/**
 * A content to store, from a file (streamed) or a buffer, of exactly `bytes` bytes. With `sha256` (hexadecimal) storage verifies the bytes
 * it received against it; a buffer is verified in any case.
 */
export type PutFile = { key: string; bytes: number; contentType: string; ifAbsent?: boolean; sha256?: string } & (
  { path: string; body?: undefined } | { body: Buffer; path?: undefined }
)

/** A content whose length shows at its end. One part of it is held in memory at a time. */
export type PutStream = {
  key: string
  stream: Readable | ReadableStream<Uint8Array>
  contentType: string
  /** Past it the upload is dropped and DomainError `too-large` thrown. */
  maxBytes: number
  ifAbsent?: boolean
  /** At least 5 MiB, which the S3 API asks of all parts but the last. */
  partBytes?: number
}

/** `sha256` (hexadecimal) and `bytes` are of what was read from the stream. */
export type StreamStored = { outcome: PutOutcome; bytes: number; sha256: string }

export type Target = { client: S3Client; bucket: string; attempts: number; answerMs: number }

/** The slowest upload that is not given up. */
const slowestBytesPerSecond = 256 * 1024
const smallestPart = 5 * 1024 ** 2
const mostParts = 10_000
const firstPauseMs = 200

/** Time an upload of so many bytes may take until it is answered. */
const timeFor = (target: Target, bytes: number): number => target.answerMs + Math.ceil((bytes / slowestBytesPerSecond) * 1000)

/** See `Storage.putFile`. */
export async function putFile(target: Target, input: PutFile): Promise<PutOutcome> {
  if (input.body && input.body.length !== input.bytes)
    throw new RangeError(`The body has ${input.body.length} bytes, not the ${input.bytes} stated`)
  // The SDK repeats a buffer itself but not a stream: each try here opens the file anew.
  for (let attempt = 1; ; attempt++) {
    try {
      await (input.path === undefined ? send(target, input, input.body) : sendFile(target, input, input.path))
      return 'stored'
    } catch (error) {
      if (input.ifAbsent && errorStatus(error) === 412) return 'already-there'
      const isOurs = input.path === undefined ? isConflict(error) : isPassing(error)
      if (attempt >= target.attempts || !isOurs) throw error
      await pause(firstPauseMs * 2 ** (attempt - 1))
    }
  }
}

async function sendFile(target: Target, input: PutFile, path: string): Promise<void> {
  const file = await open(path, 'r')
  try {
    const { size } = await file.stat()
    if (size !== input.bytes) throw new RangeError(`The file has ${size} bytes, not the ${input.bytes} stated`)
    if (size === 0) return await send(target, input, Buffer.alloc(0))
    const stream = file.createReadStream({ start: 0, end: size - 1, autoClose: false })
    const reading = new AbortController()
    let fault: unknown
    stream.on('error', (error) => {
      fault = error
      reading.abort()
    })
    try {
      await send(target, input, stream, reading.signal)
    } catch (error) {
      throw fault ?? error
    } finally {
      stream.destroy()
    }
  } finally {
    await file.close()
  }
}

async function send(target: Target, input: PutFile, body: Buffer | Readable, abortSignal?: AbortSignal): Promise<void> {
  const { key, bytes, contentType, ifAbsent, sha256 } = input
  const command = new PutObjectCommand({
    Bucket: target.bucket,
    Key: key,
    Body: body,
    ContentLength: bytes,
    ContentType: contentType,
    IfNoneMatch: ifAbsent ? '*' : undefined
  })
  if (sha256 !== undefined) {
    // The signature covers this header, and the server holds the body to it.
    command.middlewareStack.add(
      (next) => (args) => {
        const request = args.request as { headers: Record<string, string> }
        request.headers['x-amz-content-sha256'] = sha256
        return next(args)
      },
      { step: 'build', name: 'statedPayloadHash' }
    )
  }
  await target.client.send(command, { abortSignal, requestTimeout: timeFor(target, bytes) })
}

/** See `Storage.putStream`. A content that fits in one part is stored by a single PUT. */
export async function putStream(target: Target, input: PutStream): Promise<StreamStored> {
  const { key, contentType, ifAbsent, maxBytes } = input
  const partBytes = Math.max(input.partBytes ?? 8 * 1024 ** 2, smallestPart, Math.ceil(maxBytes / mostParts))
  const hash = createHash('sha256')
  let bytes = 0
  const counted = async function* () {
    for await (const piece of asReadable(input.stream)) {
      const data = piece as Uint8Array
      bytes += data.length
      if (bytes > maxBytes) throw new DomainError('too-large', `At most ${maxBytes} bytes can be stored here`)
      hash.update(data)
      yield data
    }
  }
  const parts = inParts(counted(), partBytes)
  try {
    const first = (await parts.next()).value ?? Buffer.alloc(0)
    const isWhole = first.length < partBytes
    const outcome = isWhole
      ? await putFile(target, { key, body: first, bytes: first.length, contentType, ifAbsent })
      : await putParts(target, input, first, parts)
    return { outcome, bytes, sha256: hash.digest('hex') }
  } finally {
    // Lets go of the stream also when storage failed before its end.
    await parts.return(undefined)
  }
}

async function putParts(
  target: Target,
  input: PutStream,
  first: Buffer,
  rest: AsyncGenerator<Buffer, undefined>
): Promise<PutOutcome> {
  const { client, bucket } = target
  const address = { Bucket: bucket, Key: input.key }
  const { UploadId } = await client.send(new CreateMultipartUploadCommand({ ...address, ContentType: input.contentType }))
  if (UploadId === undefined) throw new Error('Object storage began an upload without an id')
  try {
    const done: CompletedPart[] = []
    const upload = async (body: Buffer) => {
      const command = new UploadPartCommand({
        ...address,
        UploadId,
        PartNumber: done.length + 1,
        Body: body,
        ContentLength: body.length
      })
      const { ETag } = await client.send(command, { requestTimeout: timeFor(target, body.length) })
      done.push({ PartNumber: done.length + 1, ETag })
    }
    await upload(first)
    for await (const part of rest) await upload(part)
    const command = new CompleteMultipartUploadCommand({
      ...address,
      UploadId,
      MultipartUpload: { Parts: done },
      IfNoneMatch: input.ifAbsent ? '*' : undefined
    })
    await client.send(command, { requestTimeout: timeFor(target, done.length * first.length) })
    return 'stored'
  } catch (error) {
    await client.send(new AbortMultipartUploadCommand({ ...address, UploadId })).catch((second: unknown) => {
      if (errorStatus(second) !== 404)
        throw new AggregateError([error, second], 'An upload failed and its parts could not be removed')
    })
    if (input.ifAbsent && errorStatus(error) === 412) return 'already-there'
    throw error
  }
}

/** Gathers pieces into buffers of exactly `size` bytes; the last one may be shorter. */
async function* inParts(source: AsyncIterable<Uint8Array>, size: number): AsyncGenerator<Buffer, undefined> {
  let held: Uint8Array[] = []
  let bytes = 0
  for await (let piece of source) {
    while (bytes + piece.length >= size) {
      const cut = size - bytes
      yield Buffer.concat([...held, piece.subarray(0, cut)])
      held = []
      bytes = 0
      piece = piece.subarray(cut)
    }
    if (piece.length > 0) held.push(piece)
    bytes += piece.length
  }
  if (bytes > 0) yield Buffer.concat(held)
  return undefined
}

const asReadable = (stream: PutStream['stream']): Readable =>
  stream instanceof Readable ? stream : Readable.fromWeb(stream as unknown as NodeReadableStream)
