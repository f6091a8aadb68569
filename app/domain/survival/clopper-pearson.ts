import { betaQuantile, betaUpperQuantile } from './special/beta'

export type ProportionLimits = { estimate: number; lower: number; upper: number }

/**
 * Exact two-sided limits of a proportion: lower is the alpha/2 quantile of Beta(x, n - x + 1), 0 when x = 0; upper the 1 - alpha/2 quantile of
 * Beta(x + 1, n - x), 1 when x = n.
 *
 * Source: C. J. Clopper and E. S. Pearson, Biometrika 26:404-413 (1934).
 *
 * @param successes x, a whole number, 0 <= x <= n
 * @param n trials, a whole number
 * @returns null when n = 0: nothing was tried
 * @throws RangeError when the counts or the confidence make no sense
 */
export function clopperPearson(successes: number, n: number, confidence = 0.95): ProportionLimits | null {
  if (!Number.isSafeInteger(successes) || !Number.isSafeInteger(n) || successes < 0 || successes > n)
    throw new RangeError(`clopperPearson: ${successes} of ${n} is no proportion`)
  if (!(confidence > 0 && confidence < 1))
    throw new RangeError(`clopperPearson: the confidence must lie between 0 and 1 (${confidence})`)
  if (n === 0) return null
  const tail = (1 - confidence) / 2
  return {
    estimate: successes / n,
    lower: successes === 0 ? 0 : betaQuantile(tail, successes, n - successes + 1),
    upper: successes === n ? 1 : betaUpperQuantile(tail, successes + 1, n - successes)
  }
}
