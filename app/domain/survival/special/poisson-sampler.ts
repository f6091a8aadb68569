import { deviance, stirlingError } from './gamma'

/**
 * Draws Poisson numbers of mean `mean`, exactly (as far as uniform numbers of 32 bits go): by inversion below 10, above by transformed rejection, whose cost
 * does not grow with the mean.
 *
 * Source: W. Hörmann, Insurance: Mathematics and Economics 12:39-45 (1993), algorithm PTRS.
 *
 * @param random uniform numbers in [0, 1)
 * @throws RangeError unless the mean is finite and not below 0
 */
export function poissonSampler(mean: number, random: () => number): () => number {
  if (!(mean >= 0 && Number.isFinite(mean))) throw new RangeError(`poissonSampler: the mean must not be below 0 (${mean})`)
  return mean < 10 ? byInversion(mean, random) : byRejection(mean, random)
}

function byInversion(mean: number, random: () => number): () => number {
  const none = Math.exp(-mean)
  return () => {
    let u = random()
    let k = 0
    // The probabilities run out where no uniform number is left to reach them.
    for (let p = none; u >= p && p > 1e-20; p *= mean / k) {
      u -= p
      k++
    }
    return k
  }
}

function byRejection(mean: number, random: () => number): () => number {
  const b = 0.931 + 2.53 * Math.sqrt(mean)
  const a = -0.059 + 0.02483 * b
  const inverseAlpha = 1.1239 + 1.1328 / (b - 3.4)
  const sure = 0.9277 - 3.6224 / (b - 2)
  return () => {
    for (;;) {
      const u = random() - 0.5
      const v = random()
      const us = 0.5 - Math.abs(u)
      const k = Math.floor(((2 * a) / us + b) * u + mean + 0.43)
      if (us >= 0.07 && v <= sure) return k
      if (k < 0 || (us < 0.013 && v > us)) continue
      if (Math.log((v * inverseAlpha) / (a / (us * us) + b)) <= logProbability(k, mean)) return k
    }
  }
}

/** ln of e^-m m^k / k!, without loss of digits at large m. */
const logProbability = (k: number, mean: number): number =>
  k === 0 ? -mean : -stirlingError(k) - deviance(k, mean) - Math.log(2 * Math.PI * k) / 2
