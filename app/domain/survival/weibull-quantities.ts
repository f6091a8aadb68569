import { zOf } from './confidence-limits'
import { weibullLimits, type Estimate, type WeibullFit } from './weibull'

/**
 * The time by which a fraction p has failed: ln t_p = mu + sigma ln(-ln(1 - p)), with limits that are normal for ln t_p (delta method). p = 0.1 is the B10
 * life, 0.5 the median.
 *
 * @throws RangeError unless 0 < p < 1
 */
export function weibullQuantile(fit: WeibullFit, p: number, confidence = 0.95): Estimate {
  if (!(p > 0 && p < 1)) throw new RangeError(`weibullQuantile: p must lie between 0 and 1 (${p})`)
  const spread = fit.sigma * Math.log(-Math.log1p(-p))
  const estimate = Math.exp(fit.mu + spread)
  const { mu, logSigma, both } = fit.covariance
  const width = zOf(confidence) * Math.sqrt(mu + 2 * spread * both + spread * spread * logSigma)
  return { estimate, lower: estimate * Math.exp(-width), upper: estimate * Math.exp(width) }
}

/**
 * S(t) with limits that are normal for z = (ln t - mu)/sigma = ln(-ln S) (delta method). At t = 0, S is 1 without limits to speak of.
 *
 * @throws RangeError for a negative t
 */
export function weibullSurvival(fit: WeibullFit, t: number, confidence = 0.95): Estimate {
  if (!(t >= 0)) throw new RangeError(`weibullSurvival: the time must not be negative (${t})`)
  if (t === 0) return { estimate: 1, lower: 1, upper: 1 }
  const z = (Math.log(t) - fit.mu) / fit.sigma
  const { mu, logSigma, both } = fit.covariance
  const width = zOf(confidence) * Math.sqrt(mu / (fit.sigma * fit.sigma) + (2 * z * both) / fit.sigma + z * z * logSigma)
  const survival = (at: number) => Math.exp(-Math.exp(at))
  return { estimate: survival(z), lower: survival(z + width), upper: survival(z - width) }
}

/** What the shape says in words, only when its interval excludes 1: below, failures come early; above, with wear. */
export function wearPattern(fit: WeibullFit, confidence = 0.95): 'early-failures' | 'wear-out' | null {
  const { lower, upper } = weibullLimits(fit, 'shape', confidence)
  if (upper < 1) return 'early-failures'
  return lower > 1 ? 'wear-out' : null
}
