import type { AnswerRow } from '../survival/survival-answer'

/** What a drawing needs of a row of a curve. */
export type CurvePoint = Pick<AnswerRow, 'time' | 'survival' | 'lower' | 'upper' | 'atRisk'> & { censored: number }

const digits = 1e6

/**
 * The rows of a curve as a page carries them to be drawn: shares to six decimals, the limits rounded away from the claim, which is finer than
 * a pixel and a third of the length. Figures that are read are never taken from them but from the curve itself.
 */
export const curvePoints = (curve: readonly AnswerRow[]): CurvePoint[] =>
  curve.map(({ time, survival, lower, upper, atRisk, censored }) => ({
    time,
    survival: Math.round(survival * digits) / digits,
    lower: lower === null ? null : Math.floor(lower * digits + 1e-6) / digits,
    upper: upper === null ? null : Math.ceil(upper * digits - 1e-6) / digits,
    atRisk,
    censored: censored ?? 0
  }))
