import type { Comparison, PairFigures } from './figures.types'
import { listOf, pText } from './reliability-words'

/** Below this p is called more than chance would explain. */
export const chanceLevel = 0.05

const what = { revision: 'revisions', release: 'releases' } as const

/** Whole days of a limit, rounded away from the claim. */
const outward = (days: number): number => (days < 0 ? Math.floor(days + 1e-9) : Math.ceil(days - 1e-9)) || 0

/** Whether the curves of all groups can be told apart: null where nothing could be tested. */
export function comparisonSentence({ by, logRank, groups }: Pick<Comparison, 'by' | 'logRank' | 'groups'>): string | null {
  if (logRank === null) return null
  const { chiSquare, degreesOfFreedom, p } = logRank
  const found =
    p < chanceLevel
      ? `The ${groups.length} ${what[by]} differ by more than chance would explain`
      : `The figures cannot tell the ${groups.length} ${what[by]} apart`
  return `${found} (log-rank test: chi-square ${chiSquare.toFixed(1)} on ${degreesOfFreedom}, ${pText(p).replaceAll(' ', '\u00a0')}).`
}

/** What a pair's test says: adjusted for all pairs, so that one of many does not stand out by luck. */
export const pairVerdict = ({ logRank }: Pick<PairFigures, 'logRank'>): string =>
  logRank === null ? 'not tested' : logRank.adjustedP < chanceLevel ? 'more than chance' : 'not told apart'

/** What the comparison leaves open, a sentence each. */
export function untoldWords({ by, pairs, leftOut, tooMany }: Pick<Comparison, 'by' | 'pairs' | 'leftOut' | 'tooMany'>): string[] {
  const open = pairs.filter((pair) => pair.logRank === null || pair.logRank.adjustedP >= chanceLevel)
  const widest = Math.max(
    0,
    ...open.flatMap(({ meanDifference: d }) => (d === null ? [] : [Math.abs(outward(d.lower)), Math.abs(outward(d.upper))]))
  )
  const said: string[] = []
  if (open.length > 0)
    said.push(
      widest > 0
        ? `Not told apart is not alike: a difference of up to ${widest} days in the first year would fit these figures too.`
        : 'Not told apart is not alike: too little was seen to say how large a difference could be.'
    )
  said.push(
    by === 'revision'
      ? 'Why revisions differ: other hands, other batches and other faults went into each, and a test does not see them.'
      : 'Why releases differ: they were fitted at different times, by different people, into different consoles.'
  )
  if (leftOut.length > 0) said.push(`How ${listOf(leftOut)} would compare: too few were followed.`)
  if (tooMany.length > 0) said.push(`How ${listOf(tooMany)} would compare: only the twelve with the most units are.`)
  return said
}
