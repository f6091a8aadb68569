import { createContext, redirect, type MiddlewareFunction } from 'react-router'
import { DomainError, statusOf } from '~/lib/domain-error'
import { authenticator, OAuth2RequestError, ProviderError } from './github-sign-in.server'
import { log } from './log.server'
import { services } from './services.server'
import { sessionCookie } from './session.server'

type Problem = { status: number; heading: string; message: string }

/** Why the browser is not signed in, for the page that says so. */
export const signInProblemContext = createContext<Problem | null>(null)

function problemOf(error: unknown): Problem {
  if (error instanceof DomainError)
    return { status: statusOf[error.kind], heading: 'You are not signed in', message: error.message }
  if (error instanceof OAuth2RequestError && error.code === 'access_denied')
    return {
      status: 403,
      heading: 'You said no',
      message: 'GitHub was not allowed to tell us who you are, so you are not signed in.'
    }
  if (error instanceof OAuth2RequestError || error instanceof ProviderError) {
    log('warn', 'github-sign-in-failed', { error: error instanceof OAuth2RequestError ? error.code : error.message })
    return {
      status: 502,
      heading: 'GitHub did not answer as it should',
      message: 'The sign-in could not be finished, and nothing has changed. Try once more, or take a link by mail.'
    }
  }
  throw error
}

/** Finishes the sign-in before any loader runs: loaders never set a session. */
export const finishGithubSignIn: MiddlewareFunction<Response> = async ({ request, context }, next) => {
  const given = services()
  try {
    const address = new URL(new URL(request.url).search, `${given.config.publicOrigin}/sign-in/github/callback`)
    const headers = { Cookie: request.headers.get('Cookie') ?? '' }
    const { sessionToken, returnTo } = await authenticator(given).authenticate('github', new Request(address, { headers }))
    return redirect(returnTo, { headers: { 'Set-Cookie': sessionCookie(given.config).set(sessionToken) } })
  } catch (error) {
    context.set(signInProblemContext, problemOf(error))
  }
  return next()
}
