import { fork, type ChildProcess } from 'node:child_process'
import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import type { BundleCheck } from '~/domain/bundle/bundle-check.types'
import type { ChildMessage, ChildOrder } from '~/domain/bundle/check-child.types'
import { defaultLimits } from '~/domain/bundle/limits'

const entry = fileURLToPath(new URL('../../build/server/check-child.js', import.meta.url))

/** The built child process of the check, as the server starts it. */
export const startCheckChild = (): ChildProcess =>
  fork(entry, [], {
    execArgv: [`--max-old-space-size=${defaultLimits.heapMib}`],
    env: { NODE_ENV: 'production' },
    serialization: 'advanced',
    stdio: ['ignore', 'ignore', 'inherit', 'ipc']
  })

/** Has the child check one zip; the answer once the child is free again. */
export function checkIn(child: ChildProcess, path: string, withPictures = false): Promise<BundleCheck> {
  return new Promise((resolve, reject) => {
    let check: BundleCheck | null = null
    const onExit = (code: number | null) => reject(new Error(`the child ended with ${code} on ${path}`))
    const onMessage = (message: ChildMessage) => {
      if (message.kind === 'checked') check = message.check
      if (message.kind !== 'free') return
      child.off('message', onMessage)
      child.off('exit', onExit)
      resolve(check!)
    }
    child.on('message', onMessage)
    child.on('exit', onExit)
    const order: ChildOrder = { path, declared: {}, limits: defaultLimits, withPictures }
    child.send(order)
  })
}

/** CPU seconds that all threads of a process have used so far, from the scheduler's own count. */
export function cpuSecondsOf(pid: number): number {
  const tasks = readdirSync(`/proc/${pid}/task`)
  let nanoseconds = 0
  for (const task of tasks) nanoseconds += Number(readFileSync(`/proc/${pid}/task/${task}/schedstat`, 'utf8').split(' ')[0])
  return nanoseconds / 1e9
}

/** The most memory that a process has held at once, in MiB. */
export const peakMibOf = (pid: number): number =>
  Number(/VmHWM:\s*(\d+) kB/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))?.[1]) / 1024
