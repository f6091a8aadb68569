import type { Spans } from './spans'

/** Log-likelihood with its gradient and the observed information (minus the second derivatives) in mu and tau = ln sigma. */
export type Likelihood = {
  value: number
  gradient: [number, number]
  information: { mu: number; tau: number; both: number }
}

/**
 * Log-likelihood of ln T = mu + sigma W, W the standard smallest extreme value: S(t) = exp(-e^z), z = (ln t - mu)/sigma. Exact times contribute their
 * density in T, intervals S(lower) - S(upper), right-censored units S(lower), each over S(entry).
 *
 * @param spans with no exact time at 0 (its density is 0 or unbounded)
 */
export function weibullLikelihood({ entry, lower, upper, weight }: Spans, mu: number, tau: number): Likelihood {
  const sigma = Math.exp(tau)
  let value = 0
  let gMu = 0
  let gTau = 0
  let iMu = 0
  let iTau = 0
  let iBoth = 0
  // Adds c times the cumulative hazard e^z at z: dz/dmu = -1/sigma, dz/dtau = -z.
  const addHazard = (z: number, c: number) => {
    const w = c * Math.exp(z)
    value += w
    gMu -= w / sigma
    gTau -= w * z
    iMu -= w / (sigma * sigma)
    iTau -= w * z * (z + 1)
    iBoth -= (w * (z + 1)) / sigma
  }
  for (let i = 0; i < lower.length; i++) {
    const c = weight[i]!
    const l = lower[i]!
    const u = upper[i]!
    if (entry[i]! > 0) addHazard((Math.log(entry[i]!) - mu) / sigma, c)
    if (u === Infinity) {
      if (l > 0) addHazard((Math.log(l) - mu) / sigma, -c)
      continue
    }
    const zu = (Math.log(u) - mu) / sigma
    if (l === u) {
      value += c * (zu - tau - Math.log(u))
      gMu -= c / sigma
      gTau -= c * (zu + 1)
      iTau -= c * zu
      iBoth -= c / sigma
      addHazard(zu, -c)
      continue
    }
    if (l === 0) {
      addInterval(Math.exp(zu), [-1 / sigma, -zu], [1 / (sigma * sigma), zu * (zu + 1), (zu + 1) / sigma], c)
      continue
    }
    const zl = (Math.log(l) - mu) / sigma
    addHazard(zl, -c)
    // D = e^zu - e^zl, kept exact for narrow intervals; its derivatives over D.
    const wl = Math.exp(zl)
    const gap = Math.log1p((u - l) / l) / sigma
    const d = wl * Math.expm1(gap)
    const wu = wl + d
    const zGap = d * zl + wu * gap
    addInterval(d, [-1 / sigma, -zGap / d], [1 / (sigma * sigma), secondTau(wl, d, zl, gap) / d, (zGap / d + 1) / sigma], c)
  }
  return { value, gradient: [gMu, gTau], information: { mu: iMu, tau: iTau, both: iBoth } }

  // Adds c ln(1 - e^-d) for a hazard difference d with first and second derivatives given relative to d (mu, tau, both).
  function addInterval(d: number, first: [number, number], second: [number, number, number], c: number) {
    value += c * (d > 0.7 ? Math.log1p(-Math.exp(-d)) : Math.log(-Math.expm1(-d)))
    // d/(e^d - 1) and d^2 e^d/(e^d - 1)^2; both tend to 0 for large d and to 1 for small.
    const once = d > 700 ? 0 : d / Math.expm1(d)
    const twice = d > 700 ? 0 : once * (once + d)
    gMu += c * once * first[0]
    gTau += c * once * first[1]
    iMu -= c * (once * second[0] - twice * first[0] * first[0])
    iTau -= c * (once * second[1] - twice * first[1] * first[1])
    iBoth -= c * (once * second[2] - twice * first[0] * first[1])
  }
}

/** e^zu zu (zu + 1) - e^zl zl (zl + 1), without cancellation for a narrow gap = zu - zl; d = e^zu - e^zl. */
const secondTau = (wl: number, d: number, zl: number, gap: number): number =>
  d * zl * (zl + 1) + (wl + d) * gap * (2 * zl + gap + 1)
