import { fork, type ChildProcess } from 'node:child_process'
import { existsSync } from 'node:fs'
import { createRequire } from 'node:module'
import { Socket } from 'node:net'
import { setPriority } from 'node:os'
import { fileURLToPath, pathToFileURL } from 'node:url'

/** A child process between two checks, with what decides whether it may be used again. */
type Idle = { child: ChildProcess; heapMib: number; checks: number; end: NodeJS.Timeout }

export type CheckProcess = { child: ChildProcess; heapMib: number; checks: number }

export type ReuseRules = {
  /** A process is replaced after so many checks, or when it holds more memory than this after one. */
  checks: number
  residentMib: number
  /** A process that waits longer is ended. */
  idleMs: number
}

export const defaultReuse: ReuseRules = { checks: 50, residentMib: 160, idleMs: 60_000 }

/**
 * Child processes that check bundles, kept warm: starting one and compiling its code costs several times the check of a small bundle. Each does
 * one check at a time. One that was late, crashed or was killed is never used again; nor is one that has grown. None keeps this process
 * alive while it waits, and all end with it.
 */
export class CheckProcesses {
  private idle: Idle[] = []

  constructor(private readonly rules: ReuseRules = defaultReuse) {}

  /** A waiting process with this heap limit, or a new one. Give it back by `release`, or kill it. */
  take(heapMib: number): CheckProcess {
    for (;;) {
      const at = this.idle.findLastIndex((one) => one.heapMib === heapMib)
      if (at < 0) break
      const [one] = this.idle.splice(at, 1)
      const { child, checks } = one!
      clearTimeout(one!.end)
      if (!child.connected || child.exitCode !== null || child.signalCode !== null) continue
      holdOpen(child, true)
      return { child, heapMib, checks }
    }
    return { child: startChild(heapMib), heapMib, checks: 0 }
  }

  /** Takes a process back after a check that ended well; it is ended when it has done or grown enough. */
  release({ child, heapMib, checks }: CheckProcess, residentBytes: number): void {
    for (const event of ['message', 'exit', 'error']) child.removeAllListeners(event)
    child.stderr?.removeAllListeners('data')
    child.stderr?.resume()
    // Whatever happens to a waiting process is noticed when it is taken; an unheard error must not end the server.
    child.on('error', () => {})
    if (checks + 1 >= this.rules.checks || residentBytes > this.rules.residentMib * 1024 * 1024 || !child.connected)
      return end(child)
    const timer = setTimeout(() => {
      this.idle = this.idle.filter((one) => one.child !== child)
      end(child)
    }, this.rules.idleMs)
    timer.unref()
    holdOpen(child, false)
    this.idle.push({ child, heapMib, checks: checks + 1, end: timer })
  }

  /** How many wait. */
  get waiting(): number {
    return this.idle.length
  }

  /** Ends all that wait. */
  endAll(): void {
    for (const { child, end: timer } of this.idle) {
      clearTimeout(timer)
      end(child)
    }
    this.idle = []
  }
}

/** Whether this process stays alive for the child's sake. */
function holdOpen(child: ChildProcess, isHeld: boolean): void {
  const change = isHeld ? 'ref' : 'unref'
  child[change]()
  child.channel?.[change]()
  if (child.stderr instanceof Socket) child.stderr[change]()
}

/** Closing the channel lets the child run out; it holds nothing that would have to be put away. */
function end(child: ChildProcess): void {
  if (child.connected) child.disconnect()
  else child.kill('SIGKILL')
}

function startChild(heapMib: number): ChildProcess {
  const { entry, loader } = childEntry()
  const child = fork(entry, [], {
    execArgv: [...loader, `--max-old-space-size=${heapMib}`],
    // Nothing of the server's configuration reaches the child.
    env: { NODE_ENV: process.env.NODE_ENV ?? 'production' },
    serialization: 'advanced',
    stdio: ['ignore', 'ignore', 'pipe', 'ipc']
  })
  if (child.pid !== undefined) {
    try {
      setPriority(child.pid, 10)
    } catch {
      // Putting requests before checks is a nicety: without the right to it the check runs all the same.
    }
  }
  return child
}

/** In the built server the child lies beside its bundle; from the sources it runs through tsx. */
function childEntry(): { entry: string; loader: string[] } {
  const here = import.meta.url
  if (!here.endsWith('.ts')) {
    const built = ['./check-child.js', '../check-child.js']
      .map((name) => fileURLToPath(new URL(name, here)))
      .find((path) => existsSync(path))
    if (!built) throw new Error('The build lacks check-child.js')
    return { entry: built, loader: [] }
  }
  const tsx = pathToFileURL(createRequire(here).resolve('tsx')).href
  return { entry: fileURLToPath(new URL('./check-child.ts', here)), loader: ['--import', tsx] }
}
