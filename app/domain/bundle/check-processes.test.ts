import { once } from 'node:events'
import { fileURLToPath } from 'node:url'
import { afterEach, describe, expect, it } from 'vitest'
import type { ChildMessage } from './check-child.types'
import { CheckProcesses, defaultReuse, type CheckProcess } from './check-processes.server'
import { defaultLimits } from './limits'

const demo = fileURLToPath(new URL('../../../db/seed/bundles/almanac-1.0.1.zip', import.meta.url))
const mib = 1024 * 1024

/** Has a process check the demo's bundle; gives the memory it says it holds. */
function check({ child }: CheckProcess): Promise<number> {
  return new Promise((resolve, reject) => {
    child.on('message', (message: ChildMessage) => {
      if (message.kind === 'free') resolve(message.residentBytes)
    })
    child.once('exit', (code) => reject(new Error(`ended with ${code}`)))
    child.send({ path: demo, declared: {}, limits: defaultLimits, withPictures: false })
  })
}

describe('processes that check bundles', () => {
  let processes = new CheckProcesses()
  afterEach(() => processes.endAll())

  it('are used again, one check at a time', async () => {
    processes = new CheckProcesses()
    const first = processes.take(512)
    processes.release(first, await check(first))
    expect(processes.waiting).toBe(1)
    const again = processes.take(512)
    expect(again.child.pid).toBe(first.child.pid)
    expect(again.checks).toBe(1)
    const other = processes.take(512)
    expect(other.child.pid).not.toBe(first.child.pid)
    await check(again)
    processes.release(again, 0)
    processes.release(other, 0)
  })

  it.each([
    ['after enough checks', { checks: 1 }, 0],
    ['when they have grown', {}, 161 * mib]
  ])('are ended %s', async (_, rules, residentBytes) => {
    processes = new CheckProcesses({ ...defaultReuse, ...rules })
    const one = processes.take(512)
    await check(one)
    processes.release(one, residentBytes)
    expect(processes.waiting).toBe(0)
    await once(one.child, 'exit')
    expect(one.child.exitCode).toBe(0)
  })

  it('are not taken with another heap limit, nor when they died while they waited', async () => {
    processes = new CheckProcesses()
    const one = processes.take(256)
    processes.release(one, await check(one))
    const other = processes.take(512)
    expect(other.child.pid).not.toBe(one.child.pid)
    processes.release(other, 0)
    const gone = once(one.child, 'exit')
    one.child.kill('SIGKILL')
    await gone
    const third = processes.take(256)
    expect(third.child.pid).not.toBe(one.child.pid)
    processes.release(third, 0)
  })

  it('are ended when they wait too long', async () => {
    processes = new CheckProcesses({ ...defaultReuse, idleMs: 1 })
    const one = processes.take(512)
    processes.release(one, await check(one))
    await once(one.child, 'exit')
    expect(processes.waiting).toBe(0)
  })
})
