import type { CurveRow } from '../survival/curve-rows'

/** What a drawing needs of a row of a curve. */
export type CurvePoint = Pick<CurveRow, 'time' | 'survival' | 'lower' | 'upper' | 'atRisk' | 'censored'>

const digits = 1e6

/**
 * The rows of a curve as a page carries them to be drawn: shares to six decimals, the limits rounded away from the claim, which is finer than
 * a pixel and a third of the length. Figures that are read are never taken from them but from the curve itself.
 */
export const curvePoints = (curve: readonly CurveRow[]): CurvePoint[] =>
  curve.map(({ time, survival, lower, upper, atRisk, censored }) => ({
    time,
    survival: Math.round(survival * digits) / digits,
    lower: lower === null ? null : Math.floor(lower * digits + 1e-6) / digits,
    upper: upper === null ? null : Math.ceil(upper * digits - 1e-6) / digits,
    atRisk,
    censored
  }))
