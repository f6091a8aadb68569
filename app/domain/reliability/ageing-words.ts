import type { ShapeFigures } from './figures.types'
import { tooFew } from './reliability-words'

export type AgeingPattern = 'early' | 'wear-out'

/** Of fewer failures nothing is said: the limits of a shape are those of many. */
export const hasEnough = ({ failures }: Pick<ShapeFigures, 'failures'>) => failures >= tooFew

/** What the shape says of failures as units age; null where its interval holds 1, too few have failed, or there is no shape. */
export function ageingPattern(shape: Pick<ShapeFigures, 'lower' | 'upper' | 'failures'> | null): AgeingPattern | null {
  if (shape === null || !hasEnough(shape)) return null
  return shape.upper < 1 ? 'early' : shape.lower > 1 ? 'wear-out' : null
}

export const patternWords: Record<AgeingPattern, string> = {
  early: 'rarer with age: early failures',
  'wear-out': 'more frequent with age: wear-out'
}

/** Two figures after the point; a limit is rounded outwards, but never onto or over 1, which decides. */
export function limitText(limit: number, direction: 'down' | 'up'): string {
  for (const digits of [2, 3, 4]) {
    const scale = 10 ** digits
    const rounded = (direction === 'down' ? Math.floor(limit * scale + 1e-9) : Math.ceil(limit * scale - 1e-9)) / scale
    if (limit === 1 || (rounded - 1) * (limit - 1) > 0) return rounded.toFixed(digits)
  }
  return limit < 1 ? 'just under 1' : 'just over 1'
}

export const shapeInterval = ({ lower, upper }: Pick<ShapeFigures, 'lower' | 'upper'>): string =>
  `${limitText(lower, 'down')} to ${limitText(upper, 'up')}`

/** Whether failures come early or with wear, among the units that outlasted the day of fitting; never more than the interval of the shape. */
export function ageingSentence(shape: ShapeFigures | null): string {
  if (shape === null || !hasEnough(shape))
    return 'Whether failures grow rarer or more frequent with age cannot be told: too few have failed after the day of fitting.'
  const interval = `the shape of a Weibull curve is ${shape.estimate.toFixed(2)}, 95\u00a0% interval ${shapeInterval(shape)}`
  const pattern = ageingPattern(shape)
  return pattern === null
    ? `Whether failures grow rarer or more frequent with age cannot be told: ${interval}, which holds 1.`
    : `Of units that outlasted the day of fitting, failures grow ${patternWords[pattern]} (${interval}).`
}
