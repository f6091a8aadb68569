import { choleskyFactor, choleskySolve } from './cholesky'

/**
 * The y >= 0 that minimises (y - x)' H (y - x) / 2 - gradient' (y - x) for a symmetric positive (semi)definite H, by block principal pivoting: solve on
 * the elements taken to be positive, exchange all that contradict (negative values, or zeros that would gain), and fall back to one exchange at a
 * time when that does not help, so that it ends.
 *
 * Source: J. J. Judice and F. M. Pires, Computers and Operations Research 21:587-596 (1994).
 *
 * @param h row-major k x k; a relative 1e-13 is added to its diagonal, so that equal columns do no harm
 */
export function boxQuadratic(h: Float64Array, gradient: readonly number[], x: readonly number[]): Float64Array {
  const k = x.length
  const q = Float64Array.from({ length: k }, (_, i) => {
    let sum = gradient[i]!
    for (let j = 0; j < k; j++) sum += h[i * k + j]! * x[j]!
    return sum
  })
  const isPositive = Uint8Array.from(x, (value) => (value > 0 ? 1 : 0))
  let y = new Float64Array(k)
  let fewest = k + 1
  let chances = 3
  for (let round = 0; round < 5 * k + 50; round++) {
    const set = [...isPositive.keys()].filter((i) => isPositive[i] === 1)
    y = new Float64Array(k)
    const solved = choleskySolve(
      choleskyFactor(h, k, set),
      set.map((i) => q[i]!)
    )
    set.forEach((i, s) => (y[i] = solved[s]!))
    const wrong: number[] = []
    for (let i = 0; i < k; i++) {
      if (isPositive[i] === 1) {
        if (y[i]! < 0) wrong.push(i)
        continue
      }
      let slope = -q[i]!
      for (const j of set) slope += h[i * k + j]! * y[j]!
      if (slope < -1e-11 * (1 + Math.abs(q[i]!))) wrong.push(i)
    }
    if (wrong.length === 0) break
    if (wrong.length < fewest) {
      fewest = wrong.length
      chances = 3
    } else chances--
    for (const i of chances >= 0 ? wrong : wrong.slice(-1)) isPositive[i] = isPositive[i] === 1 ? 0 : 1
  }
  return y.map((value) => Math.max(0, value))
}
