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

/**
 * Solves the rows and columns of `set` by Cholesky. A row of the factor begins where the matrix's row does (A. George and J. W. H. Liu, Computer Solution
 * of Large Sparse Positive Definite Systems, 1981, chapter 4): what lies before is 0 and left out.
 */
function solveOn(h: Float64Array, k: number, set: number[], q: Float64Array): Float64Array {
  const n = set.length
  const l = new Float64Array(n * n)
  const z = new Float64Array(n)
  const begin = new Int32Array(n)
  for (let i = 0; i < n; i++) {
    const row = set[i]! * k
    const li = i * n
    let start = 0
    while (start < i && h[row + set[start]!] === 0) start++
    begin[i] = start
    for (let j = start; j <= i; j++) {
      const from = Math.max(start, begin[j]!)
      const sum = h[row + set[j]!]! - dot(l, li + from, j * n + from, j - from)
      if (i === j) {
        const ridge = 1e-13 * h[row + set[i]!]!
        l[li + i] = Math.sqrt(Math.max(sum + ridge, ridge, 1e-300))
      } else l[li + j] = sum / l[j * n + j]!
    }
    let sum = q[set[i]!]!
    for (let m = start; m < i; m++) sum -= l[li + m]! * z[m]!
    z[i] = sum / l[li + i]!
  }
  for (let i = n - 1; i >= 0; i--) {
    const value = z[i]! / l[i * n + i]!
    z[i] = value
    for (let m = begin[i]!; m < i; m++) z[m]! -= l[i * n + m]! * value
  }
  return z
}

/** Product of two stretches of one array; four sums side by side, because each addition waits for the one before. */
function dot(l: Float64Array, a: number, b: number, length: number): number {
  let s0 = 0
  let s1 = 0
  let s2 = 0
  let s3 = 0
  let m = 0
  for (; m < length - 3; m += 4) {
    s0 += l[a + m]! * l[b + m]!
    s1 += l[a + m + 1]! * l[b + m + 1]!
    s2 += l[a + m + 2]! * l[b + m + 2]!
    s3 += l[a + m + 3]! * l[b + m + 3]!
  }
  for (; m < length; m++) s0 += l[a + m]! * l[b + m]!
  return s0 + s1 + (s2 + s3)
}
