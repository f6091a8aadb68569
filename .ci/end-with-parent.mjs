/* Preloaded into the demo's child processes: when the process that started them is gone, however it went, they stop too. */
import { isMainThread } from 'node:worker_threads'

// a worker inherits the preload, but its standard input is empty from the start
if (isMainThread) {
  process.stdin.resume()
  process.stdin.once('end', () => process.kill(process.pid, 'SIGTERM'))
  process.stdin.once('error', () => process.kill(process.pid, 'SIGTERM'))
  process.stdin.unref?.()
}
