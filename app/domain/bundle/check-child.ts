import { readFile } from 'node:fs/promises'
import { checkBundle } from './check-bundle.server'
import type { ChildMessage, ChildOrder } from './check-child.types'

/**
 * The child process of bundle checks: gets one order at a time over IPC, reports its steps, sends the answer and then the pictures part by
 * part, and says that it is free. It is killed from outside when it takes too long; a crash takes only itself along. It ends with its
 * channel.
 */
function send(message: ChildMessage): Promise<void> {
  return new Promise((resolve, reject) => {
    if (!process.send) return reject(new Error('The check runs only as a child process'))
    process.send(message, undefined, undefined, (error) => (error ? reject(error) : resolve()))
  })
}

async function run(order: ChildOrder): Promise<void> {
  const bytes = await readFile(order.path)
  const { check, record, reading, source } = await checkBundle(
    bytes,
    order.declared,
    order.limits,
    (step) => void send({ kind: 'step', step })
  )
  await send({ kind: 'checked', check, record })
  if (!order.withPictures) return
  await send({ kind: 'step', step: 'draw' })
  // Loaded only now: a check without pictures starts faster.
  const { drawPictures } = await import('./draw-pictures.server')
  if (!reading || !source) return
  for await (const part of drawPictures(reading, source, order.limits)) await send({ kind: 'drawn', part })
}

process.on('message', (order: ChildOrder) => {
  run(order).then(
    () => send({ kind: 'free', residentBytes: process.memoryUsage.rss() }),
    (error: unknown) => {
      console.error(error)
      process.exit(1)
    }
  )
})
