/** More than this many are thinned. */
const enough = 1_500

/**
 * A step curve with fewer points for drawing: time is cut into a few hundred equal stretches whose width is a power of ten, and of each its first and
 * last point are kept, so that the values at round times stay exact; units censored at a point left out are counted at the last one of its stretch.
 */
export function thinPoints<P extends { time: number; censored: number }>(points: P[]): P[] {
  const last = points.at(-1)
  if (last === undefined || points.length <= enough || !(last.time > 0)) return points
  const width = 10 ** Math.floor(Math.log10(last.time / 150))
  const stretchOf = ({ time }: P) => Math.floor(time / width + 1e-9)
  const kept: P[] = []
  let left = 0
  for (let i = 0; i < points.length; i++) {
    const point = points[i]!
    const isFirst = i === 0 || stretchOf(points[i - 1]!) !== stretchOf(point)
    const isLast = i === points.length - 1 || stretchOf(points[i + 1]!) !== stretchOf(point)
    if (!isFirst && !isLast) left += point.censored
    else {
      kept.push(isLast ? { ...point, censored: point.censored + left } : point)
      if (isLast) left = 0
    }
  }
  return kept
}
