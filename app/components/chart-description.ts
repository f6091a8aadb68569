import { faintUnder, goneUnder, visibleRuns, type SurvivalPoint } from './chart-geometry'
import { readAt, readingWords } from './chart-reading'

export type DescribedCurve = { name: string; points: readonly SurvivalPoint[]; isMarked: boolean }

export type DescriptionOptions = {
  sure: string
  /** A time in words: "day 412 (1 year and 47 days)". */
  wordsOf: (day: number) => string
  /** See `thinPoints`. */
  grain: number | null
  /** "units are counted in days" or in whatever unit. */
  unit: string
}

/**
 * A survival figure in sentences, for who cannot see it: how far each line goes and where it ends, which carries limits, what is not drawn and why,
 * and where the share is not determined.
 */
export function describeCurves(curves: readonly DescribedCurve[], options: DescriptionOptions): string {
  const { sure, wordsOf, grain, unit } = options
  const ends = curves.map((curve) => ({ ...curve, end: visibleRuns(curve.points).at(-1)?.steps.at(-1) ?? null }))
  const drawn = ends.filter((curve) => curve.end !== null)
  const sentences = drawn.map(({ name, points, isMarked, end }) => {
    const { share, interval } = readingWords(readAt(points, end!.time))
    const limits = isMarked && interval !== '' ? ` (${/^\d/.test(interval) ? `${sure} interval ${interval}` : interval})` : ''
    return `${name}${isMarked && drawn.length > 1 ? ', marked,' : ''} goes to ${wordsOf(end!.time)} and ends at ${share}${limits}.`
  })
  const missing = ends.filter((curve) => curve.end === null).map((curve) => curve.name)
  if (missing.length > 0)
    sentences.push(`Not drawn: ${missing.join(', ')}, of which never ${goneUnder} units were followed at once.`)
  if (drawn.length > 0) {
    sentences.push(
      drawn.length === 1 ? `The line carries its ${sure} limits.` : `Only the marked line carries its ${sure} limits.`,
      `Lines are faint under ${faintUnder} units followed and not drawn under ${goneUnder}.`
    )
  }
  const open = drawn.flatMap(({ name, points }) => openWords(name, points, wordsOf))
  if (open.length > 0)
    sentences.push(`Where failures are known only between two days the share is not determined: ${open.join('; ')}.`)
  if (grain !== null)
    sentences.push(`Steps within ${grain} ${unit} are drawn as one, at the first of them; the figures are those of every step.`)
  return sentences.join(' ')
}

/** How many stretches of a line are open, and the longest. */
function openWords(name: string, points: readonly SurvivalPoint[], wordsOf: (day: number) => string): string[] {
  const open = points.filter((p) => p.from !== undefined && p.atRisk >= goneUnder)
  if (open.length === 0) return []
  const longest = open.reduce((best, p) => (p.time - p.from! > best.time - best.from! ? p : best))
  const between = `from ${wordsOf(longest.from!)} to ${wordsOf(longest.time)}`
  return [`${name} in ${open.length === 1 ? `one stretch, ${between}` : `${open.length} stretches, the longest ${between}`}`]
}
