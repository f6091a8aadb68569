import { existsSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { Worker } from 'node:worker_threads'
import { DomainError } from '~/lib/domain-error'
import { logError } from '~/server/log.server'
import { unpackRows } from './pack-rows'
import type { WorkerAnswer, WorkerRequest, WorkerResults, WorkerTask } from './worker-messages'

type Waiting = {
  request: WorkerRequest
  timeoutMs: number
  resolve: (value: WorkerResults[WorkerTask['kind']]) => void
  reject: (error: Error) => void
}

const maxWaiting = 64
const usualTimeoutMs = 20_000

/**
 * One thread that is handed one task at a time; the others wait in line. A task that takes too long is given up with its thread, and the next
 * starts a new one.
 */
export class WorkerClient {
  #worker: Worker | null = null
  #current: { waiting: Waiting; timer: NodeJS.Timeout } | null = null
  readonly #line: Waiting[] = []
  #lastId = 0

  /** @param startWorker replaced in tests that need a thread which does not answer */
  constructor(private readonly startWorker: () => Worker = startReliabilityWorker) {}

  /** @throws DomainError what the task ran into; `unavailable` when too many wait or it takes too long */
  run<T extends WorkerTask>(task: T, timeoutMs = usualTimeoutMs): Promise<WorkerResults[T['kind']]> {
    if (this.#line.length >= maxWaiting)
      return Promise.reject(
        new DomainError('unavailable', 'Too many figures are being computed just now. Try again in a minute.')
      )
    return new Promise((resolve, reject) => {
      const request = { id: ++this.#lastId, task }
      this.#line.push({ request, timeoutMs, resolve: resolve as Waiting['resolve'], reject })
      this.#next()
    })
  }

  async close(): Promise<void> {
    const worker = this.#worker
    this.#worker = null
    for (const waiting of this.#line.splice(0)) waiting.reject(new Error('The server is stopping'))
    this.#settle()?.reject(new Error('The server is stopping'))
    await worker?.terminate()
  }

  #next(): void {
    if (this.#current !== null) return
    const waiting = this.#line.shift()
    if (waiting === undefined) return
    this.#current = { waiting, timer: setTimeout(() => this.#giveUp(), waiting.timeoutMs) }
    const { task } = waiting.request
    this.#thread().postMessage(waiting.request, 'body' in task ? [task.body] : [])
  }

  #thread(): Worker {
    if (this.#worker !== null) return this.#worker
    const worker = this.startWorker()
    worker.unref()
    worker.on('message', (answer: WorkerAnswer) => this.#answered(answer))
    worker.on('error', (error) => this.#died(worker, error))
    worker.on('exit', (code) => this.#died(worker, new Error(`The computing thread ended with ${code}`)))
    this.#worker = worker
    return worker
  }

  #answered(answer: WorkerAnswer): void {
    if (this.#current?.waiting.request.id !== answer.id) return
    const waiting = this.#settle()!
    if (answer.ok) waiting.resolve(unpackRows(answer.value) as WorkerResults[WorkerTask['kind']])
    else if (answer.kind !== null) waiting.reject(new DomainError(answer.kind, answer.message, answer.errors))
    else waiting.reject(new Error(answer.message))
    this.#next()
  }

  #died(worker: Worker, error: Error): void {
    if (worker !== this.#worker) return
    this.#worker = null
    this.#settle()?.reject(error)
    this.#next()
  }

  #giveUp(): void {
    const worker = this.#worker
    this.#worker = null
    const waiting = this.#settle()
    // Ending a thread waits for the query it is in; nobody else has to.
    worker?.terminate().catch((error: unknown) => logError('worker-terminate-failed', error))
    waiting?.reject(
      new DomainError(
        'unavailable',
        `This took longer than ${waiting.timeoutMs / 1000} s and was given up. Narrow it, or try again later.`
      )
    )
    this.#next()
  }

  /** Ends the current task and gives it back to be resolved or rejected. */
  #settle(): Waiting | undefined {
    const current = this.#current
    this.#current = null
    clearTimeout(current?.timer)
    return current?.waiting
  }
}

/**
 * In the build the entry lies beside the server or, when this code ended up in a chunk, one folder up; else it is the source, for which
 * the thread has to register the TypeScript loader itself (`--import tsx` has no effect in threads of Node 20). What the process was told
 * to load first is not for the thread: hence no inherited arguments.
 */
function startReliabilityWorker(): Worker {
  for (const place of ['./reliability-worker.js', '../reliability-worker.js']) {
    const url = new URL(place, import.meta.url)
    if (existsSync(fileURLToPath(url))) return new Worker(url, { execArgv: [] })
  }
  const source = JSON.stringify(new URL('./reliability-worker.server.ts', import.meta.url).href)
  return new Worker(`import('tsx/esm/api').then(({ register }) => { register(); return import(${source}) })`, {
    eval: true,
    execArgv: []
  })
}

const clients = new Map<'pages' | 'compute', WorkerClient>()

function client(name: 'pages' | 'compute'): WorkerClient {
  const known = clients.get(name) ?? new WorkerClient()
  clients.set(name, known)
  return known
}

/** The thread of this process for the figures of pages. */
export const pagesWorker = () => client('pages')

/** The thread for computations on anybody's own data, which may take long: pages do not wait behind them. */
export const computeWorker = () => client('compute')

/** Ends the threads; for the end of a test file. */
export async function closeWorkers(): Promise<void> {
  await Promise.all([...clients.values()].map((one) => one.close()))
  clients.clear()
}
