import { kaplanMeier, type SurvivalCurve } from '../survival/kaplan-meier'
import { logRank } from '../survival/log-rank'
import { pairwiseLogRank } from '../survival/pairwise-log-rank'
import { restrictedMean, restrictedMeanDifference } from '../survival/restricted-mean'
import { atRiskAt, type Tally } from '../survival/tally'
import type { Comparison, PairFigures } from './figures.types'
import { oneYear } from './group-figures'
import { tooFew } from './reliability-words'

/** Every pair of so many groups is tested at most. */
const maxCompared = 12

type Compared = { name: string; n: number; tally: Tally; curve: SurvivalCurve; lastFollowed: number }

/**
 * Groups against each other: the log-rank test of all, of every pair with Holm's adjustment, and for every pair the difference of the mean days
 * without failure up to the last day of the first year on which at least five units of both are followed. Failures on the day they were
 * found. Groups that never had five followed at once in that year are left out.
 *
 * @param groups their counts, of the failures that count
 * @returns null with fewer than two groups in all
 */
export function comparison(
  by: Comparison['by'],
  groups: readonly { name: string; n: number; tally: Tally }[]
): Comparison | null {
  if (groups.length < 2) return null
  const all = groups.map((group): Compared => {
    const { tally } = group
    return { ...group, curve: kaplanMeier(tally), lastFollowed: lastFollowed(tally) }
  })
  const followed = all.filter((group) => group.lastFollowed > 0)
  const largest = [...followed].sort((a, b) => b.n - a.n).slice(0, maxCompared)
  const compared = followed.filter((group) => largest.includes(group))
  const test = logRank([compared.map(({ tally }) => tally)])
  const namesOf = (some: readonly Compared[]) => some.map(({ name }) => name)
  return {
    by,
    groups: namesOf(compared),
    logRank: test && { chiSquare: test.chiSquare, degreesOfFreedom: test.degreesOfFreedom, p: test.p },
    pairs: pairsOf(compared),
    leftOut: namesOf(all.filter((group) => !followed.includes(group))),
    tooMany: namesOf(followed.filter((group) => !largest.includes(group)))
  }
}

function pairsOf(groups: readonly Compared[]): PairFigures[] {
  return pairwiseLogRank([groups.map(({ tally }) => tally)]).map((pair) => {
    const [first, second] = [groups[pair.first]!, groups[pair.second]!]
    const tau = Math.min(first.lastFollowed, second.lastFollowed)
    const [mean, otherMean] = [restrictedMean(first.curve, tau), restrictedMean(second.curve, tau)]
    const isSpreadKnown = mean.standardError !== 0 && otherMean.standardError !== 0
    const difference = isSpreadKnown ? restrictedMeanDifference(mean, otherMean) : null
    return {
      first: first.name,
      second: second.name,
      logRank: pair.test && {
        chiSquare: pair.test.chiSquare,
        degreesOfFreedom: pair.test.degreesOfFreedom,
        p: pair.test.p,
        adjustedP: pair.adjustedP!
      },
      meanDifference: difference && { ...difference, tau }
    }
  })
}

/** The last day of the first year on which at least five are at risk; 0 when there is none after day 0. */
function lastFollowed(tally: Tally): number {
  for (let day = oneYear; day > 0; day--) if (atRiskAt(tally, day) >= tooFew) return day
  return 0
}
