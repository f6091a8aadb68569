import { describe, expect, it } from 'vitest'
import { Queue } from './check-queue'

const gate = () => {
  let open = () => {}
  const opened = new Promise<void>((resolve) => (open = resolve))
  return { open, opened }
}

describe('the queue of checks', () => {
  it('runs so many at once, the others in the order they came', async () => {
    const queue = new Queue(2, 10)
    const gates = [gate(), gate(), gate(), gate()]
    const started: number[] = []
    const tasks = gates.map((g, i) =>
      queue.add(async () => {
        started.push(i)
        await g.opened
      })
    )
    await Promise.resolve()
    expect(started).toEqual([0, 1])
    gates[1]!.open()
    await tasks[1]
    await Promise.resolve()
    expect(started).toEqual([0, 1, 2])
    for (const g of gates) g.open()
    await Promise.all(tasks)
    expect(started).toEqual([0, 1, 2, 3])
  })

  it('refuses past its depth, and a failed task gives its place on', async () => {
    const queue = new Queue(1, 1)
    const first = gate()
    const running = queue.add(() => first.opened)
    const failing = queue.add(() => Promise.reject(new Error('broken')))
    await expect(queue.add(async () => 1)).rejects.toMatchObject({ kind: 'rate-limited' })
    first.open()
    await running
    await expect(failing).rejects.toThrow('broken')
    await expect(queue.add(async () => 2)).resolves.toBe(2)
  })

  it('lets a waiting caller leave', async () => {
    const queue = new Queue(1, 5)
    const first = gate()
    const running = queue.add(() => first.opened)
    const abort = new AbortController()
    const waiting = queue.add(async () => 'never', abort.signal)
    abort.abort(new Error('gone'))
    await expect(waiting).rejects.toThrow('gone')
    first.open()
    await running
    await expect(queue.add(async () => 'next')).resolves.toBe('next')
  })
})
