import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { textOf, type Browser } from './browser'
import { linkIn, startSite, type Site } from './harness'

let site: Site
beforeAll(async () => {
  site = await startSite()
})
afterAll(() => site?.close())

const who = async (browser: Browser) => {
  const answer = await browser.fetch('/account')
  return answer.status === 200 ? textOf(await answer.text()) : null
}

/** Starts at GitHub's stand-in and gives the address that would come back, without visiting it. */
async function untilCallback(browser: Browser, login: string, returnTo = '/account'): Promise<string> {
  const start = await browser.fetch('/sign-in/github', { form: { return: returnTo } })
  const picked = await browser.fetch(start.headers.get('Location')!, { form: { person: login } })
  return picked.headers.get('Location')!
}

describe('signing in by GitHub', () => {
  it('goes out with state and PKCE, comes back, and leads to the page that was asked for', async () => {
    const browser = site.browser()
    const start = await browser.fetch('/sign-in/github', { form: { return: '/account?x=1' } })
    expect(start.status).toBe(302)
    const asked = new URL(start.headers.get('Location')!)
    expect(asked.origin + asked.pathname).toBe(`${site.githubUrl}/login/oauth/authorize`)
    expect(asked.searchParams.get('code_challenge_method')).toBe('S256')
    expect(asked.searchParams.get('code_challenge')).toMatch(/^[\w-]{43}$/)
    expect(asked.searchParams.get('state')).toMatch(/^[\w-]{43}$/)
    expect(start.headers.get('Set-Cookie')).toMatch(/^fettle-attempt=[\w-]{43}; .*HttpOnly; SameSite=Lax/)
    const picked = await browser.fetch(asked.href, { form: { person: 'vigga' } })
    const done = await browser.fetch(picked.headers.get('Location')!)
    expect([done.status, done.headers.get('Location')]).toEqual([302, '/account?x=1'])
    expect(await who(browser)).toContain('Signed in as Vigga Testmark.')
  })

  it('gives the same account again, and a new session each time', async () => {
    const browser = await site.signInByGithub('vigga')
    const first = browser.cookies.get('fettle')
    await site.signInByGithub('vigga', browser)
    expect(browser.cookies.get('fettle')).not.toBe(first)
    const old = site.browser()
    old.cookies.set('fettle', first!)
    expect(await who(old)).toBeNull()
    const users = await site.query((db) => db.selectFrom('users').select('id').where('github_id', '=', 4101).execute())
    expect(users).toHaveLength(1)
  })

  it('sets a session cookie that scripts cannot read and other sites cannot send', async () => {
    const browser = site.browser()
    const done = await browser.fetch(await untilCallback(browser, 'vigga'))
    const line = done.headers.getSetCookie().find((cookie) => cookie.startsWith('fettle='))!
    expect(line).toMatch(/^fettle=[\w-]{43}; Max-Age=\d+; Path=\/; HttpOnly; SameSite=Lax$/)
    const stored = await site.query((db) => db.selectFrom('sessions').select('id_hash').execute())
    expect(stored.map((row) => row.id_hash)).not.toContain(browser.cookies.get('fettle'))
    expect(done.headers.get('Cache-Control')).toContain('no-store')
  })

  it('lets several tabs of one browser be at it at once', async () => {
    const browser = site.browser()
    const one = await untilCallback(browser, 'vigga')
    const two = await untilCallback(browser, 'vigga', '/')
    expect((await browser.fetch(two)).headers.get('Location')).toBe('/')
    expect((await browser.fetch(one)).headers.get('Location')).toBe('/account')
  })

  it('refuses a state that was used, and one of another browser, which it leaves to its owner', async () => {
    const browser = site.browser()
    const back = await untilCallback(browser, 'vigga')
    const thief = site.browser()
    await thief.fetch('/sign-in/github', { form: {} })
    const foreign = await thief.fetch(back)
    expect(foreign.status).toBe(409)
    expect(textOf(await foreign.text())).toContain('was not begun in this browser')
    expect(thief.cookies.has('fettle')).toBe(false)
    expect((await browser.fetch(back)).status).toBe(302)
    expect((await browser.fetch(back)).status).toBe(409)
  })

  it('refuses an attempt that took too long', async () => {
    const browser = site.browser()
    const back = await untilCallback(browser, 'vigga')
    await site.query((db) => db.updateTable('oauth_attempts').set({ expires_at: '2020-01-01T00:00:00.000Z' }).execute())
    const late = await browser.fetch(back)
    expect(late.status).toBe(409)
    expect(textOf(await late.text())).toContain('has lapsed')
  })

  it.each([
    ['nothing at all', ''],
    ['a made-up state', '?code=abc&state=guess'],
    ['no code', '?state=']
  ])('says clearly that nobody is signed in, given %s', async (_, query) => {
    const browser = site.browser()
    const answer = await browser.fetch(`/sign-in/github/callback${query}`)
    expect(answer.status).toBe(409)
    expect(textOf(await answer.text())).toContain('You are not signed in')
    expect(browser.cookies.has('fettle')).toBe(false)
  })

  it('understands a refusal at the provider', async () => {
    const browser = site.browser()
    const start = await browser.fetch('/sign-in/github', { form: {} })
    const refused = await browser.fetch(start.headers.get('Location')!, { form: { person: '' }, follow: 1 })
    expect(refused.status).toBe(403)
    expect(textOf(await refused.text())).toContain('You said no')
  })

  it('says so when the provider refuses the code', async () => {
    const browser = site.browser()
    const back = new URL(await untilCallback(browser, 'vigga'))
    back.searchParams.set('code', 'made-up')
    const answer = await browser.fetch(back.href)
    expect(answer.status).toBe(502)
    expect(textOf(await answer.text())).toContain('GitHub did not answer as it should')
  })

  it('joins an account by its address only when the provider verified it', async () => {
    await site.signInByMail('mosse@test.example', 'Mosse by mail')
    await site.signInByMail('unproved@test.example', 'Somebody else')
    const joined = await site.signInByGithub('mosse')
    expect(await who(joined)).toContain('Signed in as Mosse by mail.')
    const apart = await site.signInByGithub('unproved')
    expect(await who(apart)).toContain('Signed in as unproved.')
    const rows = await site.query((db) =>
      db.selectFrom('users').select(['email', 'github_id']).where('github_id', 'in', [4103, 4104]).orderBy('github_id').execute()
    )
    expect(rows).toEqual([
      { email: null, github_id: 4103 },
      { email: 'mosse@test.example', github_id: 4104 }
    ])
  })
})

describe('signing in by a mailed link', () => {
  const ask = async (address: string, returnTo = '/account') => {
    const browser = site.browser()
    const before = site.mail.sent().filter((mail) => mail.to.includes(address)).length
    const answer = await browser.fetch('/sign-in', { form: { email: address, return: returnTo } })
    return { browser, answer, path: linkIn(await site.mailTo(address, before + 1)) }
  }

  it('answers alike for an address that is known and one that is not', async () => {
    await site.signInByMail('known@test.example')
    const words = async (address: string) => textOf(await (await ask(address)).answer.text()).replaceAll(address, 'ADDRESS')
    expect(await words('known@test.example')).toBe(await words('never-seen@test.example'))
  })

  it('uses nothing up when the link is opened, by GET or HEAD, any number of times', async () => {
    const { browser, path } = await ask('opened@test.example')
    for (const method of ['GET', 'HEAD', 'GET']) expect((await browser.fetch(path, { method })).status).toBe(200)
    expect((await browser.fetch(`${path}.data`)).status).toBe(200)
    expect(browser.cookies.has('fettle')).toBe(false)
    expect((await browser.fetch(path, { form: { displayName: 'Opener' } })).headers.get('Location')).toBe('/account')
    expect(await who(browser)).toContain('Signed in as Opener.')
  })

  it('works once, of two presses at the same time too', async () => {
    const { path } = await ask('once@test.example')
    const presses = await Promise.all(
      [site.browser(), site.browser(), site.browser()].map((one) => one.fetch(path, { form: { displayName: 'Once' } }))
    )
    expect(presses.map((answer) => answer.status).sort()).toEqual([302, 409, 409])
    const again = await site.browser().fetch(path)
    expect(again.status).toBe(410)
    expect(textOf(await again.text())).toContain('This link was used')
  })

  it('lapses', async () => {
    const { browser, path } = await ask('late@test.example')
    await site.query((db) =>
      db
        .updateTable('sign_in_tokens')
        .set({ expires_at: '2020-01-01T00:00:00.000Z' })
        .where('email', '=', 'late@test.example')
        .execute()
    )
    expect((await browser.fetch(path)).status).toBe(410)
    expect((await browser.fetch(path, { form: { displayName: 'Late' } })).status).toBe(409)
    expect(browser.cookies.has('fettle')).toBe(false)
  })

  it('keeps only the hash of a token, and erases the mail’s text once it is sent', async () => {
    const { path } = await ask('hashed@test.example')
    const token = path.split('/').at(-1)!
    await expect
      .poll(
        () =>
          site.query((db) => db.selectFrom('mail_outbox').select('sent_at').where('text_body', 'like', `%${token}%`).execute()),
        { timeout: 20_000 }
      )
      .toEqual([])
    const rows = await site.query((db) => db.selectFrom('sign_in_tokens').selectAll().execute())
    expect(JSON.stringify(rows)).not.toContain(token)
  })

  it('has a clear page for a link that never was', async () => {
    for (const token of ['x', 'A'.repeat(43), '%2F%00', 'a'.repeat(2000)]) {
      const answer = await site.browser().fetch(`/sign-in/link/${token}`)
      expect(answer.status).toBe(404)
      expect(textOf(await answer.text())).toContain('This link does not hold')
    }
  })

  it('asks a new member for a name, and keeps the link and what was entered when it cannot be taken', async () => {
    const { browser, path } = await ask('nameless@test.example')
    for (const [displayName, message] of [
      ['', 'Enter the name that others should see.'],
      ['x'.repeat(61), 'Use 60 characters at most.'],
      ['a\u202eb', 'Leave out invisible control characters.']
    ] as const) {
      const answer = await browser.fetch(path, { form: { displayName } })
      expect(answer.status).toBe(400)
      expect(textOf(await answer.text())).toContain(message)
    }
    expect((await browser.fetch(path, { form: { displayName: ' Nameless  No More ' } })).status).toBe(302)
    expect(await who(browser)).toContain('Signed in as Nameless No More.')
  })

  it.each(['', 'no-at', 'a b@test.example', 'a@b', `${'x'.repeat(250)}@test.example`, 'a@test.example\r\nBcc: b@test.example'])(
    'refuses the address %j at its field and keeps it there',
    async (email) => {
      const answer = await site.browser().fetch('/sign-in', { form: { email, return: '/account' } })
      expect(answer.status).toBe(400)
      const html = await answer.text()
      expect(html).toMatch(/aria-invalid="true"/)
      expect(html).toMatch(/name="return" value="\/account"/)
    }
  )
})

describe('where signing in leads', () => {
  it.each([
    '//evil.example',
    'https://evil.example/',
    '/\\evil.example',
    '/\t/evil.example',
    'javascript:alert(1)',
    '/%0d//evil.example/../..//evil.example',
    '/sign-out'
  ])('stays on this site, asked for %j', async (returnTo) => {
    const byGithub = site.browser()
    const back = await byGithub.fetch(await untilCallback(byGithub, 'vigga', returnTo))
    const target = new URL(back.headers.get('Location')!, site.url)
    expect(target.origin).toBe(site.url)
    expect(target.pathname.startsWith('//')).toBe(false)
    const page = await site.browser().fetch(`/sign-in?return=${encodeURIComponent(returnTo)}`)
    expect(await page.text()).not.toContain('value="//')
    const signedIn = await byGithub.fetch(`/sign-in?return=${encodeURIComponent(returnTo)}`)
    expect(new URL(signedIn.headers.get('Location')!, site.url).origin).toBe(site.url)
  })

  it('sends a visitor of a member’s page to sign in and back', async () => {
    const answer = await site.browser().fetch('/account?done=renamed')
    expect([answer.status, answer.headers.get('Location')]).toEqual([302, '/sign-in?return=%2Faccount%3Fdone%3Drenamed'])
  })
})
