import type { Db, DbOrTx, Tx } from '~db/client.server'
import type { Actor } from './can'
import { hashToken, isTokenShaped, newToken } from './secret-token.server'
import * as sessions from './sessions.repo.server'

const dayMs = 86_400_000
/** A session ends this long after it was last used. */
export const sessionIdleMs = 30 * dayMs
/** However much it is used, a session ends this long after the sign-in. */
export const sessionMaxMs = 180 * dayMs
/** A session's end is moved on at most once in this time, so that reading pages does not write. */
const touchEveryMs = 3_600_000
const maxSessionsPerUser = 50
const maxBoardsLoaded = 500

const iso = (ms: number) => new Date(ms).toISOString()
const endOf = (createdMs: number, nowMs: number) => iso(Math.min(nowMs + sessionIdleMs, createdMs + sessionMaxMs))

export type CurrentSession = { actor: Actor; idHash: string }

/**
 * Starts a session for a user who has just proved who they are, and ends the one that the browser had before: no identifier survives a
 * change of privilege.
 * @returns the secret that goes into the browser's cookie; only its hash is stored
 */
export async function startSession(tx: Tx, userId: string, oldToken: string | null, now: Date): Promise<string> {
  const token = newToken()
  const nowMs = now.getTime()
  if (isTokenShaped(oldToken)) await sessions.remove(tx, hashToken(oldToken))
  await sessions.insert(tx, { idHash: hashToken(token), userId, at: iso(nowMs), expiresAt: endOf(nowMs, nowMs) })
  await sessions.removeOldest(tx, userId, maxSessionsPerUser)
  return token
}

/**
 * Who is behind a session's secret: null when it is unknown or over, or its user is disabled. Moves the session's end on when that is due.
 */
export async function resumeSession(db: Db, token: string | null, now: Date): Promise<CurrentSession | null> {
  if (!isTokenShaped(token)) return null
  const nowMs = now.getTime()
  const found = await sessions.findLive(db, hashToken(token), iso(nowMs))
  if (found === undefined) return null
  if (nowMs - Date.parse(found.lastSeenAt) >= touchEveryMs)
    await sessions.touch(db, found.idHash, iso(nowMs), endOf(Date.parse(found.createdAt), nowMs))
  return { actor: await loadActor(db, found), idHash: found.idHash }
}

async function loadActor(db: DbOrTx, user: { userId: string; displayName: string; isSteward: 0 | 1 }): Promise<Actor> {
  const maintained = await sessions.listMaintained(db, user.userId, maxBoardsLoaded)
  return {
    userId: user.userId,
    displayName: user.displayName,
    isSteward: user.isSteward === 1,
    maintains: new Map(maintained.map((row) => [row.boardId, row.role]))
  }
}

/** Signs out: the row goes, so that a copy of the cookie is worth nothing. */
export async function endSession(db: DbOrTx, token: string | null): Promise<void> {
  if (isTokenShaped(token)) await sessions.remove(db, hashToken(token))
}
