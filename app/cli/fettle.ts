import { runFettle } from './run-fettle'

process.exitCode = await runFettle(process.argv.slice(2), {
  out: (text) => void process.stdout.write(text),
  err: (text) => void process.stderr.write(text),
  stdin: process.stdin
})
