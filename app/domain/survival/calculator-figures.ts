import { csvFile } from '~/lib/csv'
import { DomainError } from '~/lib/domain-error'
import { curvePoints, type CurvePoint } from '../reliability/curve-points'
import { tooFew } from '../reliability/reliability-words'
import { allUnits, calculatorSentence, readingTime, shapeLimits, shapeSentence, type Limited } from './calculator-words'
import { incidenceLimits } from './aalen-johansen'
import { computeSurvival } from './compute-survival'
import { parseSurvivalRequest } from './compute-survival.schema'
import { zOf, type IntervalKind } from './confidence-limits'
import { columnMeanings } from './csv-columns'
import { atLines, readSurvivalCsv, type SurvivalCsv } from './read-survival-csv'
import type { AnswerRow, GroupAnswer, SurvivalAnswer } from './survival-answer'
import { thinPoints } from './thin-points'

export type CalculatorOptions = { confidence: number; interval: IntervalKind; tau: number | null; timeUnit: string }

export type CalculatorGroup = {
  name: string
  n: number
  events: number
  median: Limited
  mean: (Limited & { tau: number }) | null
  shape: { estimate: number; lower: number; upper: number } | null
  /** Null for a group that is not drawn. */
  points: CurvePoint[] | null
  steps: AnswerRow[]
  stepCount: number
  /** Incidence by cause up to `until`; null where too few were ever at risk. */
  causes: {
    name: string
    points: CausePoint[]
    until: number | null
    last: number | null
    standardError: number | null
  }[]
  /** As `grain` of all, for the incidences of this group. */
  causeGrain: number | null
  support: { lower: number; upper: number | null; mass: number }[]
  supportCount: number
}

export type CausePoint = {
  time: number
  estimate: number
  lower: number | null
  upper: number | null
  atRisk: number
  since?: number
}

/** What the calculator's page prints; bounded, whatever was sent. */
export type CalculatorFigures = {
  method: SurvivalAnswer['method']
  options: CalculatorOptions
  rows: number
  /** How the table was read, in words. */
  reading: string
  sentence: string
  shapeSentence: string | null
  readAt: number | null
  /** The curves' points are thinned: exact at its multiples; see `thinPoints`. */
  grain: number | null
  groups: CalculatorGroup[]
  logRank: SurvivalAnswer['logRank']
  /** The whole answer, as the endpoint gives it, and its curves as CSV; null where they are too large for a page. */
  json: string | null
  csv: string | null
}

const maxDrawn = 4
const maxSteps = 600
const maxSupport = 200
const maxTextRows = 1_000
const maxTextCharacters = 64_000

/**
 * The figures of a table of lives (UTF-8, or UTF-16 with its mark): read by `readSurvivalCsv`, computed by `computeSurvival` as the endpoint and the
 * command line do, and cut down to what a page shows.
 *
 * @throws DomainError `invalid`, `impossible`, `too-large`, with messages at their lines (`data.7`)
 */
export function calculatorFigures(body: ArrayBuffer, options: CalculatorOptions): CalculatorFigures {
  const table = readSurvivalCsv(textOf(body))
  const answer = answerOf(table, options)
  const readAt = options.tau !== null && answer.method === 'kaplan-meier' ? options.tau : readingTime(answer)
  const drawn = drawnIndices(answer)
  const exactAt = readAt === null ? [] : [readAt]
  const thin = thinPoints(
    drawn.map((g) => curvePoints(answer.groups[g]!.curve, answer.groups[g]!.support)),
    exactAt
  )
  let left = maxSteps
  const groups = answer.groups.map((group, g): CalculatorGroup => {
    const steps = group.curve.slice(0, Math.max(0, left))
    left -= steps.length
    return groupFigures(group, { points: thin.curves[drawn.indexOf(g)] ?? null, steps, options, exactAt })
  })
  return {
    method: answer.method,
    options,
    rows: table.rows.length,
    reading: readingWords(table),
    sentence: calculatorSentence({ answer, time: readAt, unit: options.timeUnit, confidence: options.confidence }),
    shapeSentence: shapeSentence(groups.flatMap(({ name, shape }) => (shape === null ? [] : [{ name, ...shape }]))),
    readAt,
    grain: thin.grain,
    groups,
    logRank: answer.logRank,
    ...asText(answer)
  }
}

function answerOf({ rows, lines }: SurvivalCsv, options: CalculatorOptions): SurvivalAnswer {
  try {
    return computeSurvival(parseSurvivalRequest({ observations: rows, ...options }))
  } catch (error) {
    if (error instanceof DomainError) throw atLines(error, lines)
    throw error
  }
}

function textOf(body: ArrayBuffer): string {
  const [first, second] = new Uint8Array(body, 0, Math.min(2, body.byteLength))
  const encoding = first === 0xff && second === 0xfe ? 'utf-16le' : first === 0xfe && second === 0xff ? 'utf-16be' : 'utf-8'
  try {
    return new TextDecoder(encoding, { fatal: true }).decode(body)
  } catch (error) {
    if (!(error instanceof TypeError)) throw error
    const message =
      'This is not a text in UTF-8. Save the table as CSV in UTF-8 and choose it again; a spreadsheet’s own file cannot be read.'
    throw new DomainError('invalid', message, [{ path: 'data', message }])
  }
}

/** The groups with the most units, at most four; of equal ones the first. */
function drawnIndices({ groups }: SurvivalAnswer): number[] {
  return [...groups.keys()].sort((a, b) => groups[b]!.n - groups[a]!.n || a - b).slice(0, maxDrawn)
}

type Shown = { points: CurvePoint[] | null; steps: AnswerRow[]; options: CalculatorOptions; exactAt: number[] }

function groupFigures(group: GroupAnswer, shown: Shown): CalculatorGroup {
  const { points, steps } = shown
  const { confidence } = shown.options
  const { n, events, median, rmst, weibull } = group
  return {
    name: group.group ?? allUnits,
    n,
    events,
    median,
    mean: rmst && { tau: rmst.tau, ...meanLimits(rmst, confidence) },
    shape: weibull && shapeLimits(weibull, confidence),
    points,
    steps,
    stepCount: group.curve.length,
    ...causesOf(group, points !== null, shown),
    support: (group.support ?? []).slice(0, maxSupport),
    supportCount: group.support?.length ?? 0
  }
}

/** Incidences up to the last time at which enough were at risk: past it one unit more or less would move them too far. */
function causesOf(
  { curve, incidence = [] }: GroupAnswer,
  isDrawn: boolean,
  { options, exactAt }: Shown
): Pick<CalculatorGroup, 'causes' | 'causeGrain'> {
  const until = curve.findLast(({ atRisk }) => atRisk >= tooFew)?.time ?? -1
  const atRisk = new Map(curve.map((row) => [row.time, row.atRisk]))
  const told = incidence.map((one) => one.curve.filter(({ time }) => time <= until))
  const pointsOf = (rows: (typeof told)[number]) =>
    rows.map(({ time, estimate, standardError }): CausePoint => {
      const at = { estimate, standardError, atRisk: atRisk.get(time)! }
      const { lower, upper } = incidenceLimits(at, options)
      return { time, estimate, lower, upper, atRisk: at.atRisk }
    })
  const thin = thinPoints(isDrawn ? told.map(pointsOf) : [], exactAt)
  const causes = incidence.map(({ cause }, i) => {
    const last = told[i]!.at(-1)
    return {
      name: cause,
      points: thin.curves[i] ?? [],
      until: last?.time ?? null,
      last: last?.estimate ?? null,
      standardError: last?.standardError ?? null
    }
  })
  return { causes, causeGrain: thin.grain }
}

/** Normal limits, within what a mean up to tau can be. */
function meanLimits({ tau, estimate, standardError }: NonNullable<GroupAnswer['rmst']>, confidence: number): Limited {
  if (estimate === null || standardError === null) return { estimate, lower: null, upper: null }
  const width = zOf(confidence) * standardError
  return { estimate, lower: Math.max(0, estimate - width), upper: Math.min(tau, estimate + width) }
}

function readingWords({ rows, columns, hasHeadings, headings }: SurvivalCsv): string {
  const lines = `${rows.length} ${rows.length === 1 ? 'row' : 'rows'}`
  if (!hasHeadings) return `${lines} without headings, read as time and event`
  const parts = columnMeanings.flatMap((meaning) =>
    columns.at[meaning] === undefined ? [] : [`${meaning} from “${headings[columns.at[meaning]]!}”`]
  )
  const out = columns.leftOut.length === 0 ? '' : `; left out: ${columns.leftOut.map((name) => `“${name}”`).join(', ')}`
  return `${lines}; ${parts.join(', ')}${out}`
}

const csvHead = ['group', 'time', 'atRisk', 'events', 'censored', 'survival', 'standardError', 'lower', 'upper', 'bound']

function asText(answer: SurvivalAnswer): { json: string | null; csv: string | null } {
  const rows = answer.groups.reduce(
    (sum, g) => sum + g.curve.length * (1 + (g.incidence?.length ?? 0)) + (g.support?.length ?? 0),
    0
  )
  if (rows > maxTextRows) return { json: null, csv: null }
  const within = (text: string) => (text.length > maxTextCharacters ? null : text)
  const csv = csvFile(
    csvHead,
    answer.groups.flatMap(({ group, curve }) =>
      curve.map((r) => [group, r.time, r.atRisk, r.events, r.censored, r.survival, r.standardError, r.lower, r.upper, r.bound])
    )
  )
  return { json: within(JSON.stringify(answer)), csv: within(csv) }
}
