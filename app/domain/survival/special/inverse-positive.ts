/**
 * The inverse of a symmetric positive (semi)definite matrix, by Cholesky.
 *
 * @param h row-major k x k; a relative 1e-13 is added to its diagonal, so that equal columns do no harm
 */
export function inversePositive(h: Float64Array, k: number): Float64Array {
  // Lower triangle of L with h = L L'.
  const l = new Float64Array(k * k)
  for (let i = 0; i < k; i++)
    for (let j = 0; j <= i; j++) {
      let sum = h[i * k + j]!
      for (let m = 0; m < j; m++) sum -= l[i * k + m]! * l[j * k + m]!
      const ridge = 1e-13 * h[i * k + i]!
      l[i * k + j] = i === j ? Math.sqrt(Math.max(sum + ridge, ridge, 1e-300)) : sum / l[j * k + j]!
    }
  // Row c holds column c of the inverse of L, so that all sums run along rows.
  const r = new Float64Array(k * k)
  for (let c = 0; c < k; c++)
    for (let i = c; i < k; i++) {
      let sum = i === c ? 1 : 0
      for (let m = c; m < i; m++) sum -= l[i * k + m]! * r[c * k + m]!
      r[c * k + i] = sum / l[i * k + i]!
    }
  const inverse = new Float64Array(k * k)
  for (let i = 0; i < k; i++)
    for (let j = 0; j <= i; j++) {
      let sum = 0
      for (let m = i; m < k; m++) sum += r[i * k + m]! * r[j * k + m]!
      inverse[i * k + j] = inverse[j * k + i] = sum
    }
  return inverse
}
