import { type MiddlewareFunction } from 'react-router'
import { resumeSession, sessionMaxMs } from '~/domain/accounts/sessions.server'
import type { Config } from './config.server'
import { actorContext, sessionContext } from './context'
import { secretCookie } from './cookies.server'
import { services } from './services.server'

/** The cookie lives as long as a session can; when the session really ends is written in its row. */
export const sessionCookie = (config: Config) => secretCookie(config, 'fettle', sessionMaxMs)

/** The session's secret as the browser sent it, unchecked. */
export const sessionToken = (config: Config, request: Request) => sessionCookie(config).read(request.headers.get('Cookie'))

/**
 * Root middleware: finds out who asks, for every page, data request and endpoint. What such a request gets may depend on the person, so
 * an answer that does not say how it may be cached is for that person only.
 */
export const loadActor: MiddlewareFunction<Response> = async ({ request, context }, next) => {
  const { db, config, now } = services()
  const session = await resumeSession(db, sessionToken(config, request), now())
  if (session !== null) {
    context.set(actorContext, session.actor)
    context.set(sessionContext, { idHash: session.idHash })
  }
  const response = await next()
  if (!response.headers.has('Cache-Control')) response.headers.set('Cache-Control', 'private, no-store')
  return response
}
