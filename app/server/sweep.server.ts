import * as attempts from '~/domain/accounts/oauth-attempts.repo.server'
import * as counts from '~/domain/accounts/rate-counts.repo.server'
import { maxRateWindowMs } from '~/domain/accounts/rate-limit.server'
import * as sessions from '~/domain/accounts/sessions.repo.server'
import * as tokens from '~/domain/accounts/sign-in-tokens.repo.server'
import { logError } from './log.server'
import type { Services } from './services.server'

const everyMs = 10 * 60_000
const atOnce = 1000
const dayMs = 86_400_000

/** Removes what has lapsed: sessions, sign-in attempts, mailed links a day after their end, counts of attempts. A bounded number each time. */
export async function sweepOnce({ db, now }: Pick<Services, 'db' | 'now'>): Promise<void> {
  const nowMs = now().getTime()
  const iso = (ms: number) => new Date(ms).toISOString()
  await sessions.removeExpired(db, iso(nowMs), atOnce)
  await attempts.removeExpired(db, iso(nowMs), atOnce)
  await tokens.removeExpired(db, iso(nowMs - dayMs), atOnce)
  await counts.removeBefore(db, nowMs - maxRateWindowMs)
}

/** Sweeps now and then until stopped. */
export function startSweeping(services: Services): { close(): Promise<void> } {
  let running: Promise<void> = Promise.resolve()
  const sweep = () => {
    running = sweepOnce(services).catch((error: unknown) => logError('sweep-failed', error))
  }
  sweep()
  const timer = setInterval(sweep, everyMs)
  timer.unref()
  return {
    close: async () => {
      clearInterval(timer)
      await running
    }
  }
}
