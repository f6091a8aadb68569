import type { Cells } from './turnbull-cells'
import type { Spans } from './spans'

/**
 * What the log-likelihood needs, with g_j >= 0 the fall of ln S in cell j:
 * `survived[j]` units are known to have been watched through cell j without failing, and `weight[t]` units failed somewhere in
 * the cells `first[t]` … `last[t]`. Then ln L = -sum survived_j g_j + sum weight_t ln(1 - exp(-sum of g over the term's cells)), concave in g, with
 * delayed entry included.
 */
export type Problem = {
  size: number
  first: Int32Array
  last: Int32Array
  /** Term of each row of the spans; -1 for right-censored rows. */
  termOf: Int32Array
}

export type Load = { survived: Float64Array; weight: Float64Array }

/** Terms are the distinct pairs of first and last cell among the failures. */
export function problemOf(cells: Cells, spans: Spans): Problem {
  const size = cells.left.length
  const termOf = new Int32Array(spans.lower.length).fill(-1)
  const terms = new Map<number, number>()
  const first: number[] = []
  const last: number[] = []
  for (let i = 0; i < termOf.length; i++) {
    if (spans.upper[i] === Infinity) continue
    const key = cells.first[i]! * size + cells.last[i]!
    let term = terms.get(key)
    if (term === undefined) {
      term = first.length
      terms.set(key, term)
      first.push(cells.first[i]!)
      last.push(cells.last[i]!)
    }
    termOf[i] = term
  }
  return { size, first: Int32Array.from(first), last: Int32Array.from(last), termOf }
}

/** Sums the rows' weights into the problem's counts; weights may be 0, as in a resample. */
export function loadOf(problem: Problem, cells: Cells, weights: ArrayLike<number>): Load {
  const survived = new Float64Array(problem.size + 1)
  const weight = new Float64Array(problem.first.length)
  for (let i = 0; i < weights.length; i++) {
    const w = weights[i]!
    const term = problem.termOf[i]!
    if (term >= 0) weight[term]! += w
    survived[cells.entered[i]!]! += w
    survived[cells.first[i]!]! -= w
  }
  for (let j = 1; j < survived.length; j++) survived[j]! += survived[j - 1]!
  return { survived: survived.subarray(0, problem.size), weight }
}
