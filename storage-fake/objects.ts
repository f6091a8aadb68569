import { receive, receiveText, type Received } from './body'
import { noSuchKey, preconditionFailed, type WriteCondition } from './bucket'
import { xmlReply, type Call, type Reply } from './call'
import { checksumHeader, checksumNames, type Checksums } from './checksums'
import { S3Error } from './errors'
import { writeObjectFile, type Description } from './object-file'
import { parseRange } from './range'
import { childrenOf, parseXml, textOf, xmlDocument, type XmlValue } from './xml'

const keptHeaders = ['cache-control', 'content-disposition', 'content-language', 'expires']
const metadataLimit = 2048
const keysPerDelete = 1000

/** PUT of an object: received into a temporary file, verified, then put in place in one step. */
export async function putObject(call: Call): Promise<Reply> {
  const condition = writeCondition(call)
  const headers = describedHeaders(call)
  await call.bucket.check(call.key, condition)
  const { etag, checksums } = await store(call, condition, (received) => ({ headers, etag: received.md5.toString('hex') }))
  return { status: 200, headers: { etag: `"${etag}"`, ...checksumHeaders(checksums) } }
}

async function store(
  call: Call,
  condition: WriteCondition,
  describe: (received: Received) => Pick<Description, 'headers' | 'etag'>
): Promise<Description> {
  const path = call.bucket.temporaryPath()
  const file = await writeObjectFile(path)
  try {
    const received = await receive(call, call.limits.objectBytes, file.write)
    const { bytes, checksums } = received
    const description = { key: call.key, bytes, checksums, modifiedAt: call.now.toISOString(), ...describe(received) }
    await file.finish(description)
    await call.bucket.commit(path, description, condition)
    return description
  } catch (error) {
    await file.discard()
    throw error
  }
}

/** The conditions a write may carry. */
export function writeCondition({ header }: Call): WriteCondition {
  const ifNoneMatch = header('if-none-match')
  if (ifNoneMatch !== undefined && ifNoneMatch !== '*') {
    throw new S3Error('NotImplemented', 'A header you provided implies functionality that is not implemented', {
      Header: 'If-None-Match'
    })
  }
  const ifMatch = header('if-match')
  return { ifAbsent: ifNoneMatch === '*', ifMatch: ifMatch === undefined ? undefined : unquote(ifMatch) }
}

/** The headers of a write that are kept and given back on reading. */
export function describedHeaders({ header, metadata }: Call): Record<string, string> {
  const headers: Record<string, string> = { 'content-type': header('content-type') ?? 'binary/octet-stream' }
  for (const name of keptHeaders) {
    const value = header(name)
    if (value !== undefined) headers[name] = value
  }
  const encodings = (header('content-encoding') ?? '').split(',').map((one) => one.trim())
  const encoding = encodings.filter((one) => one !== '' && one !== 'aws-chunked').join(', ')
  if (encoding !== '') headers['content-encoding'] = encoding
  const size = Object.entries(metadata).reduce(
    (sum, [name, value]) => sum + Buffer.byteLength(name.slice('x-amz-meta-'.length)) + Buffer.byteLength(value),
    0
  )
  if (size > metadataLimit) {
    throw new S3Error('MetadataTooLarge', 'Your metadata headers exceed the maximum allowed metadata size', {
      MaxSizeAllowed: String(metadataLimit),
      Size: String(size)
    })
  }
  for (const [name, value] of Object.entries(metadata)) headers[name] = headerValue(name, value)
  return headers
}

/** A value from a query that is to become a header of an answer. */
function headerValue(name: string, value: string): string {
  if (/^[\t\x20-\x7e\x80-\xff]*$/.test(value)) return value
  throw new S3Error('InvalidArgument', 'Header value cannot be represented using ISO-8859-1.', { ArgumentName: name })
}

export function checksumHeaders(checksums: Checksums): Record<string, string> {
  const headers: Record<string, string> = {}
  for (const name of checksumNames) if (checksums[name] !== undefined) headers[checksumHeader(name)] = checksums[name]
  return headers
}

const overrides = ['content-type', 'content-language', 'expires', 'cache-control', 'content-disposition', 'content-encoding']

/** GET and HEAD of an object, with conditions and a range. */
export async function getObject(call: Call): Promise<Reply> {
  const object = await call.bucket.open(call.key)
  if (!object) throw noSuchKey(call.key)
  let isStreaming = false
  try {
    const { description } = object
    const headers: Record<string, string> = {
      etag: `"${description.etag}"`,
      'last-modified': new Date(description.modifiedAt).toUTCString(),
      'accept-ranges': 'bytes'
    }
    if (isUnmodified(call, description)) return { status: 304, headers }
    Object.assign(headers, description.headers)
    for (const name of overrides) {
      const value = call.query.get(`response-${name}`)
      if (value !== undefined) headers[name] = headerValue(`response-${name}`, value)
    }
    const total = description.bytes
    const range = parseRange(call.header('range'), total)
    if (range === 'unsatisfiable') {
      const details = { RangeRequested: call.header('range')!, ActualObjectSize: String(total) }
      throw new S3Error('InvalidRange', 'The requested range is not satisfiable', details, {
        'content-range': `bytes */${total}`
      })
    }
    if (range) headers['content-range'] = `bytes ${range.start}-${range.end}/${total}`
    else if (call.amz('x-amz-checksum-mode')?.toUpperCase() === 'ENABLED')
      Object.assign(headers, checksumHeaders(description.checksums))
    const { start, end } = range ?? { start: 0, end: total - 1 }
    headers['content-length'] = String(end - start + 1)
    const status = range ? 206 : 200
    if (call.isHead || end < start) return { status, headers }
    isStreaming = true
    return { status, headers, body: object.stream(start, end) }
  } finally {
    if (!isStreaming) await object.close()
  }
}

/** Evaluates the conditions of a read in RFC 9110's order (13.2.2); throws PreconditionFailed. */
function isUnmodified({ header }: Call, { etag, modifiedAt }: Description): boolean {
  const seconds = Math.floor(Date.parse(modifiedAt) / 1000)
  const named = (list: string) =>
    list.trim() === '*' || list.split(',').some((one) => unquote(one.trim().replace(/^W\//, '')) === etag)
  const since = (name: string): number => Math.floor(Date.parse(header(name) ?? '') / 1000)
  const ifMatch = header('if-match')
  if (ifMatch !== undefined) {
    if (!named(ifMatch)) throw preconditionFailed('If-Match')
  } else if (seconds > since('if-unmodified-since')) throw preconditionFailed('If-Unmodified-Since')
  const ifNoneMatch = header('if-none-match')
  return ifNoneMatch !== undefined ? named(ifNoneMatch) : seconds <= since('if-modified-since')
}

const unquote = (etag: string): string => etag.replace(/^"(.*)"$/, '$1')

/** DELETE of an object; the same answer whether it was there or not. */
export async function deleteObject(call: Call): Promise<Reply> {
  await call.bucket.remove(call.key)
  return { status: 204 }
}

/** POST ?delete: removes up to 1,000 objects named in an XML document, whose checksum is required. */
export async function deleteObjects(call: Call): Promise<Reply> {
  const { text, checksums } = await receiveText(call, call.limits.documentBytes)
  if (call.header('content-md5') === undefined && Object.keys(checksums).length === 0) {
    throw new S3Error('InvalidRequest', 'Missing required header for this request: Content-MD5 OR x-amz-checksum-*')
  }
  const document = parseXml(text)
  const keys = childrenOf(document, 'Delete', 'Object').map((one) => textOf(one, 'Key') ?? '')
  if (keys.length === 0 || keys.length > keysPerDelete || keys.includes('')) {
    throw new S3Error('MalformedXML', 'The XML you provided was not well-formed or did not validate against our published schema')
  }
  for (const key of keys) await call.bucket.remove(key)
  const deleted: XmlValue[] = textOf(document, 'Quiet') === 'true' ? [] : keys.map((key) => ({ Key: key }))
  return xmlReply(xmlDocument('DeleteResult', { Deleted: deleted }))
}
