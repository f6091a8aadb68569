import type { DbOrTx, Tx } from '~db/client.server'

export type NewMail = { id: string; dedupeKey: string; to: string; subject: string; text: string; at: string }

/** Puts a mail in; one with the same key is there already and stays as it is. */
export const insert = (tx: Tx, mail: NewMail) =>
  tx
    .insertInto('mail_outbox')
    .values({
      id: mail.id,
      dedupe_key: mail.dedupeKey,
      to_address: mail.to,
      subject: mail.subject,
      text_body: mail.text,
      created_at: mail.at,
      next_attempt_at: mail.at
    })
    .onConflict((c) => c.column('dedupe_key').doNothing())
    .execute()

/** Takes due mails for one attempt each: none of them is due again before `leaseUntil`, whatever becomes of the attempt. */
export const claimDue = (db: DbOrTx, at: string, leaseUntil: string, limit: number) =>
  db
    .updateTable('mail_outbox')
    .set((e) => ({ attempts: e('attempts', '+', 1), next_attempt_at: leaseUntil }))
    .where('id', 'in', (q) =>
      q
        .selectFrom('mail_outbox')
        .select('id')
        .where('sent_at', 'is', null)
        .where('given_up_at', 'is', null)
        .where('next_attempt_at', '<=', at)
        .orderBy('next_attempt_at')
        .limit(limit)
    )
    .returning(['id', 'dedupe_key as dedupeKey', 'to_address as to', 'subject', 'text_body as text', 'attempts'])
    .execute()

export const hasDue = async (db: DbOrTx, at: string) =>
  (await db
    .selectFrom('mail_outbox')
    .select('id')
    .where('sent_at', 'is', null)
    .where('given_up_at', 'is', null)
    .where('next_attempt_at', '<=', at)
    .limit(1)
    .executeTakeFirst()) !== undefined

export type DueMail = Awaited<ReturnType<typeof claimDue>>[number]

/** A mail's text may hold a secret, so it is erased once nobody needs it. */
export const markSent = (db: DbOrTx, id: string, at: string, providerId: string) =>
  db
    .updateTable('mail_outbox')
    .set({ sent_at: at, provider_id: providerId, next_attempt_at: null, last_error: null, text_body: '' })
    .where('id', '=', id)
    .execute()

export const markFailed = (db: DbOrTx, id: string, error: string, nextAttemptAt: string) =>
  db.updateTable('mail_outbox').set({ last_error: error, next_attempt_at: nextAttemptAt }).where('id', '=', id).execute()

export const markGivenUp = (db: DbOrTx, id: string, error: string, at: string) =>
  db
    .updateTable('mail_outbox')
    .set({ last_error: error, given_up_at: at, next_attempt_at: null, text_body: '' })
    .where('id', '=', id)
    .execute()
