import { createHash } from 'node:crypto'
import type { IncomingMessage } from 'node:http'
import type { Authenticated } from './auth'
import {
  checkForm,
  checksumHeader,
  checksumNames,
  checksumOfHeader,
  decodeBase64,
  startChecksum,
  type ChecksumName,
  type Checksums
} from './checksums'
import { chunkedForms, decodeChunked } from './chunked'
import { S3Error } from './errors'
import { unsignedPayload } from './signature'

export type Received = { bytes: number; md5: Buffer; checksums: Checksums }

/** How the body of one request is to be read: `amz` finds an `x-amz-…` header (or presigned query parameter). */
export type BodySource = {
  request: IncomingMessage
  auth: Authenticated
  header: (name: string) => string | undefined
  amz: (name: string) => string | undefined
  /** Tells a client that waits (Expect: 100-continue) to send the body. */
  invite: () => void
}

/** The stated sizes and digests of a body, checked for form before a byte of it is read. */
type Stated = { bytes: number; md5?: Buffer; checksums: Checksums; declared: string[]; sha256?: string }

/**
 * Reads a body to its end, piece by piece into `write`, and verifies all that was stated about it: length, payload hash, chunk
 * signatures, Content-MD5 and `x-amz-checksum-…` (header or trailer). Throws the S3Error of the first thing that does not hold; the
 * taker then discards what was written. At most `limit` bytes are read.
 */
export async function receive(
  source: BodySource,
  limit: number,
  write: (piece: Buffer) => Promise<void> | void
): Promise<Received> {
  const stated = readStated(source)
  if (stated.bytes > limit) throw tooLarge(stated.bytes, limit)
  source.invite()
  const raw: AsyncIterable<Buffer> = source.request.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>
  const form = chunkedForms[source.auth.payload]
  const trailers = new Map<string, string>()
  const pieces = form ? decodeChunked(raw, form, source.auth.chain, stated.declared, trailers) : raw

  const md5 = createHash('md5')
  const sha256 = stated.sha256 === undefined ? undefined : createHash('sha256')
  const names = [...Object.keys(stated.checksums), ...stated.declared.map((name) => checksumOfHeader(name)!)] as ChecksumName[]
  const digesters = names.map((name) => [name, startChecksum(name)] as const)
  let bytes = 0
  for await (const piece of pieces) {
    bytes += piece.length
    if (bytes > stated.bytes) throw incomplete()
    md5.update(piece)
    sha256?.update(piece)
    for (const [, digester] of digesters) digester.update(piece)
    await write(piece)
  }
  if (bytes !== stated.bytes) throw incomplete()

  if (sha256) compareSha256(sha256.digest('hex'), stated.sha256!)
  const computedMd5 = md5.digest()
  if (stated.md5 && !stated.md5.equals(computedMd5)) {
    throw new S3Error('BadDigest', 'The Content-MD5 you specified did not match what we received.', {
      ExpectedDigest: stated.md5.toString('base64'),
      CalculatedDigest: computedMd5.toString('base64')
    })
  }
  const checksums: Checksums = {}
  for (const [name, digester] of digesters) {
    const expected = stated.checksums[name] ?? trailers.get(checksumHeader(name))!
    checkForm(name, expected)
    const computed = digester.digest().toString('base64')
    if (computed !== expected)
      throw new S3Error('BadDigest', `The ${name.toUpperCase()} you specified did not match the calculated checksum.`)
    checksums[name] = computed
  }
  return { bytes, md5: computedMd5, checksums }
}

/** Reads a small body (an XML document) into memory. */
export async function receiveText(source: BodySource, limit: number): Promise<{ text: string; checksums: Checksums }> {
  const pieces: Buffer[] = []
  if (Number(source.header('content-length') ?? 0) > limit) {
    throw new S3Error('MaxMessageLengthExceeded', 'Your request was too big.', { MaxMessageLengthBytes: String(limit) })
  }
  const { checksums } = await receive(source, limit, (piece) => void pieces.push(piece))
  return { text: Buffer.concat(pieces).toString('utf8'), checksums }
}

function readStated({ auth, header, amz }: BodySource): Stated {
  const { payload } = auth
  const isHash = /^[0-9a-f]{64}$/.test(payload)
  const form = chunkedForms[payload]
  if (payload.startsWith('STREAMING-') && !form) {
    throw new S3Error('NotImplemented', 'A header you provided implies functionality that is not implemented', {
      Header: 'x-amz-content-sha256'
    })
  }
  if (!isHash && !form && payload !== unsignedPayload) {
    throw new S3Error(
      'InvalidArgument',
      'x-amz-content-sha256 must be UNSIGNED-PAYLOAD, a STREAMING form or a valid sha256 value.',
      {
        ArgumentName: 'x-amz-content-sha256'
      }
    )
  }
  if (!form && /(^|[ ,])aws-chunked($|[ ,])/.test(header('content-encoding') ?? '')) {
    throw new S3Error('InvalidRequest', 'Content-Encoding aws-chunked needs a STREAMING form of x-amz-content-sha256.')
  }
  if (!form && header('transfer-encoding') !== undefined) {
    throw new S3Error('NotImplemented', 'A header you provided implies functionality that is not implemented', {
      Header: 'Transfer-Encoding'
    })
  }
  const length = form ? amz('x-amz-decoded-content-length') : header('content-length')
  if (length === undefined || !/^\d{1,15}$/.test(length))
    throw new S3Error('MissingContentLength', 'You must provide the Content-Length HTTP header.')

  const md5Header = header('content-md5')
  const md5 = md5Header === undefined ? undefined : decodeBase64(md5Header)
  if (md5Header !== undefined && md5?.length !== 16)
    throw new S3Error('InvalidDigest', 'The Content-MD5 you specified was invalid.')

  const checksums: Checksums = {}
  for (const name of checksumNames) {
    const value = amz(checksumHeader(name))
    if (value === undefined) continue
    checkForm(name, value)
    checksums[name] = value
  }
  return {
    bytes: Number(length),
    md5,
    checksums,
    declared: declaredTrailers(amz, form?.hasTrailer ?? false, checksums),
    sha256: isHash ? payload : undefined
  }
}

function declaredTrailers(amz: BodySource['amz'], hasTrailer: boolean, checksums: Checksums): string[] {
  const declared = (amz('x-amz-trailer') ?? '')
    .split(',')
    .map((name) => name.trim().toLowerCase())
    .filter((name) => name !== '')
  if (declared.some((name) => checksumOfHeader(name) === undefined))
    throw new S3Error('InvalidRequest', 'The value specified in the x-amz-trailer header is not supported')
  if (declared.length > 0 && !hasTrailer)
    throw new S3Error('InvalidRequest', 'x-amz-trailer needs a STREAMING form of x-amz-content-sha256 with a trailer.')
  const count = declared.length + Object.keys(checksums).length
  if (count > 1)
    throw new S3Error('InvalidRequest', 'Expecting a single x-amz-checksum- header. Multiple checksum Types are not allowed.')
  if (count === 0 && amz('x-amz-sdk-checksum-algorithm') !== undefined) {
    throw new S3Error(
      'InvalidRequest',
      'x-amz-sdk-checksum-algorithm specified, but no corresponding x-amz-checksum-* or x-amz-trailer headers were found.'
    )
  }
  return declared
}

const incomplete = () =>
  new S3Error('IncompleteBody', 'You did not provide the number of bytes specified by the Content-Length HTTP header')

const tooLarge = (bytes: number, limit: number) =>
  new S3Error('EntityTooLarge', 'Your proposed upload exceeds the maximum allowed object size.', {
    ProposedSize: String(bytes),
    MaxSizeAllowed: String(limit)
  })

function compareSha256(computed: string, stated: string): void {
  if (computed === stated) return
  throw new S3Error('XAmzContentSHA256Mismatch', "The provided 'x-amz-content-sha256' header does not match what was computed.", {
    ClientComputedContentSHA256: stated,
    S3ComputedContentSHA256: computed
  })
}
