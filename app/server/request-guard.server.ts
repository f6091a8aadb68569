/** What the guard looks at; header names in lower case. */
export type GuardedRequest = { method: string; path: string; headers: Record<string, string | string[] | undefined> }
export type Refusal = { status: 403 | 411 | 413; title: string; detail: string }

const maxFormBytes = 256 * 1024
const one = (value: string | string[] | undefined) => (Array.isArray(value) ? value[0] : value)

/**
 * Refuses an unsafe request from another origin, on every path: pages, data requests and resource routes alike. A browser says where it
 * comes from in Sec-Fetch-Site, an older one in Origin; without either the request is refused. The one exception is the API called
 * without cookies (a program with no session to ride on).
 */
export function refuseForeignOrigin(request: GuardedRequest, publicOrigin: string): Refusal | null {
  if (['GET', 'HEAD', 'OPTIONS'].includes(request.method)) return null
  if (request.path.startsWith('/api/') && request.headers.cookie === undefined) return null
  const site = one(request.headers['sec-fetch-site'])
  const origin = one(request.headers.origin)
  const isOurs = origin === publicOrigin
  if (site !== undefined ? site === 'same-origin' && (origin === undefined || origin !== 'null') : isOurs) return null
  return {
    status: 403,
    title: 'Not allowed',
    detail: 'This request came from another site. Open the page on this site and send it from there.'
  }
}

/** Bodies are small forms, except where an endpoint streams its own upload and counts for itself. */
export function refuseLargeBody(request: GuardedRequest, streamsItsBody: (request: GuardedRequest) => boolean): Refusal | null {
  if (['GET', 'HEAD', 'OPTIONS'].includes(request.method) || streamsItsBody(request)) return null
  const length = one(request.headers['content-length'])
  if (length === undefined && request.headers['transfer-encoding'] !== undefined)
    return { status: 411, title: 'Length required', detail: 'Send the form with its length (Content-Length).' }
  if (length !== undefined && Number(length) > maxFormBytes)
    return { status: 413, title: 'Too large', detail: `A form may have ${maxFormBytes / 1024} KiB at most.` }
  return null
}
