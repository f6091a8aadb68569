import { S3Error } from './errors'

export type QueryPair = readonly [name: string, value: string]

/** Percent-encodes UTF-8 except RFC 3986's unreserved characters, the encoding of Signature Version 4; a slash is kept on demand. */
export function encodeUri(text: string, keepSlash = false): string {
  const encoded = encodeURIComponent(text).replace(/[!'()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`)
  return keepSlash ? encoded.replaceAll('%2F', '/') : encoded
}

/** Decodes percent escapes; throws InvalidURI when they are broken or no UTF-8. */
export function decodeUri(text: string): string {
  try {
    return decodeURIComponent(text)
  } catch {
    throw new S3Error('InvalidURI', "Couldn't parse the specified URI.")
  }
}

/** The decoded pairs of a raw query string, in their order; `+` reads as a space, a name without `=` has an empty value. */
export function parseQuery(raw: string): QueryPair[] {
  if (raw === '') return []
  return raw
    .split('&')
    .filter((part) => part !== '')
    .map((part) => {
      const at = part.indexOf('=')
      const text = (piece: string) => decodeUri(piece.replaceAll('+', ' '))
      return at < 0 ? [text(part), ''] : [text(part.slice(0, at)), text(part.slice(at + 1))]
    })
}

/**
 * Splits a request target into the raw path and the raw query. Nothing is normalised: `..` and `%2e%2e` are
 * ordinary text of a key. Throws InvalidURI for what is no path, and for bytes that should have been percent-encoded.
 */
export function splitTarget(target: string): { path: string; query: string } {
  if (!/^\/[\x21-\x7e]*$/.test(target)) throw new S3Error('InvalidURI', "Couldn't parse the specified URI.")
  const at = target.indexOf('?')
  return at < 0 ? { path: target, query: '' } : { path: target.slice(0, at), query: target.slice(at + 1) }
}

/** Bucket and key of a path-style address; either may be empty. The key is everything after the bucket's slash. */
export function splitPath(path: string): { bucket: string; key: string } {
  const decoded = decodeUri(path)
  const at = decoded.indexOf('/', 1)
  return at < 0 ? { bucket: decoded.slice(1), key: '' } : { bucket: decoded.slice(1, at), key: decoded.slice(at + 1) }
}
