/**
 * Minus the second derivatives of Turnbull's log-likelihood in the falls of k cells, row-major: element (i, j) is the curvature of all terms whose cells
 * take in both.
 *
 * @param from first and `to` last of the k cells that each term takes in; a term with `from` after `to` takes in none
 * @param bend curvature of each term in the sum of its falls
 */
export function curvatureMatrix(k: number, from: Int32Array, to: Int32Array, bend: Float64Array): Float64Array {
  const matrix = new Float64Array(k * k)
  for (let t = 0; t < from.length; t++) if (bend[t]! > 0 && from[t]! <= to[t]!) matrix[from[t]! * k + to[t]!]! += bend[t]!
  // Element (i, j), i <= j, is the curvature of all terms that begin at or before i and end at or after j.
  let begun = new Float64Array(k)
  for (let i = 0; i < k; i++) {
    for (let j = i; j < k; j++) matrix[i * k + j]! += begun[j]!
    begun = matrix.slice(i * k, (i + 1) * k)
    for (let j = k - 2; j >= i; j--) matrix[i * k + j]! += matrix[i * k + j + 1]!
  }
  for (let i = 0; i < k; i++) for (let j = 0; j < i; j++) matrix[i * k + j] = matrix[j * k + i]!
  return matrix
}

/** First and last position within `cells` (ascending) of each term's cells; `from` lies after `to` where none is among them. */
export function termsWithin(
  { size, first, last }: { size: number; first: Int32Array; last: Int32Array },
  cells: ArrayLike<number>
): { from: Int32Array; to: Int32Array } {
  const atOrAfter = new Int32Array(size + 1).fill(cells.length)
  for (let k = 0; k < cells.length; k++) atOrAfter[cells[k]!] = k
  for (let j = size - 1; j >= 0; j--) atOrAfter[j] = Math.min(atOrAfter[j]!, atOrAfter[j + 1]!)
  return { from: first.map((j) => atOrAfter[j]!), to: last.map((j) => atOrAfter[j + 1]! - 1) }
}
