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
    solveOn(h, k, set, q).forEach((value, s) => (y[set[s]!] = value))
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

/** Solves the rows and columns of `set` by Cholesky. */
function solveOn(h: Float64Array, k: number, set: number[], q: Float64Array): Float64Array {
  const n = set.length
  const l = new Float64Array(n * n)
  const z = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const row = set[i]! * k
    const li = i * n
    for (let j = 0; j <= i; j++) {
      const lj = j * n
      let sum = h[row + set[j]!]!
      for (let m = 0; m < j; m++) sum -= l[li + m]! * l[lj + m]!
      if (i === j) {
        const diagonal = h[row + set[i]!]!
        l[li + i] = Math.sqrt(Math.max(sum + 1e-13 * diagonal, 1e-13 * diagonal, 1e-300))
      } else l[li + j] = sum / l[lj + j]!
    }
    let sum = q[set[i]!]!
    for (let m = 0; m < i; m++) sum -= l[li + m]! * z[m]!
    z[i] = sum / l[li + i]!
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = z[i]!
    for (let m = i + 1; m < n; m++) sum -= l[m * n + i]! * z[m]!
    z[i] = sum / l[i * n + i]!
  }
  return z
}
