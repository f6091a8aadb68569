import type { Bound, CurveLimits } from './confidence-limits'
import type { SurvivalCurve } from './kaplan-meier'

/** One row of a curve as it is shown and sent; what does not exist is null. `standardError` is that of S. */
export type CurveRow = {
  time: number
  atRisk: number
  events: number
  censored: number
  survival: number
  standardError: number | null
  lower: number | null
  upper: number | null
  bound: Bound | null
}

/** A curve and its limits as rows. */
export function curveRows(curve: SurvivalCurve, limits: CurveLimits): CurveRow[] {
  return Array.from(curve.time, (time, i) => {
    const survival = curve.survival[i]!
    return {
      time,
      atRisk: curve.atRisk[i]!,
      events: curve.events[i]!,
      censored: curve.censored[i]!,
      survival,
      standardError: survival > 0 ? survival * Math.sqrt(curve.greenwood[i]!) : null,
      lower: orNull(limits.lower[i]!),
      upper: orNull(limits.upper[i]!),
      bound: limits.exact[i] === 1 ? 'exact-one-sided' : null
    }
  })
}

const orNull = (value: number) => (Number.isNaN(value) ? null : value)
