import { createHash, randomBytes, timingSafeEqual } from 'node:crypto'
import type { IncomingMessage, ServerResponse } from 'node:http'
import { escapeHtml, readBody, redirectTo, sendJson, sendPage, sendText, startFake, type Fake } from './fake-http'

/** Somebody who can be picked on the authorize page. */
export type GithubPerson = {
  id: number
  login: string
  name: string | null
  /** What they are here to show, on the page where somebody is picked. */
  part?: string
  emails: { email: string; primary: boolean; verified: boolean }[]
}

export type GithubFakeOptions = {
  port?: number
  people: GithubPerson[]
  clientId: string
  clientSecret: string
  /** The callback that the application is registered with; an authorize request may name it or a path below it. */
  callbackUrl: string
}

type Grant = { login: string; redirectUri: string; challenge: string | null; scope: string; expiresAt: number }
type Token = { login: string; scope: string }

const codeLifeMs = 10 * 60_000
const maxKept = 1000

/**
 * GitHub's sign-in as its own HTTP has it (OAuth 2.0 web application flow with PKCE by S256, RFC 6749 and RFC 7636, and the two user
 * resources), with a page of our own to pick a person on. The API lies below `/api`.
 */
export async function startGithubFake(options: GithubFakeOptions): Promise<Fake> {
  const grants = new Map<string, Grant>()
  const tokens = new Map<string, Token>()
  const people = new Map(options.people.map((person) => [person.login, person]))
  const state: State = { options, grants, tokens, people }
  return startFake(options.port ?? 0, async (req, res, url) => {
    const route = `${req.method} ${url.pathname}`
    if (route === 'GET /login/oauth/authorize') return showPeople(state, res, url)
    if (route === 'POST /login/oauth/authorize')
      return takePick(state, res, url, new URLSearchParams(await readBody(req)).get('person'))
    if (route === 'POST /login/oauth/access_token') return giveToken(state, req, res)
    if (url.pathname === '/api/user' || url.pathname === '/api/user/emails') return giveUser(state, req, res, url.pathname)
    if (route === 'GET /') return sendPage(res, 200, 'Stand-in for GitHub', '<p class="say">Only its sign-in is here.</p>')
    return sendText(res, 404, 'Not found')
  })
}

type State = {
  options: GithubFakeOptions
  grants: Map<string, Grant>
  tokens: Map<string, Token>
  people: Map<string, GithubPerson>
}

function keep<T>(map: Map<string, T>, key: string, value: T): void {
  if (map.size >= maxKept) map.delete(map.keys().next().value as string)
  map.set(key, value)
}

const isRegistered = (registered: string, asked: string) => {
  const [ours, theirs] = [new URL(registered), URL.canParse(asked) ? new URL(asked) : null]
  return (
    theirs !== null &&
    theirs.origin === ours.origin &&
    (theirs.pathname === ours.pathname || theirs.pathname.startsWith(`${ours.pathname}/`))
  )
}

type Asked = { redirectUri: string; state: string | null; challenge: string | null; scope: string }

/** Reads an authorize request, or answers it with its error. */
function readAsked({ options }: State, res: ServerResponse, url: URL): Asked | null {
  const query = url.searchParams
  if (query.get('client_id') !== options.clientId) {
    sendText(res, 404, 'No application has this client_id.')
    return null
  }
  const state = query.get('state')
  const fail = (error: string, description: string) => {
    const to = new URL(options.callbackUrl)
    to.searchParams.set('error', error)
    to.searchParams.set('error_description', description)
    if (state !== null) to.searchParams.set('state', state)
    redirectTo(res, to.href)
    return null
  }
  const redirectUri = query.get('redirect_uri') ?? options.callbackUrl
  if (!isRegistered(options.callbackUrl, redirectUri))
    return fail('redirect_uri_mismatch', 'This redirect_uri is not registered for the application.')
  const challenge = query.get('code_challenge')
  if (challenge !== null && query.get('code_challenge_method') !== 'S256')
    return fail('invalid_request', 'Only the S256 code_challenge_method is known.')
  return { redirectUri, state, challenge, scope: query.get('scope') ?? '' }
}

function showPeople(state: State, res: ServerResponse, url: URL): void {
  if (readAsked(state, res, url) === null) return
  const action = escapeHtml(url.pathname + url.search)
  const rows = [...state.people.values()].map(
    ({ login, name, part }) =>
      `<li><button class="who" name="person" value="${escapeHtml(login)}"><strong>${escapeHtml(name ?? login)}</strong><small>${escapeHtml(part ?? login)}</small></button></li>`
  )
  sendPage(
    res,
    200,
    'Who are you today?',
    `<p class="say">This page stands in for GitHub. Nobody here is real, and no password is asked.</p>
     <form method="post" action="${action}"><ul>${rows.join('')}</ul><button name="person" value="">Refuse</button></form>`
  )
}

function takePick(state: State, res: ServerResponse, url: URL, login: string | null): void {
  const asked = readAsked(state, res, url)
  if (asked === null) return
  const to = new URL(asked.redirectUri)
  if (asked.state !== null) to.searchParams.set('state', asked.state)
  if (!login) {
    to.searchParams.set('error', 'access_denied')
    to.searchParams.set('error_description', 'The person refused.')
    return redirectTo(res, to.href)
  }
  if (!state.people.has(login)) return sendText(res, 400, 'Nobody here has this login.')
  const code = randomBytes(10).toString('hex')
  keep(state.grants, code, { ...asked, login, expiresAt: Date.now() + codeLifeMs })
  to.searchParams.set('code', code)
  redirectTo(res, to.href)
}

const isSame = (a: string, b: string) => {
  const [x, y] = [a, b].map((text) => createHash('sha256').update(text).digest())
  return timingSafeEqual(x!, y!)
}

/** The client's credentials, from the body or from HTTP Basic (RFC 6749, section 2.3.1). */
function credentials(req: IncomingMessage, body: URLSearchParams): [string, string] {
  const basic = /^Basic (.+)$/i.exec(req.headers.authorization ?? '')
  if (basic === null) return [body.get('client_id') ?? '', body.get('client_secret') ?? '']
  const text = Buffer.from(basic[1]!, 'base64').toString('utf8')
  const colon = text.indexOf(':')
  return [text.slice(0, colon), text.slice(colon + 1)]
}

/** Errors come with status 200 and an `error` member, as the service has it. */
async function giveToken({ options, grants, tokens }: State, req: IncomingMessage, res: ServerResponse): Promise<void> {
  const body = new URLSearchParams(await readBody(req))
  const answer = (members: Record<string, string>) => {
    if ((req.headers.accept ?? '').includes('application/json')) return sendJson(res, 200, members)
    res.writeHead(200, { 'Content-Type': 'application/x-www-form-urlencoded; charset=utf-8' })
    res.end(new URLSearchParams(members).toString())
  }
  const [clientId, clientSecret] = credentials(req, body)
  if (!isSame(clientId, options.clientId) || !isSame(clientSecret, options.clientSecret))
    return answer({ error: 'incorrect_client_credentials', error_description: 'Wrong client_id or client_secret.' })
  const code = body.get('code') ?? ''
  const grant = grants.get(code)
  grants.delete(code)
  const bad = () => answer({ error: 'bad_verification_code', error_description: 'The code is wrong, used or too old.' })
  if (grant === undefined || grant.expiresAt < Date.now()) return bad()
  if ((body.get('redirect_uri') ?? grant.redirectUri) !== grant.redirectUri)
    return answer({ error: 'redirect_uri_mismatch', error_description: 'Another redirect_uri than at the start.' })
  if (grant.challenge !== null) {
    const verifier = body.get('code_verifier') ?? ''
    if (!isSame(createHash('sha256').update(verifier).digest('base64url'), grant.challenge)) return bad()
  }
  const token = `gho_${randomBytes(18).toString('hex')}`
  keep(tokens, token, { login: grant.login, scope: grant.scope })
  answer({ access_token: token, token_type: 'bearer', scope: grant.scope.split(/[ ,]+/).join(',') })
}

function giveUser({ tokens, people }: State, req: IncomingMessage, res: ServerResponse, path: string): void {
  if (req.method !== 'GET') return sendJson(res, 404, { message: 'Not Found', status: '404' })
  if (!req.headers['user-agent']) return sendText(res, 403, 'A User-Agent header is needed.')
  const token = /^(?:Bearer|token) (.+)$/i.exec(req.headers.authorization ?? '')
  if (token === null) return sendJson(res, 401, { message: 'Requires authentication', status: '401' })
  const known = tokens.get(token[1]!)
  const person = known && people.get(known.login)
  if (!known || !person) return sendJson(res, 401, { message: 'Bad credentials', status: '401' })
  const scopes = known.scope.split(/[ ,]+/)
  const headers = { 'X-OAuth-Scopes': scopes.join(', ') }
  if (path === '/api/user')
    return sendJson(
      res,
      200,
      { login: person.login, id: person.id, type: 'User', site_admin: false, name: person.name, email: null },
      headers
    )
  if (!scopes.includes('user:email') && !scopes.includes('user'))
    return sendJson(res, 404, { message: 'Not Found', status: '404' }, headers)
  sendJson(
    res,
    200,
    person.emails.map((entry) => ({ ...entry, visibility: entry.primary ? 'private' : null })),
    headers
  )
}
