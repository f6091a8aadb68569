export type RangeAnswer = { kind: 'whole' } | { kind: 'part'; start: number; end: number } | { kind: 'unsatisfiable' }

/**
 * What a Range header asks of a content of `size` bytes; `end` is inclusive. A header that is malformed, of another unit, or asks for
 * several ranges is answered with the whole, as RFC 9110 (14.2) allows.
 */
export function readRange(header: string | null, size: number): RangeAnswer {
  const match = /^bytes=\s*(\d*)\s*-\s*(\d*)\s*$/i.exec(header ?? '')
  if (!match || (match[1] === '' && match[2] === '')) return { kind: 'whole' }
  const [first, last] = [match[1]!, match[2]!]
  if (first === '') {
    const suffix = Number(last)
    if (suffix === 0 || size === 0) return { kind: 'unsatisfiable' }
    return { kind: 'part', start: Math.max(0, size - suffix), end: size - 1 }
  }
  const start = Number(first)
  if (last !== '' && Number(last) < start) return { kind: 'whole' }
  if (start >= size) return { kind: 'unsatisfiable' }
  return { kind: 'part', start, end: last === '' ? size - 1 : Math.min(Number(last), size - 1) }
}

/**
 * Whether an If-Range header lets a range through: only the very same strong entity tag does. A date does not, because none is sent.
 * Source: RFC 9110, 13.1.5.
 */
export const isIfRangeMet = (header: string | null, etag: string): boolean => header === null || header.trim() === etag

/** Whether an If-None-Match header holds the tag (weak comparison, RFC 9110, 13.1.2). */
export const isNoneMatchHit = (header: string | null, etag: string): boolean =>
  header !== null &&
  (header.trim() === '*' || header.split(',').some((tag) => tag.trim().replace(/^W\//, '') === etag.replace(/^W\//, '')))
