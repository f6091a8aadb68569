import { chiSquareUpperTail } from './special/chi-square'
import { quadraticForm } from './special/quadratic-form'
import type { Tally } from './tally'

/** `observed`, `expected` and `variance` of the number of failures per group, summed over strata. */
export type LogRank = {
  chiSquare: number
  degreesOfFreedom: number
  p: number
  observed: number[]
  expected: number[]
  variance: number[][]
}

/**
 * Log-rank test that k groups share one hazard, with delayed entry, optionally stratified: at each failure time the failures of a group are
 * hypergeometric given the risk sets; observed minus expected and their covariance are summed over times and strata.
 * A group of which nothing is expected leaves the test and lowers the degrees of freedom.
 *
 * Source: N. Mantel, Cancer Chemotherapy Reports 50:163-170 (1966); R. Peto and J. Peto, JRSS A 135:185-207 (1972).
 *
 * @param strata one list of k tallies a stratum, groups in the same order; tallies of one stratum must come from times merged together
 * @returns null when there is nothing to test: fewer than two groups with expected failures, or no time at which groups could differ
 * @throws RangeError when strata differ in the number of groups
 */
export function logRank(strata: Tally[][]): LogRank | null {
  const k = strata[0]?.length ?? 0
  if (strata.some((groups) => groups.length !== k)) throw new RangeError('logRank: every stratum needs the same groups')
  const observed = new Array<number>(k).fill(0)
  const expected = new Array<number>(k).fill(0)
  const variance = observed.map(() => new Array<number>(k).fill(0))
  for (const groups of strata) addStratum(groups, observed, expected, variance)
  const taking = expected.flatMap((e, g) => (e > 0 ? [g] : []))
  if (taking.length < 2) return null
  const kept = taking.slice(0, -1)
  const { value: chiSquare, rank } = quadraticForm(
    kept.map((g) => kept.map((h) => variance[g]![h]!)),
    kept.map((g) => observed[g]! - expected[g]!)
  )
  if (rank === 0) return null
  return { chiSquare, degreesOfFreedom: rank, p: chiSquareUpperTail(chiSquare, rank), observed, expected, variance }
}

function addStratum(groups: Tally[], observed: number[], expected: number[], variance: number[][]): void {
  const k = groups.length
  const next = new Uint32Array(k)
  const atRisk = new Float64Array(k)
  groups.forEach((tally, g) => {
    if (tally.time[0] === 0) atRisk[g] = tally.entered[0]!
  })
  for (const t of failureTimes(groups)) {
    let n = 0
    let d = 0
    for (let g = 0; g < k; g++) {
      const tally = groups[g]!
      let j = next[g]!
      for (; j < tally.time.length && tally.time[j]! < t; j++) {
        const entered = tally.time[j] === 0 ? 0 : tally.entered[j]!
        atRisk[g]! += entered - tally.failed[j]! - tally.censored[j]!
      }
      next[g] = j
      const failed = tally.time[j] === t ? tally.failed[j]! : 0
      observed[g]! += failed
      d += failed
      n += atRisk[g]!
    }
    const spread = n > 1 ? (d * (n - d)) / (n - 1) : 0
    for (let g = 0; g < k; g++) {
      if (atRisk[g] === 0) continue
      const share = atRisk[g]! / n
      expected[g]! += d * share
      for (let h = 0; h < k; h++) variance[g]![h]! += spread * share * ((g === h ? 1 : 0) - atRisk[h]! / n)
    }
  }
}

/** Distinct times at which any group has a failure, ascending. */
function failureTimes(groups: Tally[]): Float64Array {
  const times = groups.map((tally) => tally.time.filter((_, j) => tally.failed[j]! > 0))
  const all = new Float64Array(times.reduce((sum, one) => sum + one.length, 0))
  let at = 0
  for (const one of times) {
    all.set(one, at)
    at += one.length
  }
  return all.sort().filter((t, i) => i === 0 || t !== all[i - 1])
}
