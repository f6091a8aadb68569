import { sweepAccounts } from '~/domain/accounts/sweep.server'
import { sweepStaged } from '~/domain/releases/stored-objects.server'
import { logError } from './log.server'
import type { Services } from './services.server'

const everyMs = 10 * 60_000

/** Sweeps away what has lapsed, now and every ten minutes, until closed. */
export function startSweeping(services: Services): { close(): Promise<void> } {
  let running: Promise<void> = Promise.resolve()
  const sweep = () => {
    running = Promise.all([sweepAccounts(services), sweepStaged(services)]).then(
      () => undefined,
      (error: unknown) => logError('sweep-failed', error)
    )
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
