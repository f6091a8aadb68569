export type ByteRange = { start: number; end: number }

/**
 * Reads a Range header against a size in bytes (RFC 9110, 14.1.2). `end` is inclusive.
 * `null` means the whole content: no header, another unit, several ranges (the S3 API serves one at a time) or a header
 * that is not well-formed, which RFC 9110 tells a server to ignore.
 */
export function parseRange(header: string | undefined, size: number): ByteRange | 'unsatisfiable' | null {
  const found = /^bytes=(\d{0,15})-(\d{0,15})$/.exec(header ?? '')
  if (!found || (found[1] === '' && found[2] === '')) return null
  if (found[1] === '') {
    const last = Number(found[2])
    return last === 0 || size === 0 ? 'unsatisfiable' : { start: Math.max(0, size - last), end: size - 1 }
  }
  const start = Number(found[1])
  const end = found[2] === '' ? size - 1 : Number(found[2])
  if (found[2] !== '' && end < start) return null
  return start >= size ? 'unsatisfiable' : { start, end: Math.min(end, size - 1) }
}
