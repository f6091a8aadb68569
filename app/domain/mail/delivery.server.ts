import type { Db } from '~db/client.server'
import * as outbox from './outbox.repo.server'

type Given = { db: Db; now: () => Date }

export type DueMail = outbox.DueMail

/** What came of one attempt to send a mail; `error` in a few words, without addresses or text. */
export type Outcome =
  { kind: 'sent'; providerId: string } | { kind: 'put-off'; error: string; waitMs: number } | { kind: 'given-up'; error: string }

/**
 * Takes at most `limit` due mails for one attempt each. None of them is due again within `leaseMs`, so a process that dies in the middle
 * leaves them to the next one.
 */
export async function claimDueMails({ db, now }: Given, limit: number, leaseMs: number): Promise<DueMail[]> {
  const at = now()
  if (!(await outbox.hasDue(db, at.toISOString()))) return []
  return outbox.claimDue(db, at.toISOString(), new Date(at.getTime() + leaseMs).toISOString(), limit)
}

/** Writes down what came of an attempt. */
export async function settleMail({ db, now }: Given, id: string, outcome: Outcome): Promise<void> {
  const at = now()
  if (outcome.kind === 'sent') await outbox.markSent(db, id, at.toISOString(), outcome.providerId)
  else if (outcome.kind === 'given-up') await outbox.markGivenUp(db, id, outcome.error, at.toISOString())
  else await outbox.markFailed(db, id, outcome.error, new Date(at.getTime() + outcome.waitMs).toISOString())
}
