/**
 * Lower triangle L with h = L L', row-major; row i is 0 before `begin[i]`.
 */
export type CholeskyFactor = { size: number; lower: Float64Array; begin: Int32Array }

/**
 * Factors the rows and columns of `set` of a symmetric positive (semi)definite matrix. A row of the factor begins where the matrix's row does: what lies
 * before is 0 and left out, so that a banded matrix costs little.
 *
 * Source: A. George and J. W. H. Liu, Computer Solution of Large Sparse Positive Definite Systems (1981), chapter 4.
 *
 * @param h row-major k x k; a relative 1e-13 is added to its diagonal, so that equal columns do no harm
 * @param set ascending; all when left out
 */
export function choleskyFactor(h: Float64Array, k: number, set: readonly number[] = [...Array(k).keys()]): CholeskyFactor {
  const size = set.length
  const lower = new Float64Array(size * size)
  const begin = new Int32Array(size)
  for (let i = 0; i < size; i++) {
    const row = set[i]! * k
    let start = 0
    while (start < i && h[row + set[start]!] === 0) start++
    begin[i] = start
    for (let j = start; j <= i; j++) {
      const from = Math.max(start, begin[j]!)
      const sum = h[row + set[j]!]! - dot(lower, i * size + from, j * size + from, j - from)
      const ridge = 1e-13 * h[row + set[i]!]!
      lower[i * size + j] = i === j ? Math.sqrt(Math.max(sum + ridge, ridge, 1e-300)) : sum / lower[j * size + j]!
    }
  }
  return { size, lower, begin }
}

/** The z with L L' z = `right`. */
export function choleskySolve({ size, lower, begin }: CholeskyFactor, right: ArrayLike<number>): Float64Array {
  const z = new Float64Array(size)
  for (let i = 0; i < size; i++) {
    let sum = right[i]!
    for (let m = begin[i]!; m < i; m++) sum -= lower[i * size + m]! * z[m]!
    z[i] = sum / lower[i * size + i]!
  }
  for (let i = size - 1; i >= 0; i--) {
    const value = z[i]! / lower[i * size + i]!
    z[i] = value
    for (let m = begin[i]!; m < i; m++) z[m]! -= lower[i * size + m]! * value
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
