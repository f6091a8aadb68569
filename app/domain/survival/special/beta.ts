import { findRoot } from './find-root'
import { deviance, stirlingError } from './gamma'

/** x^a y^b / B(a, b) with y = 1 - x, written as a binomial probability (C. Loader, 2000) to lose no digits at large a and b. */
function betaFactor(a: number, b: number, x: number, y: number): number {
  const n = a + b
  const exponent = stirlingError(n) - stirlingError(a) - stirlingError(b) - deviance(a, n * x) - deviance(b, n * y)
  return Math.exp(exponent) * Math.sqrt((a * b) / (2 * Math.PI * n))
}

/**
 * Regularised incomplete beta functions I_x(a, b) (`lower`) and 1 - I_x(a, b) (`upper`), by the continued fraction of NIST DLMF 8.17.22
 * on the side where it converges fast.
 *
 * @param y 1 - x, to be given where x is near 1
 * @throws RangeError unless a, b > 0 and 0 <= x <= 1
 */
export function incompleteBeta(a: number, b: number, x: number, y = 1 - x): { lower: number; upper: number } {
  if (!(a > 0 && b > 0 && x >= 0 && x <= 1)) throw new RangeError(`incompleteBeta: a = ${a}, b = ${b}, x = ${x}`)
  if (x === 0) return { lower: 0, upper: 1 }
  if (y === 0) return { lower: 1, upper: 0 }
  const factor = betaFactor(a, b, x, y)
  if (x <= (a + 1) / (a + b + 2)) {
    const lower = Math.min(1, (factor / a) * fraction(a, b, x))
    return { lower, upper: 1 - lower }
  }
  const upper = Math.min(1, (factor / b) * fraction(b, a, y))
  return { lower: 1 - upper, upper }
}

function fraction(a: number, b: number, x: number): number {
  const tiny = 1e-300
  const guard = (value: number) => (Math.abs(value) < tiny ? tiny : value)
  let c = 1
  let d = 1 / guard(1 - ((a + b) * x) / (a + 1))
  let h = d
  for (let m = 1; m < 100_000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / guard(1 + even * d)
    c = guard(1 + even / c)
    h *= d * c
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / guard(1 + odd * d)
    c = guard(1 + odd / c)
    const step = d * c
    h *= step
    if (Math.abs(step - 1) < 2e-16) break
  }
  return h
}

/**
 * The x with I_x(a, b) = p: quantile of the beta distribution, by Newton's steps on the smaller tail within a bracket.
 *
 * @param p probability; 0 gives 0, 1 gives 1
 * @throws RangeError unless a, b > 0 and 0 <= p <= 1
 */
export function betaQuantile(p: number, a: number, b: number): number {
  return solve(p, 1 - p, a, b)
}

/** The x with 1 - I_x(a, b) = q: the upper quantile, exact for small q. */
export function betaUpperQuantile(q: number, a: number, b: number): number {
  return solve(1 - q, q, a, b)
}

function solve(p: number, q: number, a: number, b: number): number {
  if (!(a > 0 && b > 0 && p >= 0 && p <= 1)) throw new RangeError(`beta quantile: p = ${p}, a = ${a}, b = ${b}`)
  if (p === 0) return 0
  if (q === 0) return 1
  // Quantiles above 1/2 are sought as distances from 1, where doubles are denser.
  if (incompleteBeta(a, b, 0.5).lower < p) return 1 - below(q, p, b, a)
  return below(p, q, a, b)
}

function below(p: number, q: number, a: number, b: number): number {
  const f = (x: number) => {
    const { lower, upper } = incompleteBeta(a, b, x)
    return { value: p <= q ? lower - p : q - upper, slope: betaFactor(a, b, x, 1 - x) / (x * (1 - x)) }
  }
  return findRoot(f, 0, 0.5, Math.min(a / (a + b), 0.25))
}
