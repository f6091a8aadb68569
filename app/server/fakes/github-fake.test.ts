import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Fake } from './fake-http'
import { startGithubFake } from './github-fake'

/* Error codes as GitHub's documentation of OAuth app errors lists them; PKCE by RFC 7636, whose appendix B gives verifier and challenge. */
const verifier = 'dBjftJeZ4CVP-mB92K27uhbUJU1p1r_wW1gFWFOEjXk'
const challenge = 'E9Melhoa2OwvFrEMTJguCHaoeK1t8URWbuGJSstw-cM'
const callbackUrl = 'http://127.0.0.1:9/back'
const client = { client_id: 'c', client_secret: 's' }

let fake: Fake
beforeAll(async () => {
  const person = {
    id: 7,
    login: 'ada<b>',
    name: 'Ada & Co',
    emails: [{ email: 'a@test.example', primary: true, verified: true }]
  }
  fake = await startGithubFake({ people: [person], clientId: 'c', clientSecret: 's', callbackUrl })
})
afterAll(() => fake.close())

const asked = {
  client_id: 'c',
  redirect_uri: callbackUrl,
  state: 'st',
  scope: 'user:email',
  code_challenge: challenge,
  code_challenge_method: 'S256'
}
const authorize = (query: Record<string, string>, init: RequestInit = {}) =>
  fetch(`${fake.url}/login/oauth/authorize?${new URLSearchParams(query)}`, { redirect: 'manual', ...init })
const pick = async (query: Record<string, string> = asked, person = 'ada<b>') => {
  const answer = await authorize(query, { method: 'POST', body: new URLSearchParams({ person }) })
  return new URL(answer.headers.get('Location')!)
}
const exchange = async (members: Record<string, string>, headers: Record<string, string> = { Accept: 'application/json' }) => {
  const answer = await fetch(`${fake.url}/login/oauth/access_token`, {
    method: 'POST',
    headers,
    body: new URLSearchParams(members)
  })
  expect(answer.status).toBe(200)
  return answer
}
const codeOf = async (query?: Record<string, string>) => (await pick(query)).searchParams.get('code')!
const errorOf = async (members: Record<string, string>) => ((await (await exchange(members)).json()) as { error?: string }).error

describe('the stand-in for GitHub', () => {
  it('shows its people, escaped', async () => {
    const html = await (await authorize(asked)).text()
    expect(html).toContain('Ada &amp; Co')
    expect(html).toContain('ada&lt;b&gt;')
  })

  it('gives a code, a token for it, and what the token opens', async () => {
    const back = await pick()
    expect(back.origin + back.pathname).toBe(callbackUrl)
    expect(back.searchParams.get('state')).toBe('st')
    const code = back.searchParams.get('code')!
    const answer = await exchange({ ...client, code, redirect_uri: callbackUrl, code_verifier: verifier })
    const { access_token, token_type } = (await answer.json()) as { access_token: string; token_type: string }
    expect(token_type).toBe('bearer')
    const headers = { Authorization: `Bearer ${access_token}` }
    expect(await (await fetch(`${fake.url}/api/user`, { headers })).json()).toMatchObject({
      id: 7,
      login: 'ada<b>',
      name: 'Ada & Co'
    })
    expect(await (await fetch(`${fake.url}/api/user/emails`, { headers })).json()).toMatchObject([
      { email: 'a@test.example', verified: true }
    ])
    expect(await errorOf({ ...client, code, code_verifier: verifier })).toBe('bad_verification_code')
  })

  it('answers as a form when JSON is not asked for, and takes the credentials by HTTP Basic', async () => {
    const basic = `Basic ${Buffer.from('c:s').toString('base64')}`
    const answer = await exchange({ code: await codeOf(), code_verifier: verifier }, { Authorization: basic, Accept: '*/*' })
    expect(new URLSearchParams(await answer.text()).get('token_type')).toBe('bearer')
  })

  it('refuses the wrong secret, verifier, redirect_uri and code', async () => {
    const rest = { redirect_uri: callbackUrl, code_verifier: verifier }
    expect(await errorOf({ ...client, client_secret: 'x', ...rest, code: await codeOf() })).toBe('incorrect_client_credentials')
    expect(await errorOf({ ...client, ...rest, code: await codeOf(), code_verifier: `${verifier}x` })).toBe(
      'bad_verification_code'
    )
    expect(await errorOf({ ...client, redirect_uri: callbackUrl, code: await codeOf() })).toBe('bad_verification_code')
    expect(await errorOf({ ...client, ...rest, code: await codeOf(), redirect_uri: `${callbackUrl}/x` })).toBe(
      'redirect_uri_mismatch'
    )
    expect(await errorOf({ ...client, ...rest, code: 'none' })).toBe('bad_verification_code')
  })

  it('sends the browser back with the error of a refusal or a bad request, and nowhere for a client it does not know', async () => {
    expect((await pick(asked, '')).searchParams.get('error')).toBe('access_denied')
    for (const redirect_uri of ['https://elsewhere.example/', 'http://127.0.0.1:9/other', 'x']) {
      const answer = await authorize({ ...asked, redirect_uri })
      const back = new URL(answer.headers.get('Location')!)
      expect([back.origin + back.pathname, back.searchParams.get('error')]).toEqual([callbackUrl, 'redirect_uri_mismatch'])
    }
    expect((await authorize({ ...asked, client_id: 'x' })).status).toBe(404)
  })

  it('keeps the API behind the token, and the addresses behind their scope', async () => {
    expect((await fetch(`${fake.url}/api/user`)).status).toBe(401)
    expect((await fetch(`${fake.url}/api/user`, { headers: { Authorization: 'Bearer x' } })).status).toBe(401)
    const answer = await exchange({ ...client, code: await codeOf({ ...asked, scope: 'read:user' }), code_verifier: verifier })
    const { access_token } = (await answer.json()) as { access_token: string }
    expect((await fetch(`${fake.url}/api/user/emails`, { headers: { Authorization: `Bearer ${access_token}` } })).status).toBe(
      404
    )
  })
})
