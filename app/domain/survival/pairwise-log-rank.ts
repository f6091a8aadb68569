import { holm } from './holm'
import { logRank, type LogRank } from './log-rank'
import type { Tally } from './tally'

/** Comparison of the groups with indices `first` and `second`; `adjustedP` is Holm's over all comparisons that could be made. */
export type PairComparison = { first: number; second: number; test: LogRank | null; adjustedP: number | null }

/** Log-rank tests of every pair of groups, within the same strata, with Holm's adjustment. Pairs with nothing to test carry null. */
export function pairwiseLogRank(strata: Tally[][]): PairComparison[] {
  const k = strata[0]?.length ?? 0
  const pairs: { first: number; second: number; test: LogRank | null }[] = []
  for (let first = 0; first < k; first++)
    for (let second = first + 1; second < k; second++)
      pairs.push({ first, second, test: logRank(strata.map((groups) => [groups[first]!, groups[second]!])) })
  const adjusted = holm(pairs.flatMap(({ test }) => (test === null ? [] : [test.p])))
  let next = 0
  return pairs.map((pair) => ({ ...pair, adjustedP: pair.test === null ? null : adjusted[next++]! }))
}
