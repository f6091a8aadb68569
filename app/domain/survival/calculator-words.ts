import { listOf, lowerPercent, pText, tooFew, upperPercent } from '../reliability/reliability-words'
import { zOf } from './confidence-limits'
import type { AnswerRow, SurvivalAnswer, WeibullAnswer } from './survival-answer'

/** Limits of a figure; null where none exists. */
export type Limited = { estimate: number | null; lower: number | null; upper: number | null }

export const allUnits = 'All units'
export const confidenceText = (confidence: number): string => `${Number((confidence * 100).toPrecision(8))}\u00a0%`

/** A time as printed: at most four figures that count. */
export const timeText = (time: number): string => String(Number(time.toPrecision(4)))

const share = (value: number): string => {
  const percent = Math.round(value * 100)
  return percent >= 100 ? 'over 99' : percent === 0 && value > 0 ? 'under 1' : String(percent)
}

/** What a curve says at a time: the row in force, and how many were at risk then. */
export function rowAt(curve: readonly AnswerRow[], time: number): { row: AnswerRow | null; atRisk: number } {
  let row: AnswerRow | null = null
  for (const one of curve) {
    if (one.time > time) break
    row = one
  }
  return { row, atRisk: curve.find((one) => one.time >= time)?.atRisk ?? 0 }
}

/**
 * The time at which curves are read: the last at which each still has a quarter of its units and no fewer than ten at risk (else five), to two figures;
 * null when some curve never has five. An interval-censored curve is read where it is known, at its own rows.
 */
export function readingTime(answer: SurvivalAnswer): number | null {
  const times = answer.groups.map(({ curve, n }) => {
    const enough = (least: number) => [...curve].reverse().find(({ time, atRisk }) => time > 0 && atRisk >= least)
    return (enough(Math.max(10, n / 4)) ?? enough(tooFew))?.time ?? null
  })
  if (times.includes(null)) return null
  const time = Math.min(...(times as number[]))
  if (answer.method === 'turnbull') return time
  const unit = 10 ** (Math.floor(Math.log10(time)) - 1)
  return Number((Math.floor(time / unit + 1e-9) * unit).toPrecision(2))
}

export type SaidOf = { answer: SurvivalAnswer; time: number | null; unit: string; confidence: number }

/** What the figures say in plain words, never more than the interval. */
export function calculatorSentence(said: SaidOf): string {
  const { answer, time, unit } = said
  const n = answer.groups.reduce((sum, g) => sum + g.n, 0)
  const events = answer.groups.reduce((sum, g) => sum + g.events, 0)
  const start = `Of ${n} ${n === 1 ? 'unit' : 'units'} followed${answer.groups.length > 1 ? `, in ${answer.groups.length} groups` : ''}, ${events === 0 ? 'none' : events} failed.`
  if (time === null) return `${start} Too few were followed at any time to say more.`
  if (answer.groups.length === 1)
    return `${start} ${capital(groupWords(answer.groups[0]!.curve, said, time))} (${timeText(time)} ${unit}).`
  const groups = answer.groups.slice(0, 3).map((g) => `${g.group ?? allUnits}: ${groupWords(g.curve, said, time)}`)
  const more = answer.groups.length > 3 ? '; the others are in the table' : ''
  return `${start} At ${timeText(time)} ${unit}, ${groups.join('; ')}${more}.${logRankWords(answer.logRank)}`
}

const capital = (text: string) => text[0]!.toUpperCase() + text.slice(1)

function groupWords(curve: readonly AnswerRow[], { answer, confidence }: SaidOf, time: number): string {
  const { row, atRisk } = rowAt(curve, time)
  const sure = confidenceText(confidence)
  if (atRisk < tooFew) return 'too few were followed to say'
  if (row === null || row.survival >= 1) {
    if (answer.method === 'turnbull') return 'no failure is known by then'
    // The estimate 1 has no spread; the exact bound of those followed does. Units that enter late may only join at the next row.
    const followed = Math.min(atRisk, row?.atRisk ?? atRisk)
    return `none had failed; with ${followed} at risk, at least ${lowerPercent((1 - confidence) ** (1 / followed))} of 100 still work (exact lower bound, ${sure} confidence)`
  }
  if (row.survival === 0) return 'none still worked'
  if (row.lower === null || row.upper === null) return `about ${share(row.survival)} of 100 still worked, without an interval`
  return `about ${share(row.survival)} of 100 still worked (${sure} interval ${lowerPercent(row.lower)} to ${upperPercent(row.upper)})`
}

function logRankWords(test: SurvivalAnswer['logRank']): string {
  if (test === null) return ''
  return test.p < 0.05
    ? ` The groups differ by more than chance makes likely (log-rank ${pText(test.p)}).`
    : ` The data cannot tell the groups apart (log-rank ${pText(test.p)}), which is not to say that they are alike.`
}

/** Limits of the Weibull shape, normal for its logarithm, as `weibullLimits` has them. */
export function shapeLimits(
  { shape, shapeStandardError }: WeibullAnswer,
  confidence: number
): { estimate: number; lower: number; upper: number } {
  const width = (zOf(confidence) * shapeStandardError) / shape
  return { estimate: shape, lower: shape * Math.exp(-width), upper: shape * Math.exp(width) }
}

/** What the shapes say in words, only where the interval excludes 1; the others are named as telling nothing. */
export function shapeSentence(shapes: readonly { name: string; lower: number; upper: number }[]): string | null {
  if (shapes.length === 0) return null
  const isOne = shapes.length === 1 && shapes[0]!.name === allUnits
  const some = (found: typeof shapes, words: string) =>
    found.length === 0 ? [] : [`${isOne ? 'F' : `${listOf(found.map((s) => s.name))}: f`}ailures come ${words}.`]
  const parts = [
    ...some(
      shapes.filter((s) => s.lower > 1),
      'more often the longer a unit has run, as by wear (the interval of the Weibull shape lies above 1)'
    ),
    ...some(
      shapes.filter((s) => s.upper < 1),
      'early and then less often (the interval of the Weibull shape lies below 1)'
    )
  ]
  return parts.length === 0
    ? 'The interval of the Weibull shape holds 1: the data do not tell early failures from wear.'
    : parts.join(' ')
}
