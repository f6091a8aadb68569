import type { Tx } from '~db/client.server'
import { newId } from '~/lib/new-id'
import * as outbox from './outbox.repo.server'

export type Mail = {
  /** Names the event that the mail tells of, with at most 256 characters: a second mail with the same key is not sent. */
  dedupeKey: string
  to: string
  subject: string
  text: string
}

/**
 * Puts a mail into the outbox, in the transaction of what it tells about: it leaves when that is committed, and only then.
 * It may arrive twice when a machine fails at the wrong moment.
 */
export async function enqueueMail(tx: Tx, mail: Mail, now: Date): Promise<void> {
  if (mail.dedupeKey.length < 1 || mail.dedupeKey.length > 256) throw new RangeError('A dedupe key has 1 to 256 characters')
  if (/[\r\n]/.test(mail.to + mail.subject)) throw new RangeError('Address and subject of a mail are one line each')
  await outbox.insert(tx, { id: newId(), ...mail, at: now.toISOString() })
}
