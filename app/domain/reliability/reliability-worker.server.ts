import { parentPort } from 'node:worker_threads'
import { DomainError } from '~/lib/domain-error'
import { openDbReadOnly, type Db } from '~db/client.server'
import { calculatorFigures } from '../survival/calculator-figures'
import { survivalAnswer } from '../survival/compute-survival.server'
import { computeReliability } from './compute-reliability.server'
import { reliabilityText } from './reliability-export'
import { packRows } from './pack-rows'
import type { WorkerAnswer, WorkerRequest, WorkerTask } from './worker-messages'

/* The thread in which long reads and computations run, one task after the other, through read-only connections. */

const databases = new Map<string, Db>()

function database(file: string): Db {
  const open = databases.get(file) ?? openDbReadOnly(file)
  databases.set(file, open)
  return open
}

async function run(task: WorkerTask) {
  if (task.kind === 'survival') return survivalAnswer(task.body)
  if (task.kind === 'calculator') return calculatorFigures(task.body, task.options)
  const detail = task.kind === 'reliability' ? 'page' : 'whole'
  const figures = await computeReliability(database(task.databaseFile), task.board, task.filters, detail)
  return task.kind === 'reliability' ? figures : reliabilityText(task.board, figures, task.as)
}

async function answer({ id, task }: WorkerRequest): Promise<WorkerAnswer> {
  try {
    return { id, ok: true, value: packRows(await run(task)) }
  } catch (error) {
    if (error instanceof DomainError) return { id, ok: false, kind: error.kind, message: error.message, errors: error.errors }
    return { id, ok: false, kind: null, message: error instanceof Error ? (error.stack ?? error.message) : String(error) }
  }
}

parentPort!.on('message', (request: WorkerRequest) => {
  void answer(request).then((result) => parentPort!.postMessage(result))
})
