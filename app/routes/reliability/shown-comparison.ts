import type { Comparison, PairFigures } from '~/domain/reliability/figures.types'

export type ShownComparison = Comparison & {
  /** The group that the others are set beside. */
  reference: string
  /** Each pair with it, as the other beside it: days that the other has more or less. */
  beside: PairFigures[]
  /** The pairs without it. */
  others: PairFigures[]
}

/** A comparison as seen from one of its groups: the one wanted where it is among them, else the first. Null with fewer than two. */
export function shownComparison(comparison: Comparison | null, wanted: string | null): ShownComparison | null {
  if (comparison === null || comparison.groups.length < 2) return null
  const reference = comparison.groups.find((group) => group === wanted) ?? comparison.groups[0]!
  const has = ({ first, second }: PairFigures) => first === reference || second === reference
  return {
    ...comparison,
    reference,
    beside: comparison.pairs.filter(has).map((pair) => (pair.second === reference ? turned(pair) : pair)),
    others: comparison.pairs.filter((pair) => !has(pair))
  }
}

/** The same pair seen from its second. */
function turned({ first, second, logRank, meanDifference: d }: PairFigures): PairFigures {
  return {
    first: second,
    second: first,
    logRank,
    meanDifference: d && {
      ...d,
      estimate: 0 - d.estimate,
      lower: 0 - d.upper,
      upper: 0 - d.lower,
      z: d.z === null ? null : 0 - d.z
    }
  }
}
