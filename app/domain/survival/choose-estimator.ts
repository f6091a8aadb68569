import { isInterval, type Observation, type TimedObservation } from './observation'

/** A failure known to within this many days may be taken to have happened at the upper end. */
export const narrowDays = 14

/**
 * Which estimator a selection is shown with, and what it is fed. `widest` is the widest interval a failure is known to lie in (0 when all are exact):
 * the reason to be told.
 */
export type EstimatorChoice =
  | { method: 'kaplan-meier'; widest: number; observations: TimedObservation[] }
  | { method: 'turnbull'; widest: number; observations: readonly Observation[] }

/**
 * Kaplan-Meier when every failure in the selection is known to within 14 days, each then counted at the upper end of its interval; otherwise Turnbull, for all.
 *
 * @param observations times in days; intervals may name their failure's cause
 */
export function chooseEstimator(observations: readonly Observation[], narrow = narrowDays): EstimatorChoice {
  let widest = 0
  for (const row of observations) if (isInterval(row) && row.upper !== null) widest = Math.max(widest, row.upper - row.lower)
  if (widest > narrow) return { method: 'turnbull', widest, observations }
  return {
    method: 'kaplan-meier',
    widest,
    observations: observations.map((row): TimedObservation => {
      if (!isInterval(row)) return row
      const { lower, upper, event, ...rest } = row
      return upper === null ? { ...rest, time: lower, event: 0 } : { ...rest, time: upper, event: event ?? 1 }
    })
  }
}
