/* Measures what Fettle claims about speed, memory and size, as ratios within one run: `npm run bench -- NAME [ARGUMENT…]`. */
import { existsSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import type { Claim } from './claim'

const benches: Record<string, { what: string; run(args: string[]): Promise<Claim[]> }> = {
  'check-cpu': {
    what: 'CPU and memory of the bundle check beside gerbv drawing the same files [FOLDER of zips]',
    run: async (args) => (await import('./check-cpu')).checkCpu(args[0])
  },
  'check-load': {
    what: "the built server's answers while four checks run [FILE.zip]",
    run: async (args) => (await import('./check-load')).checkLoad(args[0])
  },
  'page-scale': {
    what: 'a reliability page over 1,000,000 units beside the same page over 10,000 [UNITS [BOARD]]; takes minutes and some GB of temporary files',
    run: async (args) => (await import('./page-scale')).pageScale(args[0], args[1])
  },
  survival: {
    what: "the survival estimators beside R's survival and npsurv packages",
    run: async () => (await import('./survival')).survival()
  }
}

const build = fileURLToPath(new URL('../../build/server/index.js', import.meta.url))
const [name = '', ...args] = process.argv.slice(2)
const bench = Object.hasOwn(benches, name) ? benches[name] : undefined
if (!bench) {
  console.error('npm run bench -- NAME, with one of')
  for (const [each, { what }] of Object.entries(benches)) console.error(`  ${each.padEnd(12)} ${what}`)
  process.exitCode = 2
} else if (!existsSync(build)) {
  console.error('There is no build to measure: `npm run build` first.')
  process.exitCode = 2
} else {
  const claims = await bench.run(args)
  console.log('')
  for (const { claim, measured, limit } of claims)
    console.log(`${measured <= limit ? 'holds' : 'FAILS'}  ${claim}: ${measured.toFixed(2)}, at most ${limit}`)
  if (claims.some(({ measured, limit }) => !(measured <= limit))) process.exitCode = 1
}
