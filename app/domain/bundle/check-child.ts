import { readFile } from 'node:fs/promises'
import { checkBundle } from './check-bundle.server'
import type { ChildMessage, ChildOrder } from './check-child.types'

/**
 * The child process of a bundle check: gets one order over IPC, reports its steps, sends the answer, and ends.
 * It is killed from outside when it takes too long; a crash takes only itself along.
 */
function send(message: ChildMessage): Promise<void> {
  return new Promise((resolve, reject) => {
    if (!process.send) return reject(new Error('The check runs only as a child process'))
    process.send(message, undefined, undefined, (error) => (error ? reject(error) : resolve()))
  })
}

async function run(order: ChildOrder): Promise<void> {
  const bytes = await readFile(order.path)
  const { check } = await checkBundle(bytes, order.declared, order.limits, (step) => void send({ kind: 'step', step }))
  await send({ kind: 'checked', check })
}

process.once('message', (order: ChildOrder) => {
  run(order).then(
    () => process.disconnect(),
    (error: unknown) => {
      console.error(error)
      process.exit(1)
    }
  )
})
