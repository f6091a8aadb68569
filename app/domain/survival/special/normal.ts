import { incompleteGamma } from './gamma'

/** P(Z > z) of the standard normal distribution, with full relative accuracy in the upper tail (Q(1/2, z^2/2) / 2, DLMF 7.11.2). */
export function normalUpperTail(z: number): number {
  const { lower, upper } = incompleteGamma(0.5, (z * z) / 2)
  return z >= 0 ? upper / 2 : 0.5 + lower / 2
}

/** P(Z <= z) of the standard normal distribution. */
export const normalCdf = (z: number): number => normalUpperTail(-z)

/**
 * The z with P(Z <= z) = p. Starts from a rough rational form and is polished by Halley's steps on the tail itself
 * until it no longer moves (about 1e-15 relative).
 *
 * @param p probability; 0 gives -Infinity, 1 gives Infinity
 * @throws RangeError when p is no probability
 */
export function normalQuantile(p: number): number {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`normalQuantile: p must lie in [0, 1] (p = ${p})`)
  if (p === 0.5) return 0
  return p < 0.5 ? -normalUpperQuantile(p) : normalUpperQuantile(1 - p)
}

/** The z with P(Z > z) = q; takes small q as they are, where `normalQuantile(1 - q)` would round. */
export function normalUpperQuantile(q: number): number {
  if (!(q >= 0 && q <= 1)) throw new RangeError(`normalUpperQuantile: q must lie in [0, 1] (q = ${q})`)
  if (q === 0) return Infinity
  if (q === 1) return -Infinity
  if (q > 0.5) return -normalUpperQuantile(1 - q)
  // Abramowitz and Stegun 26.2.22, good to 3e-3: near enough for Halley's steps.
  const t = Math.sqrt(-2 * Math.log(q))
  let z = t - (2.30753 + 0.27061 * t) / (1 + 0.99229 * t + 0.04481 * t * t)
  for (let i = 0; i < 20; i++) {
    const density = Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI)
    const error = (normalUpperTail(z) - q) / density
    const next = z + error / (1 + (error * z) / 2)
    if (Math.abs(next - z) <= 1e-16 * Math.abs(z) + 1e-300) return next
    z = next
  }
  return z
}
