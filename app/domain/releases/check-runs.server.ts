import type { CheckStep } from '~/domain/bundle/bundle-check.types'

/** What is going on with a draft's bundle in this process; nothing of it survives a restart, and the draft page then says so. */
export type RunState = { phase: 'receiving' | 'storing' | 'checking'; step: CheckStep | null }

const runs = new Map<string, RunState>()
const waiters = new Map<string, (() => void)[]>()

export const runOf = (releaseId: string): RunState | null => runs.get(releaseId) ?? null

export const setRun = (releaseId: string, state: RunState): void => {
  if (runs.has(releaseId)) runs.set(releaseId, state)
}

/**
 * Takes the draft for one upload or check; null when it stays taken for `waitMs`. A form sent twice waits here until the browser's
 * first request has ended.
 */
export async function beginRun(releaseId: string, state: RunState, waitMs: number): Promise<(() => void) | null> {
  const until = Date.now() + waitMs
  while (runs.has(releaseId)) {
    const left = until - Date.now()
    if (left <= 0) return null
    await new Promise<void>((resolve) => {
      const timer = setTimeout(resolve, left)
      const wake = () => {
        clearTimeout(timer)
        resolve()
      }
      waiters.set(releaseId, [...(waiters.get(releaseId) ?? []), wake])
    })
  }
  runs.set(releaseId, state)
  return () => {
    runs.delete(releaseId)
    const waiting = waiters.get(releaseId) ?? []
    waiters.delete(releaseId)
    for (const wake of waiting) wake()
  }
}
