import { zOf } from './confidence-limits'
import type { Spans } from './spans'
import { weibullLikelihood, type Likelihood } from './weibull-likelihood'

export type Estimate = { estimate: number; lower: number; upper: number }

/**
 * A fitted Weibull distribution, S(t) = exp(-(t/scale)^shape). `mu` = ln scale, `sigma` = 1/shape; `covariance` is that of (mu, ln sigma), the inverse of the
 * observed information.
 */
export type WeibullFit = {
  shape: number
  scale: number
  shapeStandardError: number
  scaleStandardError: number
  logLikelihood: number
  mu: number
  sigma: number
  covariance: { mu: number; logSigma: number; both: number }
}

/**
 * Maximum likelihood with right and interval censoring and delayed entry, by damped Newton steps in (mu, ln sigma) down to a zero score.
 * The log-likelihood is that of T.
 *
 * Null where there is no maximum to be had: no failure; a failure at time 0 exactly (density 0 or unbounded); all failures compatible with one instant that
 * nobody outlived (the shape grows without end); failures that do not tell shape from scale.
 *
 * Source: W. Q. Meeker and L. A. Escobar, Statistical Methods for Reliability Data (Wiley 1998), chapter 8.
 */
export function fitWeibull(spans: Spans): WeibullFit | null {
  const start = startOf(spans)
  if (start === null) return null
  const scaled = {
    ...spans,
    entry: spans.entry.map(divide(start.unit)),
    lower: spans.lower.map(divide(start.unit)),
    upper: spans.upper.map(divide(start.unit))
  }
  let mu = 0
  let tau = 0
  let at = weibullLikelihood(scaled, mu, tau)
  for (let i = 0; i < 200; i++) {
    const [dMu, dTau] = newtonStep(at)
    const size = Math.max(Math.abs(dMu) / Math.exp(tau), Math.abs(dTau))
    if (!Number.isFinite(size)) return null
    let damping = Math.min(1, 1 / size)
    let next = weibullLikelihood(scaled, mu + damping * dMu, tau + damping * dTau)
    // Close to the top a step changes the value by less than rounding: it is taken as it comes.
    while (size > 1e-6 && !(next.value > at.value) && damping > 1e-10) {
      damping /= 2
      next = weibullLikelihood(scaled, mu + damping * dMu, tau + damping * dTau)
    }
    mu += damping * dMu
    tau += damping * dTau
    at = next
    if (tau < -12 || tau > 12) return null
    if (size < 1e-11) return fitOf(at, mu, tau, start)
  }
  return null
}

/** Newton's step, with the information's diagonal raised where it is not positive definite. */
function newtonStep({ gradient: [g, h], information: { mu, tau, both } }: Likelihood): [number, number] {
  let a = mu
  let b = tau
  for (let ridge = 1e-3 * (Math.abs(mu) + Math.abs(tau)); !(a > 0 && a * b - both * both > 1e-12 * a * b); ridge *= 4) {
    a = Math.abs(mu) + ridge
    b = Math.abs(tau) + ridge
    if (!(ridge > 0 && ridge < 1e300)) return [NaN, NaN]
  }
  const determinant = a * b - both * both
  return [(b * g - both * h) / determinant, (a * h - both * g) / determinant]
}

function fitOf(
  { value, information: { mu: a, tau: b, both } }: Likelihood,
  mu: number,
  tau: number,
  start: Start
): WeibullFit | null {
  const determinant = a * b - both * both
  if (!(a > 0 && determinant > 1e-9 * a * b)) return null
  const covariance = { mu: b / determinant, logSigma: a / determinant, both: -both / determinant }
  const shape = Math.exp(-tau)
  const scale = Math.exp(mu) * start.unit
  return {
    shape,
    scale,
    shapeStandardError: shape * Math.sqrt(covariance.logSigma),
    scaleStandardError: scale * Math.sqrt(covariance.mu),
    logLikelihood: value - start.exact * Math.log(start.unit),
    mu: mu + Math.log(start.unit),
    sigma: Math.exp(tau),
    covariance
  }
}

type Start = { unit: number; exact: number }

/** Time per failure, which becomes the unit of time, and the number of exact failures; null where no fit exists from the start. */
function startOf({ entry, lower, upper, weight }: Spans): Start | null {
  let time = 0
  let failures = 0
  let exact = 0
  for (let i = 0; i < lower.length; i++) {
    const w = weight[i]!
    const isFailure = upper[i] !== Infinity
    if (isFailure && upper[i] === 0) return null
    if (isFailure) failures += w
    if (isFailure && lower[i] === upper[i]) exact += w
    time += w * ((isFailure ? (lower[i]! + upper[i]!) / 2 : lower[i]!) - entry[i]!)
  }
  return failures > 0 && time > 0 ? { unit: time / failures, exact } : null
}

const divide = (by: number) => (value: number) => value / by

/** Limits of the shape (normal for ln shape) or the scale (normal for ln scale). */
export function weibullLimits(fit: WeibullFit, of: 'shape' | 'scale', confidence = 0.95): Estimate {
  const estimate = fit[of]
  const width = zOf(confidence) * Math.sqrt(of === 'shape' ? fit.covariance.logSigma : fit.covariance.mu)
  return { estimate, lower: estimate * Math.exp(-width), upper: estimate * Math.exp(width) }
}
