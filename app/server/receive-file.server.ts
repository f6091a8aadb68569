import { createHash, randomBytes } from 'node:crypto'
import { once } from 'node:events'
import { createWriteStream } from 'node:fs'
import { open, rm } from 'node:fs/promises'
import { join } from 'node:path'
import { Readable, Transform } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import type { ReadableStream as NodeReadableStream } from 'node:stream/web'
import busboy from 'busboy'
import { DomainError } from '~/lib/domain-error'

/** A file that lies complete in the upload folder; whoever gets it removes it. `name` is what the client called it, for show only. */
export type ReceivedFile = { path: string; bytes: number; sha256: string; name: string }

/** Whether a form was sent in the way that carries files. */
export const isFileForm = (contentType: string | string[] | null | undefined) =>
  typeof contentType === 'string' && /^multipart\/form-data\b/i.test(contentType)

/** What a multipart body may carry besides the file. */
const slackBytes = 64 * 1024
/** A refused sender gets so long to finish, so that it reads the answer instead of a broken connection; then it is cut off. */
const lingerMs = 5_000

const sizeWords = (bytes: number) =>
  bytes < 1024 * 1024 ? `${Math.floor(bytes / 1024)} KiB` : `${Math.floor(bytes / 1024 / 1024)} MiB`
const tooLarge = (maxBytes: number) =>
  new DomainError('too-large', `The file is too large: at most ${sizeWords(maxBytes)} are taken.`)
const notWhole = () =>
  new DomainError('invalid', 'The upload broke off before its end, and nothing was kept. Choose the file again.')

/**
 * Takes the one file of a multipart form from the request's stream to a temporary file, hashing on the way; never more than a few
 * buffers of it are in memory. Whatever goes wrong (too large, broken off, no file), the temporary file is gone when this throws.
 * @param field name of the form's file field
 * @throws DomainError `too-large`, `wrong-type` (no multipart form), `invalid` (broken off, no file chosen)
 */
export async function receiveFile(request: Request, field: string, dir: string, maxBytes: number): Promise<ReceivedFile> {
  if (!request.body) throw new DomainError('invalid', 'There is no file in this request.')
  const source = Readable.fromWeb(request.body as unknown as NodeReadableStream)
  const path = join(dir, `${randomBytes(16).toString('hex')}.part`)
  try {
    if (Number(request.headers.get('Content-Length') ?? 0) > maxBytes + slackBytes) throw tooLarge(maxBytes)
    return await take(source, parserFor(request, maxBytes), field, path, maxBytes)
  } catch (error) {
    linger(source)
    await rm(path, { force: true })
    throw error
  }
}

/**
 * Takes a body that is the file itself to a temporary file, as `receiveFile` does that of a form. An empty body gives an empty file.
 * @param type the media type that the body must have
 * @throws DomainError `too-large`, `wrong-type`, `invalid` (broken off)
 */
export async function receiveBody(request: Request, type: string, dir: string, maxBytes: number): Promise<ReceivedFile> {
  const source = request.body
    ? Readable.fromWeb(request.body as unknown as NodeReadableStream)
    : Readable.from([], { objectMode: false })
  const path = join(dir, `${randomBytes(16).toString('hex')}.part`)
  try {
    requireType(request.headers, type)
    if (Number(request.headers.get('Content-Length') ?? 0) > maxBytes) throw tooLarge(maxBytes)
    return { path, name: '', ...(await write(source, path, maxBytes)) }
  } catch (error) {
    linger(source)
    await rm(path, { force: true })
    throw error
  }
}

function requireType(headers: Headers, type: string): void {
  const given = headers.get('Content-Type')?.split(';')[0]!.trim().toLowerCase() ?? ''
  if (given !== type)
    throw new DomainError('wrong-type', `Send it as ${type}${given === '' ? '' : `, not as ${given.slice(0, 60)}`}.`)
  if ((headers.get('Content-Encoding') ?? 'identity').toLowerCase() !== 'identity')
    throw new DomainError('wrong-type', 'Send it uncompressed, without Content-Encoding.')
}

/** Not a pipeline, for the reason given at `feed`. */
async function write(source: Readable, path: string, maxBytes: number): Promise<{ bytes: number; sha256: string }> {
  const hash = createHash('sha256')
  let bytes = 0
  const file = await open(path, 'wx', 0o600)
  try {
    for await (const piece of piecesOf(source)) {
      bytes += piece.length
      if (bytes > maxBytes) throw tooLarge(maxBytes)
      hash.update(piece)
      await file.writeFile(piece)
    }
    return { bytes, sha256: hash.digest('hex') }
  } finally {
    await file.close()
  }
}

/** What fails in here is the sender; what fails in the loop around it is ours. */
async function* piecesOf(source: Readable): AsyncGenerator<Uint8Array> {
  try {
    yield* source.iterator({ destroyOnReturn: false }) as AsyncIterable<Uint8Array>
  } catch {
    throw notWhole()
  }
}

function parserFor(request: Request, maxBytes: number): busboy.Busboy {
  try {
    return busboy({
      headers: Object.fromEntries(request.headers) as { 'content-type': string },
      limits: { files: 1, fileSize: maxBytes + 1, fields: 10, fieldSize: 1024, parts: 12, headerPairs: 20 },
      defParamCharset: 'utf8'
    })
  } catch {
    throw new DomainError('wrong-type', 'Send the file as a form (multipart/form-data).')
  }
}

async function take(
  source: Readable,
  parser: busboy.Busboy,
  field: string,
  path: string,
  maxBytes: number
): Promise<ReceivedFile> {
  let received: Promise<ReceivedFile> | null = null
  const stop = new AbortController()
  parser.on('error', (error) => stop.abort(error))
  parser.on('file', (name, stream, info) => {
    /* Without a listener the failure of a stream that nobody wants would end the process. */
    if (name !== field || received) return void stream.on('error', (error) => stop.abort(error)).resume()
    received = keep(stream, path, info.filename ?? '', maxBytes)
    received.catch((error: unknown) => stop.abort(error))
  })
  try {
    await feed(source, parser, maxBytes + slackBytes, stop.signal)
  } catch (error) {
    /* The file's own failure says more than that of the whole, and must have let go of the file. */
    parser.destroy()
    const [own] = await Promise.allSettled([received])
    if (own.status === 'rejected' && !isBrokenOff(own.reason)) throw own.reason
    if (error instanceof TooMuch) throw tooLarge(maxBytes)
    throw notWhole()
  }
  if (!received) throw noFile()
  return await (received as Promise<ReceivedFile>)
}

class TooMuch extends Error {}

/** Not a pipeline: that would destroy the source on a failure, and the sender could not be answered. */
async function feed(source: Readable, parser: busboy.Busboy, maxBytes: number, signal: AbortSignal): Promise<void> {
  let seen = 0
  for await (const piece of source.iterator({ destroyOnReturn: false })) {
    signal.throwIfAborted()
    seen += (piece as Uint8Array).length
    if (seen > maxBytes) throw new TooMuch()
    if (!parser.write(piece)) await once(parser, 'drain', { signal })
  }
  const closed = once(parser, 'close', { signal })
  parser.end()
  await closed
}

/** What busboy and streams say when a body ends before its last boundary; a full disk says something else. */
const isBrokenOff = (error: unknown) =>
  error instanceof Error &&
  (/^Unexpected end of/.test(error.message) || (error as { code?: string }).code === 'ERR_STREAM_PREMATURE_CLOSE')

const noFile = () =>
  new DomainError('invalid', 'Choose the bundle first: one zip.', [
    { path: 'bundle', message: 'Choose the bundle first: one zip.' }
  ])

async function keep(
  stream: Readable & { truncated?: boolean },
  path: string,
  name: string,
  maxBytes: number
): Promise<ReceivedFile> {
  const hash = createHash('sha256')
  let bytes = 0
  const count = new Transform({
    transform(piece: Buffer, _encoding, done) {
      bytes += piece.length
      hash.update(piece)
      done(null, piece)
    }
  })
  stream.once('limit', () => stream.destroy(tooLarge(maxBytes)))
  await pipeline(stream, count, createWriteStream(path, { flags: 'wx', mode: 0o600 }))
  if (stream.truncated) throw tooLarge(maxBytes)
  if (bytes === 0) throw noFile()
  return { path, bytes, sha256: hash.digest('hex'), name: plainName(name) }
}

/** The last part of a client's file name, without anything that could mislead where it is shown. */
const plainName = (name: string) =>
  (name.split(/[\\/]/).at(-1) ?? '').replace(/[\p{C}\p{Zl}\p{Zp}]/gu, '').slice(0, 120) || 'unnamed'

/** Reads and forgets what a refused sender still sends, for a while. */
export function linger(source: Readable): void {
  if (source.destroyed) return
  source.on('error', () => source.destroy())
  const timer = setTimeout(() => source.destroy(), lingerMs)
  timer.unref()
  source.once('close', () => clearTimeout(timer))
  source.unpipe()
  source.resume()
}

/** Reads and forgets the body of a request that is refused before it is looked at. */
export function discardBody(request: Request): void {
  if (request.body && !request.bodyUsed) linger(Readable.fromWeb(request.body as unknown as NodeReadableStream))
}
