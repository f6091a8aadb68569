import type * as ChildProcesses from 'node:child_process'
import type { ChildProcess, ForkOptions } from 'node:child_process'
import { once } from 'node:events'
import { fileURLToPath } from 'node:url'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { CheckStep } from './bundle-check.types'
import { runBundleCheck, runBundleCheckWithPictures } from './run-bundle-check.server'

/* The children that were started, the one that got an order last, and what is loaded into the next one before its own code. */
const started: ChildProcess[] = []
let latest: ChildProcess
let preload: string[] = []
vi.mock('node:child_process', async (load) => {
  const real = await load<typeof ChildProcesses>()
  const fork = (entry: string, args: string[], options: ForkOptions) => {
    const child = real.fork(entry, args, { ...options, execArgv: [...options.execArgv!, ...preload] })
    started.push(child)
    const send = child.send.bind(child) as (...order: unknown[]) => boolean
    const sendAndNote = (...order: unknown[]) => {
      latest = child
      return send(...order)
    }
    return Object.assign(child, { send: sendAndNote })
  }
  return { ...real, fork }
})

// Four children are started, each of which compiles its code.
vi.setConfig({ testTimeout: 120_000 })

const at = (path: string) => fileURLToPath(new URL(`../../../${path}`, import.meta.url))
const demo = { path: at('db/seed/bundles/almanac-1.0.1.zip'), declaredLayers: 2 }
const isGone = (child: ChildProcess) => child.exitCode !== null || child.signalCode !== null

describe('a child that dies while it draws', () => {
  it('leaves the answer and what was drawn so far, and the next check has another child', async () => {
    const whole = await runBundleCheckWithPictures(demo)
    expect(whole.pictures!.thumbnails).not.toBeNull()

    preload = ['--import', at('tests/factories/abort-in-renderer.mjs')]
    let crash = ''
    // Another heap, so that no child is taken that was there before.
    const broken = await runBundleCheckWithPictures({ ...demo, onCrash: (detail) => (crash = detail) }, { heapMib: 500 })
    preload = []
    expect(latest.signalCode).toBe('SIGABRT')
    expect(crash).toContain('SIGABRT')
    expect(broken).toEqual({ ...whole, pictures: { ...whole.pictures!, thumbnails: null } })

    expect(await runBundleCheck(demo, { heapMib: 500 })).toEqual(whole.check)
    expect(started).toHaveLength(3)
  })
})

/* The clock stands but for what a test moves it, so that nothing here depends on the speed of the machine. */
describe('the time for the check and the time for drawing', () => {
  beforeEach(() => vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] }))
  afterEach(() => vi.useRealTimers())
  const limits = { wallMs: 20_000, drawMs: 15_000 }
  /** Lets the time go on by so much as soon as a step has begun. */
  const passing = (ms: Partial<Record<CheckStep, number>>) => ({
    ...demo,
    onProgress: (step: CheckStep) => void vi.advanceTimersByTime(ms[step] ?? 0)
  })

  it('do not take from each other', async () => {
    const { check, pictures } = await runBundleCheckWithPictures(passing({ 'read-zip': 19_999, draw: 14_999 }), limits)
    expect(check.ok).toBe(true)
    expect(pictures!.thumbnails).not.toBeNull()
  })

  it('end drawing at its own limit: the answer stands, and the child is not used again', async () => {
    const late = await runBundleCheckWithPictures(passing({ draw: 15_000 }), limits)
    if (!isGone(latest)) await once(latest, 'exit')
    expect(latest.signalCode).toBe('SIGKILL')
    expect(late.check.ok).toBe(true)
    expect(late.record!.fingerprints).not.toEqual([])
  })

  it('cut the check off at its own limit', async () => {
    const { check, record, pictures } = await runBundleCheckWithPictures(passing({ measure: 20_000 }), limits)
    expect(check.findings).toMatchObject([{ code: 'check-cut-off', severity: 'stop', expected: 'at most 20 s' }])
    expect([check.ok, record, pictures]).toEqual([false, null, null])
  })
})
