import type { SurvivalCurve } from './kaplan-meier'

/** Cumulative hazard just after each of the curve's times, and its variance sum d/n^2. */
export type CumulativeHazard = { time: Float64Array; cumulative: Float64Array; variance: Float64Array }

/**
 * The Nelson-Aalen estimator H(t) = sum over failure times t_j <= t of d_j/n_j, on the rows of a Kaplan-Meier curve (same risk sets).
 *
 * Source: W. Nelson, Technometrics 14:945-966 (1972); O. Aalen, Annals of Statistics 6:701-726 (1978).
 */
export function nelsonAalen(curve: Pick<SurvivalCurve, 'time' | 'atRisk' | 'events'>): CumulativeHazard {
  const cumulative = new Float64Array(curve.time.length)
  const variance = new Float64Array(curve.time.length)
  let sum = 0
  let squares = 0
  for (let i = 0; i < curve.time.length; i++) {
    const d = curve.events[i]!
    const n = curve.atRisk[i]!
    if (d > 0) {
      sum += d / n
      squares += d / (n * n)
    }
    cumulative[i] = sum
    variance[i] = squares
  }
  return { time: curve.time, cumulative, variance }
}
