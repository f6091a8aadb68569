import { limitText } from './ageing-words'
import type { BatchFigures } from './figures.types'
import { listOf } from './reliability-words'

const nameOf = ({ version, code }: BatchFigures) => `${code} of ${version}`

export const flaggedHeading = (flagged: readonly BatchFigures[]): string =>
  flagged.length === 1
    ? `Batch ${nameOf(flagged[0]!)} fails more than its release’s other batches`
    : `Batches ${listOf(flagged.map(nameOf))} fail more than their releases’ other batches`

/** What stands behind a flag: counts first, then the ratio with its interval. */
export function flaggedSentence({ code, n, watch }: BatchFigures): string {
  const { observed, expected, ratio, lower, upper } = watch!
  return `Of the ${n} units of ${code} followed, ${observed} failed by the board, where ${expected.toFixed(1)} would be expected from the release’s other batches: ${ratio.toFixed(1)} times as many (95\u00a0% interval ${limitText(lower, 'down')} to ${limitText(upper, 'up')}).`
}

/** Why there is nothing to compare a batch with. */
export const unwatchedText = ({ others }: Pick<BatchFigures, 'others'>): string =>
  others === 0
    ? 'no other batch of its release to compare it with'
    : `none of the ${others} followed ${others === 1 ? 'unit' : 'units'} of its release’s other batches failed by the board, so no number can be expected`
