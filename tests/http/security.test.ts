import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startSite, type Site } from './harness'

let site: Site
beforeAll(async () => {
  site = await startSite()
})
afterAll(() => site?.close())

describe('a write from another origin', () => {
  const elsewhere = 'https://elsewhere.example'
  const doors = [
    '/account',
    '/account.data',
    '/sign-in',
    '/sign-in.data',
    '/sign-out',
    '/sign-out.data',
    '/sign-in/github',
    '/health',
    '/_root.data',
    '/no-such-page'
  ]

  it.each(doors)('is refused at %s, with another Origin, with none, and with a hidden one', async (path) => {
    const member = await site.signInByGithub('vigga')
    const bodies = { intent: 'rename', displayName: 'Taken over' }
    for (const from of [elsewhere, null, 'null']) {
      const answer = await member.fetch(path, { form: bodies, from })
      expect([from, answer.status]).toEqual([from, 403])
    }
    const older = await fetch(site.url + path, {
      method: 'POST',
      headers: { Origin: elsewhere, Cookie: `fettle=${member.cookies.get('fettle')}` },
      body: new URLSearchParams(bodies)
    })
    expect(older.status).toBe(403)
    expect(await member.page('/account')).not.toContain('Taken over')
  })

  it('is taken from our own pages', async () => {
    const member = await site.signInByGithub('vigga')
    expect((await member.fetch('/account', { form: { intent: 'rename', displayName: 'Vigga' } })).status).toBe(302)
    expect((await member.fetch('/sign-out', { form: {} })).status).toBe(302)
  })

  it('is refused when it is larger than a form, before it is read', async () => {
    const member = await site.signInByGithub('vigga')
    expect((await member.fetch('/account', { form: { intent: 'rename', displayName: 'x'.repeat(300_000) } })).status).toBe(413)
  })
})

describe('every page', () => {
  it.each(['/', '/sign-in', '/sign-in/github/callback', '/sign-in/link/none', '/no-such-page'])(
    'runs only scripts with the nonce of its own answer: %s',
    async (path) => {
      const nonces = new Set<string>()
      for (let i = 0; i < 3; i++) {
        const answer = await site.browser().fetch(path)
        const policy = answer.headers.get('Content-Security-Policy') ?? ''
        const nonce = /script-src 'nonce-([\w-]{22})'(;|$)/.exec(policy)?.[1]
        expect(nonce).toBeDefined()
        nonces.add(nonce!)
        for (const rule of ["default-src 'none'", "frame-ancestors 'none'", "base-uri 'none'", "object-src 'none'"])
          expect(policy).toContain(rule)
        expect(policy).not.toContain('unsafe')
        const html = await answer.text()
        const scripts = [...html.matchAll(/<script\b([^>]*)>/g)].map((found) => found[1]!)
        expect(scripts.length).toBeGreaterThan(0)
        for (const attributes of scripts) expect(attributes).toContain(`nonce="${nonce}"`)
        expect(html).not.toMatch(/\son\w+="/)
        expect(html).not.toMatch(/\sstyle="/)
      }
      expect(nonces.size).toBe(3)
    }
  )

  it('says what browsers need to know, errors and endpoints included', async () => {
    for (const path of ['/', '/no-such-page', '/health', '/account', '/sign-in.data']) {
      const { headers } = await site.browser().fetch(path)
      expect(headers.get('X-Content-Type-Options')).toBe('nosniff')
      expect(headers.get('Referrer-Policy')).toBe('strict-origin-when-cross-origin')
      expect(headers.get('Cross-Origin-Opener-Policy')).toBe('same-origin')
      expect(headers.get('X-Powered-By')).toBeNull()
      expect(headers.get('X-Request-Id')).toMatch(/^[\w-]{12}$/)
    }
  })

  it('knows who asks where no page is, too', async () => {
    const member = await site.signInByGithub('tarn')
    for (const path of ['/no-such-page', '/no/such/page']) {
      const html = await member.page(path, 404)
      expect(html).toContain('Tarn Prøve')
    }
    const answer = await member.fetch('/no-such-page.data')
    expect(answer.status).toBe(404)
    expect(await answer.text()).toContain('Tarn Prøve')
  })

  it('is kept by no cache when it may depend on the person', async () => {
    const member = await site.signInByGithub('tarn')
    for (const path of ['/', '/account', '/account.data', '/_root.data'])
      expect((await member.fetch(path)).headers.get('Cache-Control')).toContain('no-store')
  })
})

describe('too many attempts', () => {
  it('are refused for an address, wherever they come from, and counted for each address by itself', async () => {
    const ask = (email: string) => site.browser().fetch('/sign-in', { form: { email } })
    for (let i = 0; i < 5; i++) expect((await ask('flood@test.example')).status).toBe(200)
    const refused = await ask('flood@test.example')
    expect(refused.status).toBe(429)
    const html = await refused.text()
    expect(html).toMatch(/Too many attempts\. Try again in \d+ minutes?\./)
    expect(html).toContain('value="flood@test.example"')
    expect((await ask('FLOOD@test.example')).status).toBe(429)
    expect((await ask('calm@test.example')).status).toBe(200)
  })

  it('are refused for one caller, whatever the addresses', async () => {
    const caller = site.browser('192.0.2.77')
    for (let i = 0; i < 20; i++)
      expect((await caller.fetch('/sign-in', { form: { email: `n${i}@test.example` } })).status).toBe(200)
    expect((await caller.fetch('/sign-in', { form: { email: 'n20@test.example' } })).status).toBe(429)
    expect((await site.browser('192.0.2.78').fetch('/sign-in', { form: { email: 'n20@test.example' } })).status).toBe(200)
  })

  it('of starting at the provider are refused as well', async () => {
    const caller = site.browser('192.0.2.79')
    for (let i = 0; i < 60; i++) expect((await caller.fetch('/sign-in/github', { form: {} })).status).toBe(302)
    expect((await caller.fetch('/sign-in/github', { form: {} })).status).toBe(429)
  })

  it('leave no address and no caller in the database’s counts', async () => {
    const rows = await site.query((db) => db.selectFrom('rate_counts').selectAll().execute())
    expect(JSON.stringify(rows)).not.toMatch(/test\.example|192\.0\.2/)
  })
})

describe('mail', () => {
  it('is sent again when the service fails, and once only', async () => {
    site.mail.failNext(1, 429)
    await site.browser().fetch('/sign-in', { form: { email: 'patient@test.example' } })
    const mail = await site.mailTo('patient@test.example')
    expect(mail.from).toBe('Fettle <fettle@test.example>')
    expect(mail.idempotencyKey).toMatch(/^sign-in\/[0-9a-f]{64}$/)
    const row = () =>
      site.query((db) =>
        db.selectFrom('mail_outbox').selectAll().where('to_address', '=', 'patient@test.example').executeTakeFirstOrThrow()
      )
    await expect.poll(async () => (await row()).sent_at, { timeout: 20_000 }).not.toBeNull()
    expect(await row()).toMatchObject({ attempts: 2, provider_id: mail.id, last_error: null, given_up_at: null, text_body: '' })
    expect(site.mail.sent().filter((one) => one.to.includes('patient@test.example'))).toHaveLength(1)
  })
})
