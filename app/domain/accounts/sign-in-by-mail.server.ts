import type { Db, Tx } from '~db/client.server'
import { enqueueMail } from '~/domain/mail/enqueue-mail.server'
import { DomainError } from '~/lib/domain-error'
import { newId } from '~/lib/new-id'
import type { Config } from '~/server/config.server'
import { recordAudit } from '../audit/record.server'
import { callerOf, countUse } from './rate-limit.server'
import { returnPath } from './return-path'
import { hashToken, isTokenShaped, newToken } from './secret-token.server'
import { startSession } from './sessions.server'
import * as tokens from './sign-in-tokens.repo.server'
import * as users from './users.repo.server'

type Given = { db: Db; config: Config; now: () => Date }

export const linkLifeMs = 15 * 60_000
const perAddress = { kind: 'link-address', limit: 5, windowMs: 3_600_000 }
const perCaller = { kind: 'link-caller', limit: 20, windowMs: 3_600_000 }
const usePerCaller = { kind: 'link-use-caller', limit: 60, windowMs: 3_600_000 }

/**
 * Mails a sign-in link to an address, whether an account has it or not: the answer tells nobody which addresses are known.
 * @throws DomainError `rate-limited`
 */
export async function askForLink(given: Given, input: { email: string; returnTo: string | null; ip: string }): Promise<void> {
  await countUse(given, perCaller, callerOf(input.ip))
  await countUse(given, perAddress, input.email)
  const { db, config } = given
  const now = given.now()
  const token = newToken()
  const tokenHash = hashToken(token)
  await db.transaction().execute(async (tx) => {
    await tokens.insert(tx, {
      tokenHash,
      email: input.email,
      returnTo: returnPath(input.returnTo),
      at: now.toISOString(),
      expiresAt: new Date(now.getTime() + linkLifeMs).toISOString()
    })
    const link = `${config.publicOrigin}/sign-in/link/${token}`
    await enqueueMail(tx, { dedupeKey: `sign-in/${tokenHash}`, to: input.email, ...linkMail(config.publicOrigin, link) }, now)
  })
}

const linkMail = (origin: string, link: string) => ({
  subject: 'Your link to sign in to Fettle',
  text: `Hello,

somebody, most likely you, asked to sign in to Fettle (${origin}) with this address.

Open this page and press its button:
${link}

It works once, and for 15 minutes. Do not pass it on: whoever has it can sign in as you.
If you did not ask for it, leave it alone. Nothing happens then.
`
})

export type LinkState = { kind: 'open'; email: string; isNew: boolean } | { kind: 'used' | 'expired' | 'unknown' }

/** What a mailed link is good for. Looking consumes nothing: mail programs open links before people do. */
export async function lookAtLink({ db, now }: Given, token: string): Promise<LinkState> {
  const found = isTokenShaped(token) ? await tokens.findByHash(db, hashToken(token)) : undefined
  if (found === undefined) return { kind: 'unknown' }
  if (found.usedAt !== null) return { kind: 'used' }
  if (found.expiresAt <= now().toISOString()) return { kind: 'expired' }
  return { kind: 'open', email: found.email, isNew: (await users.findByEmail(db, found.email)) === undefined }
}

export type SignedIn = { sessionToken: string; returnTo: string }

/**
 * Signs in by a mailed link and uses it up; whoever has it has shown that the address is theirs. An address that no account has gets one.
 * @param input.displayName for a new account
 * @throws DomainError `conflict` when the link does not hold (any more), `forbidden` for a disabled account, `rate-limited`
 */
export async function signInByLink(
  given: Given,
  input: { token: string; displayName: string | null; oldSession: string | null; ip: string }
): Promise<SignedIn> {
  await countUse(given, usePerCaller, callerOf(input.ip))
  const now = given.now()
  const signedIn = await given.db.transaction().execute(async (tx) => {
    const link = isTokenShaped(input.token) ? await tokens.consume(tx, hashToken(input.token), now.toISOString()) : undefined
    if (link === undefined) return 'no-link'
    const userId = await userOfAddress(tx, link.email, input.displayName, now)
    if (userId === null) return 'disabled'
    const sessionToken = await startSession(tx, userId, input.oldSession, now)
    return { sessionToken, returnTo: returnPath(link.returnTo) }
  })
  if (signedIn === 'no-link') throw new DomainError('conflict', 'This link was used already, or it is too old.')
  if (signedIn === 'disabled') throw new DomainError('forbidden', disabledMessage)
  return signedIn
}

export const disabledMessage = 'This account has been disabled. Write to the stewards if you think that is a mistake.'

/** The account of an address that has just been proved; null when it is disabled. */
async function userOfAddress(tx: Tx, email: string, displayName: string | null, now: Date): Promise<string | null> {
  const found = await users.findByEmail(tx, email)
  if (found?.disabledAt) return null
  if (found !== undefined) {
    if (found.emailVerifiedAt === null) await users.setEmail(tx, found.id, email, now.toISOString())
    return found.id
  }
  const id = newId()
  await users.insert(tx, {
    id,
    displayName: displayName ?? `Member ${id.slice(0, 4)}`,
    email,
    github: null,
    at: now.toISOString()
  })
  await recordAudit(
    tx,
    { actorId: id, action: 'account.open', subjectKind: 'user', subjectId: id, detail: { by: 'mail' } },
    now.toISOString()
  )
  return id
}
