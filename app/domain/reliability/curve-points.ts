import { thinPoints } from '../survival/thin-points'
import type { AnswerRow } from '../survival/survival-answer'

/** What a drawing needs of a row of a curve. `from` and `since` as in `ThinRow`. */
export type CurvePoint = Pick<AnswerRow, 'time' | 'survival' | 'lower' | 'upper' | 'atRisk'> & {
  censored: number
  from?: number
  since?: number
}

export type Support = { lower: number; upper: number | null; mass: number }

const digits = 1e6

/**
 * The rows of a curve as a page carries them to be drawn: shares to six decimals, the limits rounded away from the claim, which is finer than
 * a pixel and a third of the length. With Turnbull's `support` a row also says where its cell begins: S is not determined inside. Figures that are
 * read are never taken from them but from the curve itself.
 */
export function curvePoints(curve: readonly AnswerRow[], support: readonly Support[] | null = null): CurvePoint[] {
  const cells = new Map<number, number>()
  for (const { lower, upper, mass } of support ?? [])
    if (mass > 0 && upper !== null && lower < upper) cells.set(upper, Math.max(0, lower))
  return curve.map(({ time, survival, lower, upper, atRisk, censored }) => {
    const from = cells.get(time)
    return {
      time,
      ...(from === undefined ? {} : { from }),
      survival: Math.round(survival * digits) / digits,
      lower: lower === null ? null : Math.floor(lower * digits + 1e-6) / digits,
      upper: upper === null ? null : Math.ceil(upper * digits - 1e-6) / digits,
      atRisk,
      censored: censored ?? 0
    }
  })
}

const oneYear = 365
const year = 365.25

/**
 * The curves of one page's drawings, thinned together so that the page's size is bounded: exact on every day that is a multiple of `grain`, at one year and
 * at each year's tick. Hand `grain` on to the charts.
 */
export function drawnCurves(groups: readonly { curve: readonly AnswerRow[]; support?: readonly Support[] | null }[]): {
  curves: CurvePoint[][]
  grain: number | null
} {
  const curves = groups.map(({ curve, support }) => curvePoints(curve, support ?? null))
  const last = Math.max(0, ...curves.map((curve) => curve.at(-1)?.time ?? 0))
  const years = Array.from({ length: Math.min(200, Math.floor(last / year)) }, (_, i) => (i + 1) * year)
  return thinPoints(curves, [oneYear, ...years])
}
