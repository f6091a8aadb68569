import { nearTimes } from './columns'
import { isInterval, type Observation } from './observation'

/**
 * Observations of every kind as intervals, in columns: the failure lies in (lower, upper], exactly at `lower` when both are equal, after `lower` when
 * `upper` is Infinity; the unit was watched from `entry` on, so that everything is given survival past it. `weight` units share a row.
 */
export type Spans = { entry: Float64Array; lower: Float64Array; upper: Float64Array; weight: Float64Array }

/**
 * Turns checked observations into spans. Near-equal times become one; an interval that began before the entry begins at it, because
 * the unit is known to have been working then.
 */
export function spansOf(observations: readonly Observation[]): Spans {
  const n = observations.length
  const spans = {
    entry: new Float64Array(n),
    lower: new Float64Array(n),
    upper: new Float64Array(n),
    weight: new Float64Array(n).fill(1)
  }
  observations.forEach((row, i) => {
    spans.entry[i] = row.entry ?? 0
    spans.weight[i] = row.weight ?? 1
    if (isInterval(row)) {
      spans.lower[i] = row.lower
      spans.upper[i] = row.upper ?? Infinity
    } else {
      spans.lower[i] = row.time
      spans.upper[i] = row.event === 0 ? Infinity : row.time
    }
  })
  const snap = nearTimes([spans.entry, spans.lower, spans.upper])
  if (snap !== null) for (const column of [spans.entry, spans.lower, spans.upper]) column.set(column.map(snap))
  for (let i = 0; i < n; i++)
    if (spans.lower[i]! < spans.entry[i]! && spans.upper[i]! > spans.entry[i]!) spans.lower[i] = spans.entry[i]!
  return spans
}
