import { spawnSync } from 'node:child_process'
import { fileURLToPath } from 'node:url'
import { splitColumns, type Columns } from '~/domain/survival/columns'
import { curveLimits } from '~/domain/survival/confidence-limits'
import { kaplanMeier } from '~/domain/survival/kaplan-meier'
import { survivalAt } from '~/domain/survival/survival-at'
import { tallyOf } from '~/domain/survival/tally'
import { turnbull } from '~/domain/survival/turnbull'
import { median, type Claim } from './claim'
import { intervalCensored, rightCensored } from './survival-data'

const script = fileURLToPath(new URL('./survival.R', import.meta.url))
const runs = 5

/**
 * Kaplan-Meier with log-log limits in ten groups beside `survfit` of R's survival package, and Turnbull's estimate beside npsurv, on the same data
 * in turns. The results are compared too: a fast wrong answer is no answer. Elapsed seconds, medians of five runs after one.
 */
export async function survival(): Promise<Claim[]> {
  return [kaplanMeierClaim(1_000_000), ...turnbullClaims(2_000), ...turnbullClaims(5_000)]
}

function kaplanMeierClaim(n: number): Claim {
  const { time, event, group } = rightCensored(n)
  const columns: Columns = { time, event, entry: null, weight: null, causes: [] }
  const work = () =>
    splitColumns(columns, group, 10).map((part) => {
      const curve = kaplanMeier(tallyOf(part))
      return { curve, limits: curveLimits(curve) }
    })
  const theirs = askR('right', n) as { check: number[]; seconds: number }
  const seconds = elapsed(work)
  const year = work().map(({ curve }) => survivalAt(curve, 365))
  const ours = [sum(year.map((at) => at.survival!)), sum(year.map((at) => at.lower!))]
  agree('S(365) and its lower limit over ten groups', ours, theirs.check, 1e-9)
  console.log(`Kaplan-Meier with limits, ${n} rows: ${show(seconds)} here, ${show(theirs.seconds)} survfit`)
  return {
    claim: 'Kaplan-Meier on 1,000,000 rows: our time over that of survfit',
    measured: seconds / theirs.seconds,
    limit: 0.2
  }
}

function turnbullClaims(n: number): Claim[] {
  const { lower, upper } = intervalCensored(n)
  const spans = { entry: new Float64Array(n), lower, upper, weight: new Float64Array(n).fill(1) }
  const theirs = askR('interval', n) as { logLikelihood: number; gap: number; seconds: number }
  const seconds = elapsed(() => turnbull(spans))
  const { logLikelihood, gap } = turnbull(spans)
  agree('log-likelihood', [logLikelihood], [theirs.logLikelihood], 1e-9)
  console.log(
    `Turnbull, ${n} intervals: ${show(seconds)} here, Kuhn-Tucker gap ${gap.toExponential(1)}; ${show(theirs.seconds)} npsurv, gap ${theirs.gap.toExponential(1)}`
  )
  return [
    { claim: `Turnbull on ${n} intervals: our time over that of npsurv`, measured: seconds / theirs.seconds, limit: 1 },
    { claim: `Turnbull on ${n} intervals: our gap over that of npsurv`, measured: gap / theirs.gap, limit: 1 }
  ]
}

function askR(task: string, n: number): unknown {
  const { status, stdout, stderr, error } = spawnSync('Rscript', [script, task, String(n)], { encoding: 'utf8' })
  if (error || status !== 0)
    throw new Error(
      `This needs Debian's R with two packages: as root, \`apt-get install -y --no-install-recommends r-cran-survival r-cran-npsurv\`. ${stderr ?? ''}`
    )
  return JSON.parse(stdout.trim().split('\n').at(-1)!)
}

function elapsed(work: () => unknown): number {
  work()
  const seconds: number[] = []
  for (let run = 0; run < runs; run++) {
    const start = performance.now()
    work()
    seconds.push((performance.now() - start) / 1000)
  }
  return median(seconds)
}

function agree(what: string, ours: number[], theirs: number[], tolerance: number): void {
  ours.forEach((value, i) => {
    if (!(Math.abs(value / theirs[i]! - 1) <= tolerance))
      throw new Error(`${what}: ${ours.join(', ')} here, ${theirs.join(', ')} in R`)
  })
}

const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0)
const show = (seconds: number) => `${seconds.toFixed(4)} s`
