/**
 * The gamma function and its regularised incomplete forms, in double precision.
 *
 * The density-like factor is written with the deviance and the Stirling error (C. Loader, "Fast and accurate computation of
 * binomial probabilities", 2000), so that large arguments lose no digits; series and continued fraction as in NIST DLMF 8.7.1 and 8.9.2.
 */

const lnSqrt2Pi = 0.918938533204672741780329736406
/** Stirling's series: B(2k) / (2k (2k - 1)) for k = 1 … 8 (DLMF 5.11.1). */
const stirlingSeries = [1 / 12, -1 / 360, 1 / 1260, -1 / 1680, 1 / 1188, -691 / 360360, 1 / 156, -3617 / 122400]
const tiny = 1e-300

/** ln x! - ((x + 1/2) ln x - x + ln sqrt(2 pi)), x > 0: the error of Stirling's formula. */
export function stirlingError(x: number): number {
  let shift = 0
  let at = x
  // delta(x) - delta(x + 1) has this closed form, so that the series is only used where it converges fast.
  while (at < 16) {
    shift += (at + 0.5) * Math.log1p(1 / at) - 1
    at += 1
  }
  const inverse = 1 / at
  const square = inverse * inverse
  let sum = 0
  for (let k = stirlingSeries.length - 1; k >= 0; k--) sum = sum * square + stirlingSeries[k]!
  return shift + sum * inverse
}

/** ln Gamma(x) for x > 0; Infinity at 0. */
export function logGamma(x: number): number {
  if (x === 0) return Infinity
  if (x === 1 || x === 2) return 0
  return (x - 0.5) * Math.log(x) - x + lnSqrt2Pi + stirlingError(x)
}

/** x ln(x / m) + m - x for x, m > 0, without cancellation near x = m. */
export function deviance(x: number, m: number): number {
  const difference = x - m
  if (Math.abs(difference) < 0.1 * (x + m)) {
    const v = difference / (x + m)
    let sum = difference * v
    let term = 2 * x * v
    const square = v * v
    for (let j = 3; ; j += 2) {
      term *= square
      const next = sum + term / j
      if (next === sum) return sum
      sum = next
    }
  }
  return x * Math.log(x / m) - difference
}

/** x^a e^-x / Gamma(a + 1) for a > 0, x > 0: the Poisson probability of a at mean x when a is whole. */
export const poissonFactor = (a: number, x: number): number =>
  Math.exp(-stirlingError(a) - deviance(a, x)) / Math.sqrt(2 * Math.PI * a)

/**
 * Regularised incomplete gamma functions P(a, x) (`lower`) and Q(a, x) = 1 - P (`upper`), each with full relative accuracy in its small tail.
 *
 * @param a shape, > 0
 * @param x >= 0, may be Infinity
 * @throws RangeError outside that domain
 */
export function incompleteGamma(a: number, x: number): { lower: number; upper: number } {
  if (!(a > 0) || !(x >= 0)) throw new RangeError(`incompleteGamma: a must be above 0 and x not below 0 (a = ${a}, x = ${x})`)
  if (x === 0) return { lower: 0, upper: 1 }
  if (x === Infinity) return { lower: 1, upper: 0 }
  const factor = poissonFactor(a, x)
  if (x < a + 1) {
    let term = 1
    let sum = 1
    for (let n = 1; term > sum * 1e-17; n++) {
      term *= x / (a + n)
      sum += term
    }
    const lower = Math.min(1, factor * sum)
    return { lower, upper: 1 - lower }
  }
  let b = x + 1 - a
  let c = 1 / tiny
  let d = 1 / b
  let h = d
  for (let i = 1; i < 1_000_000; i++) {
    const an = -i * (i - a)
    b += 2
    d = an * d + b
    if (Math.abs(d) < tiny) d = tiny
    c = b + an / c
    if (Math.abs(c) < tiny) c = tiny
    d = 1 / d
    const step = d * c
    h *= step
    if (Math.abs(step - 1) < 2e-16) break
  }
  const upper = Math.min(1, factor * a * h)
  return { lower: 1 - upper, upper }
}
