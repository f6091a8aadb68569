import { Worker } from 'node:worker_threads'
import { afterEach, describe, expect, it } from 'vitest'
import { readFilters } from './reliability-filters'
import { WorkerClient } from './worker-client.server'
import type { WorkerTask } from './worker-messages'

/* Threads of a few words stand in for the real one, which never hangs or dies on command. */
const thread = (source: string) => () =>
  new Worker(`const { parentPort } = require('node:worker_threads');${source}`, { eval: true })
const task: WorkerTask = {
  kind: 'reliability',
  databaseFile: '',
  board: 'b',
  filters: readFilters(new URLSearchParams(), '2026-12-01').filters
}
let client: WorkerClient
afterEach(() => client.close())

describe('WorkerClient', () => {
  it('gives up a task that takes too long, and the next one starts a new thread', async () => {
    let threads = 0
    client = new WorkerClient(() => {
      threads++
      return thread(
        threads === 1
          ? `parentPort.on('message', () => { for (;;); })`
          : `parentPort.on('message', (m) => parentPort.postMessage({ id: m.id, ok: true, value: 'done' }))`
      )()
    })
    await expect(client.run(task, 100)).rejects.toMatchObject({ kind: 'unavailable' })
    await expect(client.run(task)).resolves.toBe('done')
    expect(threads).toBe(2)
  })
  it('reports a thread that dies to the one who waits, and goes on', async () => {
    let threads = 0
    client = new WorkerClient(() => {
      threads++
      return thread(
        threads === 1
          ? `parentPort.on('message', () => { throw new Error('broken') })`
          : `parentPort.on('message', (m) => parentPort.postMessage({ id: m.id, ok: true, value: 'done' }))`
      )()
    })
    const first = client.run(task)
    const second = client.run(task)
    await expect(first).rejects.toThrow('broken')
    await expect(second).resolves.toBe('done')
  })
  it('passes an expected failure on as one', async () => {
    client = new WorkerClient(
      thread(
        `parentPort.on('message', (m) => parentPort.postMessage({ id: m.id, ok: false, kind: 'not-found', message: 'none', errors: [] }))`
      )
    )
    await expect(client.run(task)).rejects.toMatchObject({ kind: 'not-found', message: 'none' })
  })
  it('refuses when too many wait', async () => {
    client = new WorkerClient(thread(`parentPort.on('message', () => {})`))
    const waiting = Array.from({ length: 65 }, () => client.run(task).catch(() => 'stopped'))
    await expect(client.run(task)).rejects.toMatchObject({ kind: 'unavailable' })
    await client.close()
    expect(new Set(await Promise.all(waiting))).toEqual(new Set(['stopped']))
  })
})
