/** How long one unit was watched: from `entry` (0 = its origin) to `time`, and how long it could have been: to the as-of date, `toClose`, on the same clock. */
export type Watched = { entry?: number; time: number; toClose: number; isFailed: boolean; weight?: number }

export type Completeness = {
  observed: number
  potential: number
  /** observed / potential; null when there was no time to watch. */
  ratio: number | null
  units: number
  /** Units with a failure or watched right up to the as-of date. */
  completeUnits: number
}

/**
 * Completeness of follow-up: observed unit-time over the unit-time there would be had every unit without a failure been watched up to the
 * as-of date. A unit with a failure counts its own time in both.
 *
 * Source: T. G. Clark, D. G. Altman and B. L. De Stavola, Lancet 359:1309-1310 (2002).
 *
 * @throws RangeError when a unit was watched past the as-of date or left before it entered
 */
export function completeness(units: readonly Watched[]): Completeness {
  const sum = { observed: 0, potential: 0, units: 0, completeUnits: 0 }
  for (const [i, { entry = 0, time, toClose, isFailed, weight = 1 }] of units.entries()) {
    if (!(entry <= time && time <= toClose))
      throw new RangeError(`completeness: unit ${i} runs from ${entry} to ${time}, the as-of date lies at ${toClose}`)
    sum.observed += weight * (time - entry)
    sum.potential += weight * ((isFailed ? time : toClose) - entry)
    sum.units += weight
    if (isFailed || time === toClose) sum.completeUnits += weight
  }
  return { ...sum, ratio: sum.potential > 0 ? sum.observed / sum.potential : null }
}
