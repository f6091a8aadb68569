import { createHash } from 'node:crypto'
import { S3Error } from './errors'
import { chunkStringToSign, emptySha256, isSameSignature, sign, trailerStringToSign } from './signature'

/** How a chunked body is framed, as the `x-amz-content-sha256` header says. */
export type ChunkedForm = { isSigned: boolean; hasTrailer: boolean }

/** Start of the chain of chunk signatures: the request's own signature and what it was made with. */
export type SignatureChain = { key: Uint8Array; at: string; scope: string; seed: string }

export const chunkedForms: Record<string, ChunkedForm> = {
  'STREAMING-AWS4-HMAC-SHA256-PAYLOAD': { isSigned: true, hasTrailer: false },
  'STREAMING-AWS4-HMAC-SHA256-PAYLOAD-TRAILER': { isSigned: true, hasTrailer: true },
  'STREAMING-UNSIGNED-PAYLOAD-TRAILER': { isSigned: false, hasTrailer: true }
}

const lineLimit = 2048
const trailerLimit = 16
/** All data chunks but the last must have at least so many bytes. */
const smallestChunk = 8192

const incomplete = () => new S3Error('IncompleteBody', 'The request body terminated unexpectedly')
const mismatch = () =>
  new S3Error(
    'SignatureDoesNotMatch',
    'The signature we calculated for a chunk of the request does not match the one you provided.'
  )

/** Takes lines and counted bytes out of a stream of pieces. */
class Pieces {
  readonly #source: AsyncIterator<Buffer>
  #held: Buffer = Buffer.alloc(0)

  constructor(source: AsyncIterable<Buffer>) {
    this.#source = source[Symbol.asyncIterator]()
  }

  async #fill(): Promise<boolean> {
    const next = await this.#source.next()
    if (next.done) return false
    this.#held = this.#held.length === 0 ? next.value : Buffer.concat([this.#held, next.value])
    return true
  }

  async line(): Promise<string> {
    for (;;) {
      const at = this.#held.indexOf('\r\n')
      if (at > lineLimit || (at < 0 && this.#held.length > lineLimit))
        throw new S3Error('InvalidRequest', 'A line of the chunked body is too long.')
      if (at >= 0) {
        const text = this.#held.toString('latin1', 0, at)
        this.#held = this.#held.subarray(at + 2)
        return text
      }
      if (!(await this.#fill())) throw incomplete()
    }
  }

  async *take(bytes: number): AsyncGenerator<Buffer> {
    for (let left = bytes; left > 0;) {
      if (this.#held.length === 0 && !(await this.#fill())) throw incomplete()
      const piece = this.#held.subarray(0, left)
      this.#held = this.#held.subarray(piece.length)
      left -= piece.length
      if (piece.length > 0) yield piece
    }
  }

  async isAtEnd(): Promise<boolean> {
    while (this.#held.length === 0) if (!(await this.#fill())) return true
    return false
  }
}

/**
 * Decodes an `aws-chunked` body and verifies each chunk's signature and the trailer's. Yields the content; trailers that were
 * declared land in `trailers`. A wrong signature shows only after its chunk was yielded: the taker must discard what it has
 * when this throws. (S3 API reference, "Signature Calculations for the Authorization Header: Transferring Payload in Multiple
 * Chunks" and "… Trailing Headers".)
 */
export async function* decodeChunked(
  source: AsyncIterable<Buffer>,
  form: ChunkedForm,
  chain: SignatureChain,
  declared: readonly string[],
  trailers: Map<string, string>
): AsyncGenerator<Buffer> {
  const pieces = new Pieces(source)
  let previous = chain.seed
  let shortBefore = false
  for (;;) {
    const head = /^([0-9a-fA-F]{1,8})(?:;chunk-signature=([0-9a-f]{64}))?$/.exec(await pieces.line())
    if (!head || (form.isSigned && head[2] === undefined))
      throw new S3Error('InvalidRequest', 'The chunked body is not well-formed.')
    const size = parseInt(head[1]!, 16)
    if (size > 0 && shortBefore) {
      throw new S3Error('InvalidChunkSizeError', `Only the last chunk is allowed to have a size less than ${smallestChunk} bytes`)
    }
    shortBefore = size < smallestChunk
    const hash = createHash('sha256')
    for await (const piece of pieces.take(size)) {
      if (form.isSigned) hash.update(piece)
      yield piece
    }
    if (form.isSigned) {
      const expected = sign(
        chain.key,
        chunkStringToSign(chain.at, chain.scope, previous, size === 0 ? emptySha256 : hash.digest('hex'))
      )
      if (!isSameSignature(expected, head[2]!)) throw mismatch()
      previous = expected
    }
    if (size === 0) break
    if ((await pieces.line()) !== '') throw new S3Error('InvalidRequest', 'The chunked body is not well-formed.')
  }
  await readTrailer(pieces, form, chain, previous, declared, trailers)
  if (!(await pieces.isAtEnd())) throw new S3Error('InvalidRequest', 'There is data after the end of the chunked body.')
}

async function readTrailer(
  pieces: Pieces,
  form: ChunkedForm,
  chain: SignatureChain,
  previous: string,
  declared: readonly string[],
  trailers: Map<string, string>
): Promise<void> {
  const malformed = (text: string) =>
    new S3Error('MalformedTrailerError', `The request contained trailing data that was not well-formed: ${text}`)
  let signed = ''
  let signature: string | undefined
  for (let count = 0; ; count++) {
    const line = await pieces.line()
    if (line === '') break
    const at = line.indexOf(':')
    if (!form.hasTrailer || at < 1 || count >= trailerLimit) throw malformed('a line that is no declared header.')
    const [name, value] = [line.slice(0, at).trim().toLowerCase(), line.slice(at + 1).trim()]
    if (name === 'x-amz-trailer-signature' && form.isSigned) signature = value
    else {
      if (!declared.includes(name) || trailers.has(name)) throw malformed(`"${name}" was not declared in x-amz-trailer.`)
      trailers.set(name, value)
      signed += `${name}:${value}\n`
    }
  }
  const absent = declared.filter((name) => !trailers.has(name))
  if (form.hasTrailer && absent.length > 0) throw malformed(`"${absent[0]}" is missing.`)
  if (form.isSigned && form.hasTrailer) {
    const expected = sign(chain.key, trailerStringToSign(chain.at, chain.scope, previous, signed))
    if (signature === undefined || !isSameSignature(expected, signature)) throw mismatch()
  }
}
