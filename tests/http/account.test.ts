import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { textOf } from './browser'
import { linkIn, startSite, type Site } from './harness'

let site: Site
beforeAll(async () => {
  site = await startSite()
})
afterAll(() => site?.close())

const sessionIds = (html: string) => [...html.matchAll(/value="([0-9a-f]{64})"/g)].map((found) => found[1]!)

describe('the account page', () => {
  it('changes the name, which every page then shows', async () => {
    const member = await site.signInByGithub('tarn')
    const answer = await member.fetch('/account', { form: { intent: 'rename', displayName: '  Tarn’s   Workshop ' } })
    expect([answer.status, answer.headers.get('Location')]).toEqual([302, '/account?done=renamed'])
    expect(textOf(await member.page('/account?done=renamed'))).toContain('Your name is changed.')
    expect(textOf(await member.page('/guides'))).toContain('Tarn’s Workshop')
  })

  it('refuses a name at its field and keeps it there', async () => {
    const member = await site.signInByGithub('tarn')
    const answer = await member.fetch('/account', { form: { intent: 'rename', displayName: `<${'y'.repeat(70)}>` } })
    const html = await answer.text()
    expect(answer.status).toBe(400)
    expect(textOf(html)).toContain('Use 60 characters at most.')
    expect(html).toContain(`value="&lt;${'y'.repeat(70)}&gt;"`)
  })

  it.each([{}, { intent: 'delete-all' }, { intent: 'end-session' }, { intent: ['rename', 'end-others'] }])(
    'answers 400 to a form that is none of its own: %j',
    async (form) => {
      const member = await site.signInByGithub('tarn')
      expect((await member.fetch('/account', { form: form as Record<string, string> })).status).toBe(400)
    }
  )

  it('shows the address and the ways in to its owner', async () => {
    const member = await site.signInByGithub('vigga')
    const words = textOf(await member.page('/account'))
    expect(words).toContain('vigga@test.example, confirmed')
    expect(words).toMatch(/GitHub vigga/)
  })

  it('ends one session, all others, and one’s own', async () => {
    const [here, there, elsewhere] = [
      await site.signInByGithub('oust'),
      await site.signInByGithub('oust'),
      await site.signInByGithub('oust')
    ]
    const [one] = sessionIds(await here!.page('/account'))
    expect((await here!.fetch('/account', { form: { intent: 'end-session', session: one! } })).headers.get('Location')).toBe(
      '/account?done=ended'
    )
    const alive = async () =>
      (await Promise.all([here!, there!, elsewhere!].map((b) => b.fetch('/account')))).map((a) => a.status)
    expect((await alive()).sort()).toEqual([200, 200, 302])
    expect((await here!.fetch('/account', { form: { intent: 'end-session', session: one! } })).status).toBe(404)
    await here!.fetch('/account', { form: { intent: 'end-others' } })
    expect(await alive()).toEqual([200, 302, 302])
    const copy = site.browser()
    copy.cookies.set('fettle', here!.cookies.get('fettle')!)
    const out = await here!.fetch('/sign-out', { method: 'POST' })
    expect([out.status, out.headers.get('Location')]).toEqual([302, '/'])
    expect(here!.cookies.has('fettle')).toBe(false)
    expect((await copy.fetch('/account')).status).toBe(302)
  })

  it('does not end somebody else’s session', async () => {
    const mine = await site.signInByGithub('vigga')
    const theirs = await site.signInByGithub('mosse')
    await site.signInByGithub('mosse')
    const [id] = sessionIds(await theirs.page('/account'))
    expect(id).toBeDefined()
    expect((await mine.fetch('/account', { form: { intent: 'end-session', session: id! } })).status).toBe(404)
    expect(sessionIds(await theirs.page('/account'))).toContain(id)
  })

  it('does not sign out by a mere link', async () => {
    const member = await site.signInByGithub('vigga')
    expect((await member.fetch('/sign-out')).headers.get('Location')).toBe('/account')
    expect((await member.fetch('/account')).status).toBe(200)
  })
})

describe('a session', () => {
  it('is over when its row says so, and moves its end on when it is used', async () => {
    const member = await site.signInByMail('slider@test.example', 'Slider')
    const user = () =>
      site.query((db) =>
        db
          .selectFrom('sessions')
          .innerJoin('users', 'users.id', 'sessions.user_id')
          .select(['sessions.expires_at', 'sessions.last_seen_at'])
          .where('email', '=', 'slider@test.example')
          .executeTakeFirstOrThrow()
      )
    const set = (changes: { last_seen_at?: string; expires_at?: string; created_at?: string }) =>
      site.query((db) =>
        db
          .updateTable('sessions')
          .set(changes)
          .where('user_id', '=', (q) => q.selectFrom('users').select('id').where('email', '=', 'slider@test.example'))
          .execute()
      )
    const days = (n: number) => new Date(Date.now() + n * 86_400_000).toISOString()
    const fresh = await user()
    await member.page('/account')
    expect(await user()).toEqual(fresh)
    await set({ last_seen_at: days(-29), expires_at: days(1) })
    await member.page('/account')
    expect((await user()).expires_at > days(29.9)).toBe(true)
    await set({ last_seen_at: days(-1), created_at: days(-170) })
    await member.page('/account')
    expect((await user()).expires_at < days(10.1)).toBe(true)
    await set({ expires_at: days(-0.001) })
    expect((await member.fetch('/account')).status).toBe(302)
  })

  it('ends at once when the user is disabled, who then cannot come back', async () => {
    const member = await site.signInByMail('banned@test.example', 'Banned')
    const github = await site.signInByGithub('mosse')
    await site.query((db) =>
      db
        .updateTable('users')
        .set({ disabled_at: '2026-12-01T00:00:00.000Z' })
        .where('email', 'in', ['banned@test.example', 'mosse@test.example'])
        .execute()
    )
    for (const browser of [member, github]) {
      expect((await browser.fetch('/account')).status).toBe(302)
      expect((await browser.fetch('/account.data')).status).toBe(202)
      expect(textOf(await browser.page('/guides'))).toContain('Sign in')
    }
    await expect(site.signInByGithub('mosse')).rejects.toThrow(/403.*has been disabled/)
    const browser = site.browser()
    await browser.fetch('/sign-in', { form: { email: 'banned@test.example' } })
    const path = linkIn(await site.mailTo('banned@test.example', 2))
    const refused = await browser.fetch(path, { form: {} })
    expect(refused.status).toBe(403)
    expect(browser.cookies.has('fettle')).toBe(false)
  })

  it.each(['', 'x', 'a'.repeat(43), '"; drop table users', '%00', 'é'])('is not opened by the cookie %j', async (value) => {
    const browser = site.browser()
    expect((await browser.fetch('/account', { headers: { Cookie: `fettle=${encodeURI(value)}` } })).status).toBe(302)
  })
})
