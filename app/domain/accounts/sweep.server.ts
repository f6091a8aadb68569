import type { Db } from '~db/client.server'
import * as attempts from './oauth-attempts.repo.server'
import * as counts from './rate-counts.repo.server'
import { maxRateWindowMs } from './rate-limit.server'
import * as sessions from './sessions.repo.server'
import * as tokens from './sign-in-tokens.repo.server'

const atOnce = 1000
const dayMs = 86_400_000

/** Removes what has lapsed: sessions, sign-in attempts, mailed links a day after their end, counts of attempts. A bounded number each time. */
export async function sweepAccounts({ db, now }: { db: Db; now: () => Date }): Promise<void> {
  const nowMs = now().getTime()
  const iso = (ms: number) => new Date(ms).toISOString()
  await sessions.removeExpired(db, iso(nowMs), atOnce)
  await attempts.removeExpired(db, iso(nowMs), atOnce)
  await tokens.removeExpired(db, iso(nowMs - dayMs), atOnce)
  await counts.removeBefore(db, nowMs - maxRateWindowMs)
}
