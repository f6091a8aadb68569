/* Preloaded into the demo's child processes: when the process that started them is gone, however it went, they stop too. */
process.stdin.resume()
process.stdin.once('end', () => process.kill(process.pid, 'SIGTERM'))
process.stdin.once('error', () => process.kill(process.pid, 'SIGTERM'))
process.stdin.unref?.()
