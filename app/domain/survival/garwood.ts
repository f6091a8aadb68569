import { gammaQuantile, gammaUpperQuantile } from './special/gamma-quantile'

export type RatioLimits = { observed: number; expected: number; ratio: number; lower: number; upper: number }

/**
 * Exact two-sided Poisson limits of an observed count over the number expected (or over an exposure, which gives a rate):
 * chi2(alpha/2; 2x)/2 and chi2(1 - alpha/2; 2x + 2)/2, each divided by the expected number; lower is 0 when x = 0.
 *
 * Source: F. Garwood, Biometrika 28:437-442 (1936).
 *
 * @param observed x, a whole number >= 0
 * @param expected >= 0
 * @returns null when nothing is expected: there is no ratio
 * @throws RangeError when a number makes no sense
 */
export function garwood(observed: number, expected: number, confidence = 0.95): RatioLimits | null {
  if (!Number.isSafeInteger(observed) || observed < 0) throw new RangeError(`garwood: ${observed} is no count`)
  if (!(expected >= 0 && Number.isFinite(expected))) throw new RangeError(`garwood: ${expected} cannot be expected`)
  if (!(confidence > 0 && confidence < 1))
    throw new RangeError(`garwood: the confidence must lie between 0 and 1 (${confidence})`)
  if (expected === 0) return null
  const tail = (1 - confidence) / 2
  return {
    observed,
    expected,
    ratio: observed / expected,
    lower: observed === 0 ? 0 : gammaQuantile(tail, observed) / expected,
    upper: gammaUpperQuantile(tail, observed + 1) / expected
  }
}
