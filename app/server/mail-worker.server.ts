import { Resend } from 'resend'
import { claimDueMails, settleMail, type DueMail } from '~/domain/mail/delivery.server'
import { log, logError } from './log.server'
import type { Services } from './services.server'

const sendTimeoutMs = 20_000
/** How long closing waits for attempts under way. One cut off is made again under the same key at the next start. */
const closeWaitMs = 3_000
/** Longer than an attempt can take: a mail is never in two attempts at once. */
const leaseMs = 60_000

export type MailWorkerOptions = {
  pollMs?: number
  concurrency?: number
  /** With the waits between them, twenty bridge about half a day. */
  maxAttempts?: number
  /** Wait before the second attempt; it doubles with each further one, up to an hour. */
  firstWaitMs?: number
  random?: () => number
}

/** Wait before the next attempt: doubling, capped at an hour, spread over half to the whole so that many do not come back at once. */
export function backOffMs(attempts: number, firstWaitMs: number, random: () => number): number {
  const whole = Math.min(3_600_000, firstWaitMs * 2 ** Math.max(0, attempts - 1))
  return Math.round(whole * (0.5 + random() / 2))
}

/** Errors that no further attempt mends. A failing key or sender is the operator's to mend, so those are tried on. */
const isHopeless = (status: number | null, name: string) =>
  status === 422 || (status === 400 && name !== 'invalid_api_key') || name === 'invalid_idempotent_request'

/**
 * Sends the mails of the outbox until closed. Each is claimed for one attempt, sent under its own idempotency key, and then marked sent,
 * put off, or given up for good (which is logged and stays in its row).
 */
export function startMailWorker(services: Pick<Services, 'db' | 'config' | 'now'>, options: MailWorkerOptions = {}) {
  const { pollMs = 500, concurrency = 4, maxAttempts = 20, firstWaitMs = 5_000, random = Math.random } = options
  const { config } = services
  const resend = new Resend(config.mail.apiKey, config.mail.apiUrl === undefined ? {} : { baseUrl: config.mail.apiUrl })
  const cut = new AbortController()
  let isClosed = false
  let timer: NodeJS.Timeout | undefined

  const deliver = async (mail: DueMail) => {
    const { data, error } = await resend.emails.send(
      { from: config.mail.from, to: mail.to, subject: mail.subject, text: mail.text },
      { idempotencyKey: mail.dedupeKey, signal: AbortSignal.any([cut.signal, AbortSignal.timeout(sendTimeoutMs)]) }
    )
    if (error === null) return settleMail(services, mail.id, { kind: 'sent', providerId: data.id })
    const words = `${error.statusCode ?? 'no answer'} ${error.name}`
    const fields = { mail: mail.id, attempts: mail.attempts, error: words }
    if (isHopeless(error.statusCode, error.name) || mail.attempts >= maxAttempts) {
      await settleMail(services, mail.id, { kind: 'given-up', error: words })
      return log('error', 'mail-given-up', fields)
    }
    const waitMs = backOffMs(mail.attempts, firstWaitMs, random)
    await settleMail(services, mail.id, { kind: 'put-off', error: words, waitMs })
    log('warn', 'mail-put-off', { ...fields, waitMs })
  }

  /** Claims and sends until nothing is due. */
  const round = async () => {
    while (!isClosed) {
      const due = await claimDueMails(services, concurrency, leaseMs)
      if (due.length === 0) return
      const results = await Promise.allSettled(due.map(deliver))
      for (const result of results) if (result.status === 'rejected') logError('mail-attempt-failed', result.reason)
    }
  }

  let running: Promise<void> = Promise.resolve()
  const turn = () => {
    running = round()
      .catch((error: unknown) => logError('mail-round-failed', error))
      .finally(() => {
        if (!isClosed) timer = setTimeout(turn, pollMs)
      })
  }
  turn()
  return {
    /** Stops claiming and waits for the attempts under way. */
    close: async () => {
      isClosed = true
      clearTimeout(timer)
      const force = setTimeout(() => cut.abort(), closeWaitMs)
      await running
      clearTimeout(force)
    }
  }
}
