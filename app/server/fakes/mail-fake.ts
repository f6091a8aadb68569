import { createHash, randomUUID } from 'node:crypto'
import type { IncomingMessage, ServerResponse } from 'node:http'
import { escapeHtml, readBody, sendJson, sendPage, sendText, startFake, type Fake } from './fake-http'

export type SentMail = {
  id: string
  at: string
  from: string
  to: string[]
  subject: string
  text: string
  idempotencyKey: string | null
}

export type MailFakeOptions = {
  port?: number
  apiKey: string
  /** How many mails are kept; the oldest goes first. */
  keep?: number
}

export type MailFake = Fake & {
  /** What was sent, newest first. */
  sent(): SentMail[]
  /** Answers the next `count` sends with this status instead of taking them. */
  failNext(count: number, status?: 429 | 500): void
  clear(): void
}

type Failure = { status: number; name: string; message: string }
type Remembered = { fingerprint: string; id: string; until: number }

const dayMs = 86_400_000
const maxKeys = 5000

/**
 * Resend's sending resource as its HTTP has it: a bearer key, one JSON object a mail, an Idempotency-Key that is honoured for a day,
 * errors as `{ statusCode, name, message }`. Nothing leaves the machine; `/` shows what was sent.
 */
export async function startMailFake(options: MailFakeOptions): Promise<MailFake> {
  const box: SentMail[] = []
  const keys = new Map<string, Remembered>()
  const failing = { count: 0, status: 500 }

  const send = async (req: IncomingMessage, res: ServerResponse) => {
    const text = await readBody(req)
    const refuse = ({ status, name, message }: Failure) => sendJson(res, status, { statusCode: status, name, message })
    if (failing.count > 0) {
      failing.count--
      return failing.status === 429
        ? sendJson(
            res,
            429,
            { statusCode: 429, name: 'rate_limit_exceeded', message: 'Too many requests.' },
            { 'Retry-After': '1' }
          )
        : refuse({ status: failing.status, name: 'application_error', message: 'The service failed.' })
    }
    const unauthorised = checkKey(req, options.apiKey)
    if (unauthorised) return refuse(unauthorised)
    const key = req.headers['idempotency-key']
    if (key !== undefined && (typeof key !== 'string' || key.length < 1 || key.length > 256))
      return refuse({ status: 400, name: 'invalid_idempotency_key', message: 'The key must have 1 to 256 characters.' })
    const mail = readMail(text)
    if ('status' in mail) return refuse(mail)
    const fingerprint = createHash('sha256').update(text).digest('hex')
    const before = key === undefined ? undefined : keys.get(key)
    if (before !== undefined && before.until > Date.now()) {
      if (before.fingerprint === fingerprint) return sendJson(res, 200, { id: before.id })
      return refuse({ status: 409, name: 'invalid_idempotent_request', message: 'This key was used with another body.' })
    }
    const id = randomUUID()
    if (key !== undefined) {
      if (keys.size >= maxKeys) keys.delete(keys.keys().next().value as string)
      keys.set(key, { fingerprint, id, until: Date.now() + dayMs })
    }
    box.unshift({ id, at: new Date().toISOString(), ...mail, idempotencyKey: key ?? null })
    box.length = Math.min(box.length, options.keep ?? 500)
    sendJson(res, 200, { id })
  }

  const fake = await startFake(options.port ?? 0, async (req, res, url) => {
    const route = `${req.method} ${url.pathname}`
    if (route === 'POST /emails') return send(req, res)
    if (route === 'GET /') return showBox(res, box)
    if (route === 'GET /sent') {
      const to = url.searchParams.get('to')
      return sendJson(res, 200, to === null ? box : box.filter((mail) => mail.to.includes(to)))
    }
    if (url.pathname === '/emails')
      return sendJson(res, 405, { statusCode: 405, name: 'method_not_allowed', message: 'Use POST.' })
    return sendText(res, 404, 'Not found')
  })
  return {
    ...fake,
    sent: () => [...box],
    failNext: (count, status = 500) => Object.assign(failing, { count, status }),
    clear: () => {
      box.length = 0
    }
  }
}

function checkKey(req: IncomingMessage, apiKey: string): Failure | null {
  const given = /^Bearer (.+)$/.exec(req.headers.authorization ?? '')
  if (given === null) return { status: 401, name: 'missing_api_key', message: 'Missing API key.' }
  if (given[1] !== apiKey) return { status: 401, name: 'validation_error', message: 'The API key is not valid.' }
  return null
}

const addressPattern = /^[^\s@<>]+@[^\s@<>]+\.[^\s@<>]+$/
const bare = (address: string) => /<([^<>]+)>\s*$/.exec(address)?.[1] ?? address
const invalid = (message: string): Failure => ({ status: 422, name: 'validation_error', message })

function readMail(text: string): Omit<SentMail, 'id' | 'at' | 'idempotencyKey'> | Failure {
  let body: Record<string, unknown>
  try {
    const parsed: unknown = JSON.parse(text)
    if (typeof parsed !== 'object' || parsed === null || Array.isArray(parsed)) return invalid('The body must be a JSON object.')
    body = parsed as Record<string, unknown>
  } catch {
    return invalid('The body is not JSON.')
  }
  for (const name of ['from', 'to', 'subject'])
    if (body[name] === undefined)
      return { status: 422, name: 'missing_required_field', message: `The field "${name}" is missing.` }
  if (typeof body.from !== 'string' || !addressPattern.test(bare(body.from)))
    return invalid('The field "from" is not an address.')
  const to = (Array.isArray(body.to) ? body.to : [body.to]) as unknown[]
  if (to.length < 1 || to.length > 50) return invalid('The field "to" takes 1 to 50 addresses.')
  if (!to.every((one): one is string => typeof one === 'string' && addressPattern.test(bare(one))))
    return invalid('The field "to" is not an address.')
  if (typeof body.subject !== 'string' || /[\r\n]/.test(body.subject)) return invalid('The field "subject" must be one line.')
  if (typeof body.text !== 'string' && typeof body.html !== 'string')
    return { status: 422, name: 'missing_required_field', message: 'One of "text" and "html" is needed.' }
  return { from: body.from, to, subject: body.subject, text: typeof body.text === 'string' ? body.text : String(body.html) }
}

/** Escapes a mail's text and makes its web addresses links. */
const linked = (text: string) =>
  text
    .split(/(https?:\/\/[^\s<>"'()]*[^\s<>"'().,;:!?])/)
    .map((part, i) => (i % 2 === 1 ? `<a href="${escapeHtml(part)}">${escapeHtml(part)}</a>` : escapeHtml(part)))
    .join('')

function showBox(res: ServerResponse, box: SentMail[]): void {
  const mails = box.map(
    (mail) =>
      `<article><h2>${escapeHtml(mail.subject)}</h2><dl><dt>to </dt><dd>${escapeHtml(mail.to.join(', '))}</dd>, <dt>at </dt><dd><time>${mail.at.slice(0, 19).replace('T', ' ')} UTC</time></dd></dl><pre>${linked(mail.text)}</pre></article>`
  )
  const none = '<p>No mail has been sent yet. Ask for a sign-in link, then load this page again.</p>'
  sendPage(
    res,
    200,
    'Mail that was sent',
    `<p class="say">This page stands in for everybody’s inbox: nothing leaves this machine. Newest first.</p>${mails.join('') || none}`
  )
}
