/**
 * Holm's step-down adjustment of several p-values, in the order given: the i-th smallest is multiplied by (m - i + 1), made non-decreasing
 * and capped at 1. Holds the chance of any false alarm among the comparisons.
 *
 * Source: S. Holm, Scandinavian Journal of Statistics 6:65-70 (1979).
 *
 * @throws RangeError when a value is no probability
 */
export function holm(p: readonly number[]): number[] {
  if (p.some((value) => !(value >= 0 && value <= 1))) throw new RangeError('holm: every p must lie in [0, 1]')
  const order = [...p.keys()].sort((i, j) => p[i]! - p[j]!)
  const adjusted = new Array<number>(p.length)
  let floor = 0
  order.forEach((index, rank) => {
    floor = Math.max(floor, Math.min(1, p[index]! * (p.length - rank)))
    adjusted[index] = floor
  })
  return adjusted
}
