import { GitHub, OAuth2Tokens } from 'arctic'
import { redirect } from 'react-router'
import { Authenticator } from 'remix-auth'
import { GitHubStrategy, OAuth2RequestError } from 'remix-auth-github'
import { z } from 'zod'
import { codeChallenge } from '~/domain/accounts/pkce.server'
import {
  attemptLifeMs,
  openAttempt,
  signInByGithub,
  takeAttempt,
  type GithubProfile
} from '~/domain/accounts/sign-in-by-github.server'
import type { SignedIn } from '~/domain/accounts/sign-in-by-mail.server'
import type { Config } from './config.server'
import { secretCookie } from './cookies.server'
import type { Services } from './services.server'
import { sessionToken } from './session.server'

const timeoutMs = 10_000
const scopes: ('read:user' | 'user:email')[] = ['read:user', 'user:email']

/** The provider did not answer as it should; the person can only try again. */
export class ProviderError extends Error {}

const below = (base: string, path: string) => new URL(path, base.endsWith('/') ? base : `${base}/`)

/** The cookie that ties attempts to the browser they began in. */
export const attemptCookie = (config: Config) => secretCookie(config, 'fettle-attempt', attemptLifeMs)

/** Arctic's client with the addresses of the configuration and a PKCE verifier, neither of which the original takes. */
class GithubClient extends GitHub {
  readonly #github: Config['github']
  readonly #callback: string

  constructor(github: Config['github'], callback: string) {
    super(github.clientId, github.clientSecret, callback)
    this.#github = github
    this.#callback = callback
  }

  override createAuthorizationURL(state: string, asked: string[], verifier?: string): URL {
    const url = below(this.#github.webUrl, 'login/oauth/authorize')
    url.search = super.createAuthorizationURL(state, asked).search
    if (verifier !== undefined) {
      url.searchParams.set('code_challenge', codeChallenge(verifier))
      url.searchParams.set('code_challenge_method', 'S256')
    }
    return url
  }

  override async validateAuthorizationCode(code: string, verifier?: string): Promise<OAuth2Tokens> {
    const { clientId, clientSecret, webUrl } = this.#github
    const body = new URLSearchParams({
      grant_type: 'authorization_code',
      client_id: clientId,
      client_secret: clientSecret,
      code,
      redirect_uri: this.#callback,
      ...(verifier === undefined ? {} : { code_verifier: verifier })
    })
    const answer = await ask(below(webUrl, 'login/oauth/access_token'), { method: 'POST', body })
    const error = z.object({ error: z.string(), error_description: z.string().optional() }).safeParse(answer)
    if (error.success) throw new OAuth2RequestError(error.data.error, error.data.error_description ?? null, null, null)
    const tokens = z.looseObject({ access_token: z.string().min(1) }).safeParse(answer)
    if (!tokens.success) throw new ProviderError('the answer holds no access token')
    return new OAuth2Tokens(tokens.data)
  }
}

/** One request to the provider; whatever goes wrong on its side is a ProviderError without any of its text. */
async function ask(url: URL, init: RequestInit): Promise<unknown> {
  try {
    const response = await fetch(url, {
      ...init,
      headers: { Accept: 'application/json', 'User-Agent': 'Fettle', ...init.headers },
      redirect: 'error',
      signal: AbortSignal.timeout(timeoutMs)
    })
    if (response.ok) return await response.json()
    throw new ProviderError(`${url.pathname} answered ${response.status}`)
  } catch (error) {
    if (error instanceof ProviderError) throw error
    throw new ProviderError(`${url.pathname}: ${error instanceof Error ? error.message : 'failed'}`, { cause: error })
  }
}

const userShape = z.object({ id: z.number().int().positive(), login: z.string().min(1), name: z.string().nullish() })
const emailsShape = z.array(z.object({ email: z.string(), primary: z.boolean(), verified: z.boolean() }))

async function loadProfile(config: Config, tokens: OAuth2Tokens): Promise<GithubProfile> {
  const init = { headers: { Authorization: `Bearer ${tokens.accessToken()}`, Accept: 'application/vnd.github+json' } }
  const [user, emails] = await Promise.all([
    ask(below(config.github.apiUrl, 'user'), init),
    ask(below(config.github.apiUrl, 'user/emails'), init)
  ])
  const parsed = z.object({ user: userShape, emails: emailsShape }).safeParse({ user, emails })
  if (!parsed.success) throw new ProviderError('the profile has another shape than expected', { cause: parsed.error })
  const verified = parsed.data.emails.filter((entry) => entry.verified)
  const email = verified.find((entry) => entry.primary) ?? verified[0]
  const { id, login, name } = parsed.data.user
  return { id, login, name: name ?? null, verifiedEmail: email?.email ?? null }
}

/**
 * The strategy with attempts of our own: a state for each, stored hashed, used once, bound to the browser, with PKCE. The original has one
 * unsigned state cookie for all tabs and no PKCE.
 */
class GithubSignIn extends GitHubStrategy<SignedIn> {
  readonly #services: Services
  readonly #client: GithubClient

  constructor(services: Services) {
    const { github, publicOrigin } = services.config
    const redirectURI = `${publicOrigin}/sign-in/github/callback`
    super({ clientId: github.clientId, clientSecret: github.clientSecret, redirectURI, scopes }, () => {
      throw new Error('This strategy verifies by itself')
    })
    this.#services = services
    this.#client = new GithubClient(github, redirectURI)
    this.client = this.#client
  }

  /** Without a state in the address: sends the browser to the provider. With one: finishes the attempt. */
  override async authenticate(request: Request): Promise<SignedIn> {
    const { config } = this.#services
    const query = new URL(request.url).searchParams
    const cookie = attemptCookie(config)
    const browser = cookie.read(request.headers.get('Cookie'))
    const state = query.get('state')
    if (state === null && request.method === 'POST') {
      const attempt = await openAttempt(this.#services, { browser, returnTo: query.get('return') })
      const url = this.#client.createAuthorizationURL(attempt.state, scopes, attempt.codeVerifier)
      throw redirect(url.href, { headers: { 'Set-Cookie': cookie.set(attempt.browser) } })
    }
    const attempt = await takeAttempt(this.#services, { browser, state })
    const error = query.get('error')
    if (error !== null) throw new OAuth2RequestError(error, null, null, state)
    const tokens = await this.#client.validateAuthorizationCode(query.get('code') ?? '', attempt.codeVerifier)
    const profile = await loadProfile(config, tokens)
    const oldSession = sessionToken(config, request)
    return signInByGithub(this.#services, { profile, returnTo: attempt.returnTo, oldSession })
  }
}

/** Remix-auth with the one strategy of this site, named `github`. */
export const authenticator = (services: Services) => new Authenticator<SignedIn>().use(new GithubSignIn(services), 'github')

export { OAuth2RequestError }
