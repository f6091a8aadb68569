import { DomainError } from '~/lib/domain-error'

export const maxLimit = 100
export const defaultLimit = 20

/**
 * Reads `limit` and `after` of a list's address; any other parameter that is not allowed is refused, so that a misspelt one is not
 * silently ignored.
 * @throws DomainError `invalid`, one error a parameter
 */
export function readPageQuery(params: URLSearchParams, allowed: readonly string[] = []): { limit: number; after: string | null } {
  const errors: { path: string; message: string }[] = []
  const known = ['limit', 'after', ...allowed]
  for (const name of new Set(params.keys())) {
    if (!known.includes(name))
      errors.push({ path: name.slice(0, 60), message: `is not known here; known are ${known.join(', ')}` })
    else if (params.getAll(name).length > 1) errors.push({ path: name, message: 'is given more than once' })
  }
  const text = params.get('limit')
  const limit = text === null ? defaultLimit : Number(text)
  if (text !== null && (!/^\d{1,3}$/.test(text) || limit < 1 || limit > maxLimit))
    errors.push({ path: 'limit', message: `must be a whole number from 1 to ${maxLimit}` })
  const after = params.get('after')
  if (after !== null && (after === '' || after.length > 300))
    errors.push({ path: 'after', message: 'is not a place that a page of this list gave' })
  if (errors.length > 0) throw new DomainError('invalid', 'The query of this address is not valid.', errors)
  return { limit, after }
}

/** The address of the next page, with the same query but for `after`; null at the end. */
export function nextLink(url: URL, after: string | null): string | null {
  if (after === null) return null
  const params = new URLSearchParams(url.searchParams)
  params.set('after', after)
  return `${url.pathname}?${params}`
}
