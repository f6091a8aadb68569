import type { Db } from '~db/client.server'
import { DomainError } from '~/lib/domain-error'
import { recordAudit } from '../audit/record.server'
import * as sessions from './sessions.repo.server'
import * as users from './users.repo.server'

type Given = { db: Db; now: () => Date }

const maxSessionsShown = 50

/** What a member sees of their own account. @throws DomainError `unauthenticated` without one */
export async function loadAccount({ db, now }: Given, userId: string | null, currentHash: string | null) {
  const user = userId === null ? undefined : await users.findById(db, userId)
  if (user === undefined) throw new DomainError('unauthenticated', 'Sign in to see your account.')
  const live = await sessions.listByUser(db, user.id, now().toISOString(), maxSessionsShown)
  const isCurrent = (row: { idHash: string }) => row.idHash === currentHash
  return {
    displayName: user.displayName,
    email: user.email,
    isEmailVerified: user.emailVerifiedAt !== null,
    githubLogin: user.githubId === null ? null : user.githubLogin,
    createdAt: user.createdAt,
    sessions: [...live.filter(isCurrent), ...live.filter((row) => !isCurrent(row))].map((row) => ({
      id: row.idHash,
      createdAt: row.createdAt,
      lastSeenAt: row.lastSeenAt,
      isCurrent: isCurrent(row)
    }))
  }
}

export async function rename({ db, now }: Given, userId: string, displayName: string): Promise<void> {
  await db.transaction().execute(async (tx) => {
    await users.setDisplayName(tx, userId, displayName)
    await recordAudit(
      tx,
      { actorId: userId, action: 'account.rename', subjectKind: 'user', subjectId: userId },
      now().toISOString()
    )
  })
}

/** Ends one of the user's own sessions. @throws DomainError `not-found` when it is not theirs, or over */
export async function endOneSession({ db }: Given, userId: string, idHash: string): Promise<void> {
  if ((await sessions.removeOfUser(db, userId, idHash)) === 0)
    throw new DomainError('not-found', 'That session has ended already.')
}

/** Ends all of the user's sessions but the one in use. @returns how many */
export const endOtherSessions = ({ db }: Given, userId: string, currentHash: string | null): Promise<number> =>
  sessions.removeOthers(db, userId, currentHash)
