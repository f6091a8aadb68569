import { deviance, stirlingError } from './gamma'

/**
 * Draws Poisson numbers of mean `mean`, exactly (as far as uniform numbers of 32 bits go): up to 500 by inversion through a table of where to
 * begin, above by transformed rejection; the cost of neither grows with the mean.
 *
 * Source: W. Hörmann, Insurance: Mathematics and Economics 12:39-45 (1993), algorithm PTRS; H.-C. Chen and Y. Asau, AIIE Transactions 6:163-166 (1974),
 * guide tables.
 *
 * @param random uniform numbers in [0, 1)
 * @throws RangeError unless the mean is finite and not below 0
 */
export function poissonSampler(mean: number, random: () => number): () => number {
  if (!(mean >= 0 && Number.isFinite(mean))) throw new RangeError(`poissonSampler: the mean must not be below 0 (${mean})`)
  return mean <= largestTabled ? byTable(mean, random) : byRejection(mean, random)
}

const largestTabled = 500

/** P(X <= first + i), and for each of equally wide strips of the unit interval the i at which the search for a number in it begins. */
type Table = { first: number; upTo: Float64Array; guide: Uint16Array }

// Rows of a sample share few different weights, and resamples share the rows.
const tables = new Map<number, Table>()
const mostTables = 1_000

function tableOf(mean: number): Table {
  const known = tables.get(mean)
  if (known !== undefined) return known
  // Beyond ten deviations, and some more for small means, less than 1e-20 is left: no number of 32 bits reaches it.
  const first = Math.max(0, Math.floor(mean - 10 * Math.sqrt(mean)))
  const size = Math.ceil(mean + 10 * Math.sqrt(mean) + 25) - first + 1
  const upTo = new Float64Array(size)
  let sum = 0
  for (let i = 0; i < size; i++) upTo[i] = sum += mean === 0 ? Number(i === 0) : Math.exp(logProbability(first + i, mean))
  const guide = new Uint16Array(size)
  for (let strip = 0, i = 0; strip < size; strip++) {
    while (i < size - 1 && upTo[i]! <= strip / size) i++
    guide[strip] = i
  }
  const table = { first, upTo, guide }
  if (tables.size >= mostTables) tables.clear()
  tables.set(mean, table)
  return table
}

function byTable(mean: number, random: () => number): () => number {
  const { first, upTo, guide } = tableOf(mean)
  const last = upTo.length - 1
  return () => {
    const u = random()
    let i = guide[Math.floor(u * guide.length)]!
    while (i < last && u >= upTo[i]!) i++
    return first + i
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
