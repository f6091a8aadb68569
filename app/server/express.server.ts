import { randomBytes } from 'node:crypto'
import compression from 'compression'
import express, { type Express, type Handler } from 'express'
import { createRequestHandler } from '@react-router/express'
import { RouterContextProvider, type ServerBuild } from 'react-router'
import { requestInfoContext, type RequestInfo } from './context'
import { logError } from './log.server'
import { readAsPublic } from './public-request.server'
import { isFileForm } from './receive-file.server'
import { refuseForeignOrigin, refuseLargeBody, type GuardedRequest } from './request-guard.server'
import { securityHeaders } from './security-headers.server'
import type { Services } from './services.server'

/**
 * Requests whose handler reads its body as a stream with a limit of its own. A version begins with a digit, so that no other page beside
 * the draft's is meant.
 */
export const streamsItsBody = ({ path, headers }: GuardedRequest) =>
  path.startsWith('/api/v1/compute/') ||
  (path === '/calculators/survival' && isFileForm(headers['content-type'])) ||
  /^\/boards\/[^/]+\/releases\/[^/]+\/bundle(\.data)?$/.test(path) ||
  (/^\/boards\/[^/]+\/releases\/\d[^/]*$/.test(path) && isFileForm(headers['content-type']))

/**
 * The HTTP frame around the router: headers, static files, and the refusals that hold for every path.
 * @param clientDir folder of the client build
 * @param before handlers put in front of the static files (the development server's)
 */
export function createApp(
  services: Services,
  build: () => Promise<ServerBuild>,
  clientDir: string,
  before: Handler[] = []
): Express {
  const { config } = services
  const app = express()
  app.disable('x-powered-by')
  app.set('trust proxy', config.trustProxyHops)

  app.use((req, res, next) => {
    // Without a policy that asks for it a nonce only makes the development build complain of a difference when it hydrates.
    const nonce = config.mode === 'development' ? '' : randomBytes(16).toString('base64url')
    const info: RequestInfo = { id: randomBytes(9).toString('base64url'), nonce, ip: req.ip ?? '' }
    res.locals.info = info
    for (const [name, value] of Object.entries(securityHeaders(config, nonce))) res.setHeader(name, value)
    res.setHeader('X-Request-Id', info.id)
    if (readAsPublic(req, config.publicOrigin)) return next()
    res.status(400).type('text/plain').send('The address of this request cannot be read.')
  })
  app.use((req, res, next) => {
    const request: GuardedRequest = { method: req.method, path: req.path, headers: req.headers }
    const refusal = refuseForeignOrigin(request, config.publicOrigin) ?? refuseLargeBody(request, streamsItsBody)
    if (refusal === null) return next()
    res.setHeader('Connection', 'close')
    res.status(refusal.status).type('application/problem+json')
    res.send(
      JSON.stringify({ type: 'about:blank', title: refusal.title, status: refusal.status, detail: refusal.detail, errors: [] })
    )
  })
  app.use(compression())
  for (const handler of before) app.use(handler)
  app.use('/assets', express.static(`${clientDir}/assets`, { immutable: true, maxAge: '1y', index: false, redirect: false }))
  app.use(express.static(clientDir, { maxAge: '1h', index: false, redirect: false }))

  const handle = createRequestHandler({
    build,
    getLoadContext: (_req, res) => {
      const context = new RouterContextProvider()
      context.set(requestInfoContext, res.locals.info as RequestInfo)
      return context
    }
  })
  app.use(handle)
  app.use(((error, _req, res, _next) => {
    const isBad = typeof error?.status === 'number' && error.status < 500
    if (!isBad) logError('request-failed', error, { id: (res.locals.info as RequestInfo | undefined)?.id })
    if (res.headersSent) return res.destroy()
    res.status(isBad ? error.status : 500).type('text/plain')
    res.send(isBad ? 'The request cannot be read.' : `Something went wrong here. Reference: ${res.locals.info?.id}`)
  }) satisfies express.ErrorRequestHandler)
  return app
}
