import { Writable } from 'node:stream'
import { renderToPipeableStream } from 'react-dom/server'
import { isRouteErrorResponse, ServerRouter, type EntryContext, type RouterContextProvider } from 'react-router'
import { requestInfoContext } from '~/server/context'
import { logError } from '~/server/log.server'
import { DomainError } from '~/lib/domain-error'

const renderTimeoutMs = 10_000

/** Renders a page whole before the first byte leaves: no page streams parts, and a failure still gets its status. */
export default function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  routerContext: EntryContext,
  loadContext: RouterContextProvider
): Promise<Response> {
  const nonce = loadContext.get(requestInfoContext).nonce || undefined
  headers.set('Content-Type', 'text/html; charset=utf-8')
  if (!headers.has('Cache-Control')) headers.set('Cache-Control', 'private, no-store')
  return new Promise((resolve, reject) => {
    let failed = false
    const parts: Buffer[] = []
    const page = new Writable({
      write(part: Buffer, _encoding, done) {
        parts.push(part)
        done()
      },
      final(done) {
        const body = request.method === 'HEAD' ? null : Buffer.concat(parts)
        resolve(new Response(body, { headers, status: failed ? 500 : status }))
        done()
      }
    })
    const { pipe, abort } = renderToPipeableStream(<ServerRouter context={routerContext} url={request.url} nonce={nonce} />, {
      nonce,
      onAllReady() {
        clearTimeout(timer)
        pipe(page)
      },
      onShellError(error) {
        clearTimeout(timer)
        reject(error)
      },
      onError(error) {
        failed = true
        logError('render-failed', error)
      }
    })
    const timer = setTimeout(() => abort(new Error('rendering took too long')), renderTimeoutMs)
  })
}

/** Defects only: an expected failure has its own answer, and a reader who left is none. */
export function handleError(error: unknown, { request }: { request: Request }): void {
  if (request.signal.aborted || error instanceof DomainError) return
  if (isRouteErrorResponse(error) && error.status < 500) return
  logError('handler-failed', error, { method: request.method, path: new URL(request.url).pathname })
}
