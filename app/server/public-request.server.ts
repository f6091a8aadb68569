import type { IncomingMessage } from 'node:http'

type Heard = Pick<IncomingMessage, 'url' | 'headers'> & { originalUrl?: string }

/**
 * Gives a request the address that people see: the configured origin, whatever Host, X-Forwarded-Host and X-Forwarded-Proto say, and the
 * path as a URL has it, without dot segments. From here on the guards and the router speak of one and the same address, and a forged or
 * broken header changes none.
 * @returns false where there is no address in it: the request cannot be answered
 */
export function readAsPublic(request: Heard, publicOrigin: string): boolean {
  const target = request.url ?? ''
  // RFC 9112, 3.2.2: a server must take the absolute form, which only proxies are sent.
  const text = target.startsWith('/') ? publicOrigin + target : target
  if (!/^https?:\/\//i.test(text) || !URL.canParse(text)) return false
  const { pathname, search } = new URL(text)
  const origin = new URL(publicOrigin)
  if (!URL.canParse(publicOrigin + pathname + search)) return false
  request.url = request.originalUrl = pathname + search
  request.headers.host = origin.host
  delete request.headers['x-forwarded-host']
  delete request.headers['x-forwarded-proto']
  Object.defineProperty(request, 'protocol', { value: origin.protocol.slice(0, -1), configurable: true })
  return true
}
