import { createHash, createHmac, timingSafeEqual } from 'node:crypto'
import { decodeUri, encodeUri, type QueryPair } from './uri'

/**
 * AWS Signature Version 4 as published in the S3 API reference, "Authenticating Requests (AWS Signature Version 4)".
 * Pure: no clock, no I/O.
 */

export const algorithm = 'AWS4-HMAC-SHA256'
export const unsignedPayload = 'UNSIGNED-PAYLOAD'

/** Lower-case names; repeated headers joined by a comma; values trimmed, runs of spaces made one. */
export type HeaderMap = ReadonlyMap<string, string>

/** What is signed: the method, the raw (still encoded) path, the decoded query without the signature, the headers. */
export type SignedParts = { method: string; path: string; query: readonly QueryPair[]; headers: HeaderMap }

/** Collects node's flat list of raw headers into a map as the canonical request wants it. */
export function headerMap(raw: readonly string[]): HeaderMap {
  const headers = new Map<string, string>()
  for (let i = 0; i + 1 < raw.length; i += 2) {
    const name = raw[i]!.toLowerCase()
    const value = raw[i + 1]!.trim().replace(/ +/g, ' ')
    const before = headers.get(name)
    headers.set(name, before === undefined ? value : `${before},${value}`)
  }
  return headers
}

export const sha256Hex = (data: string | Uint8Array): string => createHash('sha256').update(data).digest('hex')
const hmac = (key: string | Uint8Array, data: string): Buffer => createHmac('sha256', key).update(data).digest()

/** SHA-256 of nothing, in hex. */
export const emptySha256 = sha256Hex('')

const byCodeUnit = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0)

/** The canonical request. S3 encodes the path once and does not normalise it. */
export function canonicalRequest(parts: SignedParts, signedHeaders: readonly string[], payloadHash: string): string {
  const query = parts.query
    .map(([name, value]) => [encodeUri(name), encodeUri(value)] as const)
    .sort((a, b) => byCodeUnit(a[0], b[0]) || byCodeUnit(a[1], b[1]))
    .map(([name, value]) => `${name}=${value}`)
    .join('&')
  const headers = signedHeaders.map((name) => `${name}:${parts.headers.get(name) ?? ''}\n`).join('')
  return [parts.method, encodeUri(decodeUri(parts.path), true), query, headers, signedHeaders.join(';'), payloadHash].join('\n')
}

/** `at` is the request's instant as `YYYYMMDDTHHMMSSZ`, `scope` is `day/region/service/aws4_request`. */
export const stringToSign = (at: string, scope: string, canonical: string): string =>
  [algorithm, at, scope, sha256Hex(canonical)].join('\n')

export function signingKey(secret: string, day: string, region: string, service: string): Buffer {
  return hmac(hmac(hmac(hmac(`AWS4${secret}`, day), region), service), 'aws4_request')
}

export const sign = (key: Uint8Array, text: string): string => hmac(key, text).toString('hex')

/** What a chunk of a signed chunked upload is signed over: each signature covers the one before it. */
export const chunkStringToSign = (at: string, scope: string, previous: string, dataSha256: string): string =>
  [`${algorithm}-PAYLOAD`, at, scope, previous, emptySha256, dataSha256].join('\n')

/** What the trailing headers of a chunked upload are signed over; `trailers` holds `name:value\n` for each of them. */
export const trailerStringToSign = (at: string, scope: string, previous: string, trailers: string): string =>
  [`${algorithm}-TRAILER`, at, scope, previous, sha256Hex(trailers)].join('\n')

/** Compares two hexadecimal signatures in constant time. */
export function isSameSignature(a: string, b: string): boolean {
  const [x, y] = [Buffer.from(a), Buffer.from(b)]
  return x.length === y.length && timingSafeEqual(x, y)
}
