import { Resend } from 'resend'
import * as outbox from '~/domain/mail/outbox.repo.server'
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
  const { pollMs = 500, concurrency = 4, maxAttempts = 8, firstWaitMs = 5_000, random = Math.random } = options
  const { db, config, now } = services
  const resend = new Resend(config.mail.apiKey, config.mail.apiUrl === undefined ? {} : { baseUrl: config.mail.apiUrl })
  const cut = new AbortController()
  let isClosed = false
  let timer: NodeJS.Timeout | undefined

  const deliver = async (mail: outbox.DueMail) => {
    const { data, error } = await resend.emails.send(
      { from: config.mail.from, to: mail.to, subject: mail.subject, text: mail.text },
      { idempotencyKey: mail.dedupeKey, signal: AbortSignal.any([cut.signal, AbortSignal.timeout(sendTimeoutMs)]) }
    )
    const at = now()
    if (error === null) return void (await outbox.markSent(db, mail.id, at.toISOString(), data.id))
    const words = `${error.statusCode ?? 'no answer'} ${error.name}`
    if (isHopeless(error.statusCode, error.name) || mail.attempts >= maxAttempts) {
      await outbox.markGivenUp(db, mail.id, words, at.toISOString())
      return log('error', 'mail-given-up', { mail: mail.id, attempts: mail.attempts, error: words })
    }
    const waitMs = backOffMs(mail.attempts, firstWaitMs, random)
    await outbox.markFailed(db, mail.id, words, new Date(at.getTime() + waitMs).toISOString())
    log('warn', 'mail-put-off', { mail: mail.id, attempts: mail.attempts, waitMs, error: words })
  }

  /** Claims and sends until nothing is due. */
  const round = async () => {
    while (!isClosed) {
      const at = now()
      if (!(await outbox.hasDue(db, at.toISOString()))) return
      const lease = new Date(at.getTime() + leaseMs).toISOString()
      const due = await outbox.claimDue(db, at.toISOString(), lease, concurrency)
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
