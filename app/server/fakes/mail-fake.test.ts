import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { startMailFake, type MailFake } from './mail-fake'

/* Statuses and names of errors as Resend's documentation of API errors lists them. */
let fake: MailFake
beforeAll(async () => {
  fake = await startMailFake({ apiKey: 'key', keep: 3 })
})
afterAll(() => fake.close())
beforeEach(() => fake.clear())

const mail = {
  from: 'Fettle <f@test.example>',
  to: 'a@test.example',
  subject: 'Hello',
  text: 'See http://127.0.0.1:9/x?a=1&b=2.'
}
const send = async (body: unknown, headers: Record<string, string> = {}) => {
  const answer = await fetch(`${fake.url}/emails`, {
    method: 'POST',
    headers: { Authorization: 'Bearer key', 'Content-Type': 'application/json', ...headers },
    body: typeof body === 'string' ? body : JSON.stringify(body)
  })
  return { status: answer.status, body: (await answer.json()) as { id?: string; name?: string; statusCode?: number } }
}

describe('the stand-in for the mail service', () => {
  it('takes a mail once for an idempotency key, and refuses the key for another mail', async () => {
    const key = { 'Idempotency-Key': 'k1' }
    const first = await send(mail, key)
    expect(first.status).toBe(200)
    expect((await send(mail, key)).body.id).toBe(first.body.id)
    expect(fake.sent()).toHaveLength(1)
    expect(await send({ ...mail, subject: 'Other' }, key)).toMatchObject({
      status: 409,
      body: { name: 'invalid_idempotent_request', statusCode: 409 }
    })
    expect(await send(mail, { 'Idempotency-Key': 'x'.repeat(257) })).toMatchObject({
      status: 400,
      body: { name: 'invalid_idempotency_key' }
    })
  })

  it.each([
    ['no key', mail, { Authorization: '' }, 401, 'missing_api_key'],
    ['a wrong key', mail, { Authorization: 'Bearer x' }, 401, 'validation_error'],
    ['no address', { ...mail, to: undefined }, {}, 422, 'missing_required_field'],
    ['no text', { ...mail, text: undefined }, {}, 422, 'missing_required_field'],
    ['an address that is none', { ...mail, to: 'a' }, {}, 422, 'validation_error'],
    ['a sender that is none', { ...mail, from: 'Fettle' }, {}, 422, 'validation_error'],
    ['too many addresses', { ...mail, to: Array(51).fill('a@test.example') }, {}, 422, 'validation_error'],
    ['no JSON', '{', {}, 422, 'validation_error'],
    ['a list', '[]', {}, 422, 'validation_error']
  ])('refuses %s', async (_, body, headers, status, name) => {
    expect(await send(body, headers as Record<string, string>)).toMatchObject({ status, body: { name, statusCode: status } })
    expect(fake.sent()).toEqual([])
  })

  it('fails as often as it is told', async () => {
    fake.failNext(1, 429)
    expect((await send(mail)).status).toBe(429)
    fake.failNext(1)
    expect((await send(mail)).status).toBe(500)
    expect((await send(mail)).status).toBe(200)
  })

  it('keeps the newest, and shows them escaped, with their links', async () => {
    for (const subject of ['one', 'two', 'three', '<b>four</b>']) await send({ ...mail, subject })
    expect(fake.sent().map((one) => one.subject)).toEqual(['<b>four</b>', 'three', 'two'])
    const html = await (await fetch(fake.url)).text()
    expect(html).toContain('&lt;b&gt;four&lt;/b&gt;')
    expect(html).toContain('<a href="http://127.0.0.1:9/x?a=1&amp;b=2">http://127.0.0.1:9/x?a=1&amp;b=2</a>.')
    const listed = (await (await fetch(`${fake.url}/sent?to=a@test.example`)).json()) as unknown[]
    expect(listed).toHaveLength(3)
  })
})
