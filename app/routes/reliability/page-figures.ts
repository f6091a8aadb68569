import { faintUnder } from '~/components/chart-geometry'
import { hasEnough } from '~/domain/reliability/ageing-words'
import { drawnCurves, type CurvePoint } from '~/domain/reliability/curve-points'
import type {
  BatchFigures,
  GroupFigures,
  IncidenceCurve,
  ReliabilityFigures,
  ShapeFigures,
  SilentFigures
} from '~/domain/reliability/figures.types'
import { causeNames } from '~/domain/reliability/filter-words'
import { filtersQuery } from '~/domain/reliability/reliability-filters'
import { plainSentence } from '~/domain/reliability/plain-sentence'
import { excludedSentence, tooFew, tooFewSentence } from '~/domain/reliability/reliability-words'
import { thinPoints } from '~/domain/survival/thin-points'
import { pageOf } from './page-of'
import { shownComparison } from './shown-comparison'

export const stepsPageSize = 20
export const batchesPageSize = 20
const besideMost = 3
const oneYear = 365
/** One-sided, at 95 %. */
const alpha = 0.05

export type ShownSilent = Pick<SilentFigures, 'silent' | 'heardOf' | 'atOneYear'>
export type ShownTotal = Omit<GroupFigures, 'curve' | 'support' | 'hazard' | 'incidence' | 'silent'> & {
  silent: ShownSilent | null
}
export type ShownGroup = ShownTotal & { points: CurvePoint[] }
export type ShownFigures = ReturnType<typeof pageFigures>

/** All together are said in words and rows; their curve is not drawn, only listed a page at a time. */
function shownTotal({ curve: _, support: _s, hazard: _h, incidence: _i, silent, ...rest }: GroupFigures): ShownTotal {
  return { ...rest, silent: silent && { silent: silent.silent, heardOf: silent.heardOf, atOneYear: silent.atOneYear } }
}

/** Groups with their curves as drawn beside each other; `grain` as the charts take it. */
function shownGroups(groups: readonly GroupFigures[]): { groups: ShownGroup[]; grain: number | null } {
  const { curves, grain } = drawnCurves(groups)
  return { groups: groups.map((group, i) => ({ ...shownTotal(group), points: curves[i]! })), grain }
}

/** What the page prints of the figures, and which curves and steps its address asks to see. */
export function pageFigures(figures: ReliabilityFigures, query: URLSearchParams) {
  const { all, byRevision, byRelease, filters, grain } = figures
  const sentence = plainSentence({
    n: all.n,
    events: all.events,
    atOneYear: all.atOneYear,
    filters
  })
  const revisions = shownGroups(byRevision)
  const releases = shownGroups(byRelease)
  const chosen = chosenCurves(byRevision, query)
  const markedRelease = most(byRelease)
  return {
    sentence: [sentence, tooFewSentence(byRevision)].filter(Boolean).join(' '),
    reports: all.fitted,
    grain,
    all: shownTotal(all),
    byRevision: revisions.groups,
    byRelease: releases.groups,
    drawnGrain: { revision: revisions.grain, release: releases.grain },
    ...chosen,
    markedRelease,
    causes: shownCauses(all),
    comparisons: [shownComparison(figures.revisions, chosen.marked), shownComparison(figures.releases, markedRelease)].filter(
      (c) => c !== null
    ),
    shapes: shownShapes(figures),
    batches: shownBatches(figures, query),
    flagged: figures.batches.rows.filter(({ watch }) => watch?.isFlagged === true),
    excluded: excludedSentence(figures.excluded),
    excludedByKind: figures.excluded,
    query: filtersQuery(filters).toString(),
    steps: shownSteps(figures, query)
  }
}

type IncidenceRow = IncidenceCurve['curve'][number]
type ShownIncidence = {
  name: string
  failures: number
  atOneYear: IncidenceRow | null
  last: IncidenceRow | null
  points: (Pick<IncidenceRow, 'time' | 'estimate' | 'lower' | 'upper' | 'atRisk'> & { since?: number })[]
}

/** Without a failure of a cause by then: the exact one-sided bound of those followed, where they are known to the day. */
function noneAtOneYear({ estimator, atOneYear: { time, atRisk } }: GroupFigures): IncidenceRow {
  const upper = estimator === 'kaplan-meier' ? 1 - alpha ** (1 / atRisk) : null
  return { time, atRisk, estimate: 0, standardError: 0, lower: 0, upper, bound: 'exact-one-sided' }
}

/** Incidences up to the last day on which enough were at risk: past it one unit more or less would move them too far. */
function shownCauses(all: GroupFigures): {
  rows: ShownIncidence[]
  isDrawn: boolean
  until: number | null
  grain: number | null
} {
  const isFollowed = all.atOneYear.atRisk >= tooFew
  const end = all.curve.findLast(({ atRisk }) => atRisk >= tooFew) ?? null
  const told = all.incidence.map(({ curve }) => {
    const rows = curve.filter(({ atRisk }) => atRisk >= tooFew)
    const last = rows.at(-1)
    // level from its last failure on, as far as enough are followed
    return last && end && end.time > last.time ? [...rows, { ...last, time: end.time, atRisk: end.atRisk }] : rows
  })
  const solid = all.curve.findLast(({ atRisk }) => atRisk >= faintUnder) ?? null
  const { curves, grain } = thinPoints(
    told.map((rows) => withLevelAt(rows, solid)),
    [oneYear]
  )
  const rows = all.incidence.map(({ cause, failures }, i): ShownIncidence => ({
    name: causeNames[cause],
    failures,
    atOneYear: isFollowed ? (told[i]!.findLast(({ time }) => time <= oneYear) ?? noneAtOneYear(all)) : null,
    last: told[i]!.at(-1) ?? null,
    points: curves[i]!.map(({ time, since, estimate, lower, upper, atRisk }: IncidenceRow & { since?: number }) => ({
      time,
      ...(since === undefined ? {} : { since }),
      estimate,
      lower,
      upper,
      atRisk
    }))
  }))
  return { rows, isDrawn: rows.some(({ points }) => points.length > 0), until: end?.time ?? null, grain }
}

/** A cause has rows on the days of its failures only: with a row more on the last day on which a line is not yet faint. */
function withLevelAt(rows: IncidenceRow[], day: { time: number; atRisk: number } | null): IncidenceRow[] {
  const before = day === null ? -1 : rows.findLastIndex(({ time }) => time <= day.time)
  if (day === null || before < 0 || rows[before]!.time === day.time) return rows
  return [...rows.slice(0, before + 1), { ...rows[before]!, time: day.time, atRisk: day.atRisk }, ...rows.slice(before + 1)]
}

export type ShownShape = { group: string; shape: ShapeFigures }

/** The shapes that there are, all together first; none where too few have failed in each. */
function shownShapes({ all, byRevision }: ReliabilityFigures): ShownShape[] {
  const shapes = [{ ...all, group: 'all' }, ...(byRevision.length > 1 ? byRevision : [])].flatMap(({ group, shape }) =>
    shape === null ? [] : [{ group, shape }]
  )
  return shapes.some(({ shape }) => hasEnough(shape)) ? shapes : []
}

/** Batches are shown where one was asked for, or one stands out; null else. */
function shownBatches({ filters, batches }: ReliabilityFigures, query: URLSearchParams) {
  const { rows, total } = batches
  const isAsked = filters.release !== null || filters.batch !== null
  if (rows.length === 0 || !(isAsked || rows.some((b: BatchFigures) => b.watch?.isFlagged))) return null
  return { ...pageOf(rows, query.get('batches'), batchesPageSize), unlisted: total - rows.length }
}

/** The rows of one curve, and of its masses where it is Turnbull's, a page of each. */
function shownSteps({ all, byRevision, byRelease }: ReliabilityFigures, query: URLSearchParams) {
  const groups = [
    { key: 'all', label: 'all together', figures: all },
    ...byRevision.map((g) => ({ key: `revision:${g.group}`, label: g.group, figures: g })),
    ...byRelease.map((g) => ({ key: `release:${g.group}`, label: `release ${g.group}`, figures: g }))
  ]
  const chosen = groups.find((g) => g.key === query.get('steps')) ?? groups[0]!
  const { curve, support, estimator } = chosen.figures
  return {
    key: chosen.key,
    label: chosen.label,
    estimator,
    choices: groups.map(({ key, label }) => ({ value: key, label })),
    ...pageOf(curve, query.get('page'), stepsPageSize),
    support: support && pageOf(support, query.get('masses'), stepsPageSize)
  }
}

const most = (groups: readonly GroupFigures[]): string | null =>
  groups.reduce<GroupFigures | null>((best, g) => (best === null || g.n > best.n ? g : best), null)?.group ?? null

/** The marked revision and those beside it, as asked; else the one with the most units, and the next three. */
function chosenCurves(byRevision: readonly GroupFigures[], query: URLSearchParams) {
  const names = byRevision.map((g) => g.group)
  const asked = query.get('mark')
  const marked = asked !== null && names.includes(asked) ? asked : most(byRevision)
  const wanted = query.has('mark') ? query.getAll('beside') : [...byRevision].sort((a, b) => b.n - a.n).map((g) => g.group)
  const beside = wanted.filter((name) => name !== marked && names.includes(name)).slice(0, besideMost)
  return { marked, beside: names.filter((name) => beside.includes(name)) }
}
