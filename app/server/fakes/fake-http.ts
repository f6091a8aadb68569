import { createServer, type IncomingMessage, type ServerResponse } from 'node:http'
import type { AddressInfo } from 'node:net'

/* What the fakes of outside services share. They listen on loopback only and are never part of the built server. */

export type Fake = { url: string; close(): Promise<void> }
export type Handle = (req: IncomingMessage, res: ServerResponse, url: URL) => Promise<void> | void

const maxBodyBytes = 1024 * 1024

/** Starts a server on 127.0.0.1. @param port 0 takes a free one */
export async function startFake(port: number, handle: Handle): Promise<Fake> {
  const server = createServer((req, res) => {
    const url = new URL(req.url ?? '/', `http://${req.headers.host ?? '127.0.0.1'}`)
    Promise.resolve()
      .then(() => handle(req, res, url))
      .catch((error: unknown) => {
        const status = error instanceof BodyTooLarge ? 413 : 500
        if (status === 500) process.stderr.write(`fake: ${req.method} ${url.pathname}: ${String(error)}\n`)
        if (!res.headersSent) sendText(res, status, status === 413 ? 'The body is too large.' : 'The fake failed.')
        else res.destroy()
      })
  })
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', resolve)
  })
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    close: () =>
      new Promise((resolve, reject) => {
        server.close((error) => (error ? reject(error) : resolve()))
        server.closeAllConnections()
      })
  }
}

class BodyTooLarge extends Error {}

export async function readBody(req: IncomingMessage): Promise<string> {
  const parts: Buffer[] = []
  let size = 0
  for await (const part of req as AsyncIterable<Buffer>) {
    size += part.length
    if (size > maxBodyBytes) throw new BodyTooLarge()
    parts.push(part)
  }
  return Buffer.concat(parts).toString('utf8')
}

export function sendJson(res: ServerResponse, status: number, body: unknown, headers: Record<string, string> = {}): void {
  res.writeHead(status, { 'Content-Type': 'application/json; charset=utf-8', 'Cache-Control': 'no-store', ...headers })
  res.end(JSON.stringify(body))
}

export function sendText(res: ServerResponse, status: number, text: string): void {
  res.writeHead(status, { 'Content-Type': 'text/plain; charset=utf-8' })
  res.end(`${text}\n`)
}

export function redirectTo(res: ServerResponse, location: string): void {
  res.writeHead(302, { Location: location, 'Cache-Control': 'no-store' })
  res.end()
}

export const escapeHtml = (text: string) =>
  text.replace(/[&<>"']/g, (c) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' })[c]!)

const style = `
  body { font: 17px/1.5 'Source Sans 3', sans-serif; margin: 0 auto; padding: 24px 16px 72px; max-width: 44rem; color: #1a1c1b; background: #f5f0e4 }
  h1 { font-size: 1.9rem; line-height: 1.1; margin: 0 0 12px } h2 { font-size: 1.1rem; margin: 0 }
  .say { color: #56534a; margin: 0 0 24px } article { border-top: 1px solid #1a1c1b; padding: 16px 0 } li { margin: 12px 0 }
  ul { list-style: none; padding: 0; margin: 24px 0 } dl { margin: 4px 0 12px; color: #56534a } dt, dd { display: inline; margin: 0 }
  pre { white-space: pre-wrap; overflow-wrap: anywhere; font: inherit; margin: 0 } a { color: #0b5566 }
  button { font: inherit; min-height: 48px; padding: 8px 20px; border: 2px solid #1a1c1b; border-radius: 2px; background: none; color: inherit; cursor: pointer }
  button.who { display: block; width: 100%; text-align: left } button:hover { background: #e9e2d2 }
  button small, .say { display: block } :focus-visible { outline: 3px solid #0b5566; outline-offset: 2px }
  @media (prefers-color-scheme: dark) {
    body { color: #ece5d6; background: #161a1a } .say, dl { color: #b3ad9e } article, button { border-color: #ece5d6 }
    a { color: #79c3cc } button:hover { background: #232a29 } :focus-visible { outline-color: #79c3cc }
  }`

/** A page of a fake. @param body HTML whose texts are escaped already */
export function sendPage(res: ServerResponse, status: number, title: string, body: string): void {
  res.writeHead(status, {
    'Content-Type': 'text/html; charset=utf-8',
    'Cache-Control': 'no-store',
    'Content-Security-Policy': "default-src 'none'; style-src 'unsafe-inline'; frame-ancestors 'none'; base-uri 'none'"
  })
  res.end(
    `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width,initial-scale=1"><title>${escapeHtml(title)}</title><style>${style}</style></head><body><main><h1>${escapeHtml(title)}</h1>${body}</main></body></html>`
  )
}
