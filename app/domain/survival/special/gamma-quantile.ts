import { findRoot } from './find-root'
import { incompleteGamma, poissonFactor } from './gamma'
import { normalQuantile } from './normal'

/**
 * The x with P(a, x) = p: quantile of the gamma distribution of shape a and scale 1. Newton's steps on whichever tail is smaller, from the
 * Wilson-Hilferty approximation.
 *
 * @param p probability; 0 gives 0, 1 gives Infinity
 * @param a shape, > 0
 * @throws RangeError outside that domain
 */
export function gammaQuantile(p: number, a: number): number {
  return solve(p, 1 - p, a)
}

/** The x with Q(a, x) = q: the upper quantile, exact for small q. */
export function gammaUpperQuantile(q: number, a: number): number {
  return solve(1 - q, q, a)
}

function solve(p: number, q: number, a: number): number {
  if (!(a > 0) || !(p >= 0 && p <= 1))
    throw new RangeError(`gamma quantile: p must lie in [0, 1], a above 0 (p = ${p}, a = ${a})`)
  if (p === 0) return 0
  if (q === 0) return Infinity
  const isLow = p <= q
  const f = (x: number) => {
    const { lower, upper } = incompleteGamma(a, x)
    return { value: isLow ? lower - p : q - upper, slope: (poissonFactor(a, x) * a) / x }
  }
  const z = isLow ? normalQuantile(p) : -normalQuantile(q)
  const cube = 1 - 1 / (9 * a) + z / (3 * Math.sqrt(a))
  // Far in the lower tail P(a, x) is about x^a / Gamma(a + 1).
  const start = cube > 0.2 ? a * cube ** 3 : Math.exp((Math.log(p) + Math.log(a) - Math.log(poissonFactor(a, 1) * a) - 1) / a)
  let high = Math.max(start, a, 1)
  while (f(high).value < 0) high *= 2
  return findRoot(f, 0, high, start > 0 && start < high ? start : high / 2)
}
