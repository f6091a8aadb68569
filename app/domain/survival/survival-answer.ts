import type { Bound } from './confidence-limits'
import type { Quantile } from './quantile'
import type { Estimate } from './weibull'

/** A row of an answered curve. `events` and `censored` are null for interval-censored data, where no unit's failure has a known time. */
export type AnswerRow = {
  time: number
  atRisk: number
  events: number | null
  censored: number | null
  survival: number
  standardError: number | null
  lower: number | null
  upper: number | null
  bound: Bound | null
}

export type WeibullAnswer = {
  shape: number
  scale: number
  shapeStandardError: number
  scaleStandardError: number
  logLikelihood: number
  b10: Estimate
  median: Estimate
}

export type GroupAnswer = {
  group: string | null
  n: number
  events: number
  curve: AnswerRow[]
  median: Quantile
  rmst: { tau: number; estimate: number | null; standardError: number | null } | null
  hazard: { time: number; cumulative: number }[]
  weibull: WeibullAnswer | null
  support?: { lower: number; upper: number | null; mass: number }[]
  incidence?: { cause: string; curve: { time: number; estimate: number; standardError: number }[] }[]
}

export type SurvivalAnswer = {
  method: 'kaplan-meier' | 'turnbull'
  groups: GroupAnswer[]
  logRank: { chiSquare: number; degreesOfFreedom: number; p: number } | null
}
