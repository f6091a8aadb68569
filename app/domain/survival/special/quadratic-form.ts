/**
 * u' V^- u for a symmetric positive semidefinite V, and V's rank, by Gaussian elimination with the largest diagonal element as the pivot. Directions
 * in which V is 0 (to 1e-10 of its largest element) are left out.
 */
export function quadraticForm(matrix: number[][], vector: number[]): { value: number; rank: number } {
  const a = matrix.map((row) => [...row])
  const u = [...vector]
  const open = new Set(u.keys())
  const scale = Math.max(0, ...a.map((row, i) => row[i]!))
  let value = 0
  let rank = 0
  while (open.size > 0) {
    let pivot = -1
    for (const i of open) if (pivot < 0 || a[i]![i]! > a[pivot]![pivot]!) pivot = i
    const diagonal = a[pivot]![pivot]!
    if (!(diagonal > 1e-10 * scale)) break
    open.delete(pivot)
    rank++
    value += (u[pivot]! * u[pivot]!) / diagonal
    for (const i of open) {
      const factor = a[i]![pivot]! / diagonal
      u[i]! -= factor * u[pivot]!
      for (const j of open) a[i]![j]! -= factor * a[pivot]![j]!
    }
  }
  return { value, rank }
}
