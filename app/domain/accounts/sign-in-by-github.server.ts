import type { Db, Tx } from '~db/client.server'
import { DomainError } from '~/lib/domain-error'
import { newId } from '~/lib/new-id'
import { recordAudit } from '../audit/record.server'
import { cleanDisplayName } from './account.schema'
import * as attempts from './oauth-attempts.repo.server'
import { returnPath } from './return-path'
import { hashToken, isTokenShaped, newToken } from './secret-token.server'
import { startSession } from './sessions.server'
import { disabledMessage, type SignedIn } from './sign-in-by-mail.server'
import * as users from './users.repo.server'

type Given = { db: Db; now: () => Date }

export const attemptLifeMs = 10 * 60_000

/** What the provider says about a person: the number that never changes, and the address only when the provider verified it. */
export type GithubProfile = { id: number; login: string; name: string | null; verifiedEmail: string | null }

/**
 * Opens an attempt to sign in. Each has its own state and verifier, so several tabs can be at it at once; all belong to one browser, which
 * keeps its own secret in a cookie.
 * @returns the state and PKCE verifier for the provider, and the browser's secret
 */
export async function openAttempt({ db, now }: Given, input: { browser: string | null; returnTo: string | null }) {
  const at = now()
  const browser = isTokenShaped(input.browser) ? input.browser : newToken()
  const [state, codeVerifier] = [newToken(), newToken()]
  await attempts.insert(db, {
    stateHash: hashToken(state),
    browserHash: hashToken(browser),
    codeVerifier,
    returnTo: returnPath(input.returnTo),
    at: at.toISOString(),
    expiresAt: new Date(at.getTime() + attemptLifeMs).toISOString()
  })
  return { state, codeVerifier, browser }
}

/**
 * Takes up an attempt that comes back from the provider: once, and only in the browser that it began in.
 * @throws DomainError `conflict` when there is no such attempt, or it took too long
 */
export async function takeAttempt({ db, now }: Given, input: { browser: string | null; state: string | null }) {
  const { browser, state } = input
  const taken =
    isTokenShaped(browser) && isTokenShaped(state) ? await attempts.take(db, hashToken(state), hashToken(browser)) : undefined
  if (taken === undefined)
    throw new DomainError(
      'conflict',
      'This sign-in was not begun in this browser, or it was finished already. Nothing has changed; start again here.'
    )
  if (taken.expiresAt <= now().toISOString())
    throw new DomainError('conflict', 'This sign-in took longer than ten minutes and has lapsed. Start again here.')
  return taken
}

/**
 * Signs in somebody whom the provider vouches for. The provider's numeric id decides; an address joins them to an account that is there
 * only when it is verified on both sides and that account has no other GitHub identity.
 * @throws DomainError `forbidden` for a disabled account
 */
export async function signInByGithub(
  { db, now }: Given,
  input: { profile: GithubProfile; returnTo: string; oldSession: string | null }
): Promise<SignedIn> {
  const at = now()
  const sessionToken = await db.transaction().execute(async (tx) => {
    const user = await userOfProfile(tx, input.profile, at)
    return user.isDisabled ? null : startSession(tx, user.id, input.oldSession, at)
  })
  if (sessionToken === null) throw new DomainError('forbidden', disabledMessage)
  return { sessionToken, returnTo: returnPath(input.returnTo) }
}

async function userOfProfile(tx: Tx, profile: GithubProfile, now: Date): Promise<{ id: string; isDisabled: boolean }> {
  const github = { id: profile.id, login: profile.login }
  const email = profile.verifiedEmail?.toLowerCase() ?? null
  const known = await users.findByGithubId(tx, profile.id)
  const holder = email === null ? undefined : await users.findByEmail(tx, email)
  if (known !== undefined) {
    if (known.githubLogin !== profile.login) await users.setGithub(tx, known.id, github)
    if (known.email === null && email !== null && holder === undefined)
      await users.setEmail(tx, known.id, email, now.toISOString())
    return { id: known.id, isDisabled: known.disabledAt !== null }
  }
  if (holder !== undefined && holder.emailVerifiedAt !== null && holder.githubId === null) {
    if (holder.disabledAt !== null) return { id: holder.id, isDisabled: true }
    await users.setGithub(tx, holder.id, github)
    await recordAudit(
      tx,
      {
        actorId: holder.id,
        action: 'account.join-github',
        subjectKind: 'user',
        subjectId: holder.id,
        detail: { githubId: profile.id }
      },
      now.toISOString()
    )
    return { id: holder.id, isDisabled: false }
  }
  const id = newId()
  const displayName = cleanDisplayName(profile.name) ?? cleanDisplayName(profile.login) ?? `Member ${id.slice(0, 4)}`
  await users.insert(tx, { id, displayName, email: holder === undefined ? email : null, github, at: now.toISOString() })
  await recordAudit(
    tx,
    { actorId: id, action: 'account.open', subjectKind: 'user', subjectId: id, detail: { by: 'github' } },
    now.toISOString()
  )
  return { id, isDisabled: false }
}
