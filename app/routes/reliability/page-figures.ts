import { visibleRuns } from '~/components/chart-geometry'
import { curvePoints, type CurvePoint } from '~/domain/reliability/curve-points'
import type { GroupFigures, ReliabilityFigures } from '~/domain/reliability/figures.types'
import { filtersQuery } from '~/domain/reliability/reliability-filters'
import { excludedSentence, plainSentence, tooFewSentence } from '~/domain/reliability/reliability-words'

export const stepsPageSize = 20
const besideMost = 3

export type ShownTotal = Omit<GroupFigures, Series>
type Series = 'curve' | 'hazard' | 'incidence' | 'support' | 'silent'
export type ShownGroup = ShownTotal & { points: CurvePoint[] }
export type ShownFigures = ReturnType<typeof pageFigures>

const shownGroup = (group: GroupFigures): ShownGroup => ({ ...shownTotal(group), points: curvePoints(group.curve) })

/** All together are said in words and rows; their curve is not drawn, only listed a page at a time. */
const shownTotal = ({ curve: _, hazard: __, incidence: ___, support: ____, silent: _____, ...rest }: GroupFigures): ShownTotal =>
  rest

/** What the page prints of the figures, and which curves and steps its address asks to see. */
export function pageFigures(figures: ReliabilityFigures, query: URLSearchParams) {
  const { all, byRevision, byRelease, filters } = figures
  const sentence = plainSentence({
    n: all.n,
    events: all.events,
    atOneYear: all.atOneYear,
    worksAtFirstPowerOnly: filters.firstPower === 'set-aside'
  })
  const groups = [
    { key: 'all', label: 'all together', figures: all },
    ...byRevision.map((g) => ({ key: `revision:${g.group}`, label: g.group, figures: g })),
    ...byRelease.map((g) => ({ key: `release:${g.group}`, label: `release ${g.group}`, figures: g }))
  ]
  const steps = groups.find((g) => g.key === query.get('steps')) ?? groups[0]!
  const pages = Math.max(1, Math.ceil(steps.figures.curve.length / stepsPageSize))
  const page = Math.min(pages, Math.max(1, Math.trunc(Number(query.get('page'))) || 1))
  return {
    sentence: [sentence, tooFewSentence(byRevision)].filter(Boolean).join(' '),
    reports: all.fitted,
    all: shownTotal(all),
    byRevision: byRevision.map(shownGroup),
    byRelease: byRelease.map(shownGroup),
    ...chosenCurves(byRevision, query),
    markedRelease: most(byRelease),
    revisionsDiffer: figures.revisions?.logRank ?? null,
    excluded: excludedSentence(figures.excluded),
    excludedByKind: figures.excluded,
    followUp: all.followUp?.ratio ?? null,
    query: filtersQuery(filters).toString(),
    steps: {
      key: steps.key,
      label: steps.label,
      choices: groups.map(({ key, label }) => ({ value: key, label })),
      page,
      total: steps.figures.curve.length,
      rows: steps.figures.curve.slice((page - 1) * stepsPageSize, page * stepsPageSize)
    }
  }
}

/**
 * The numbers of what a page shows, counted without a gap: of its sections, and of its figures, null where too few are followed for anything
 * to be drawn.
 */
export function numbering({ byRevision, byRelease }: Pick<ShownFigures, 'byRevision' | 'byRelease'>) {
  const isDrawn = (groups: readonly ShownGroup[]) => groups.some((g) => visibleRuns(g.points).length > 0)
  const hasStrips = byRevision.length > 1 && isDrawn(byRevision)
  const [curves, strips] = [isDrawn(byRevision) ? 1 : null, hasStrips ? 2 : null]
  const strip = hasStrips ? 1 : 0
  return {
    figures: { curves, strips, releases: isDrawn(byRelease) ? (curves ?? 0) + strip + 1 : null },
    sections: {
      curves: 1,
      strips: hasStrips ? 2 : null,
      revisions: 2 + strip,
      releases: 3 + strip,
      causes: 4 + strip,
      apart: 5 + strip,
      steps: 6 + strip
    }
  }
}
export type Numbering = ReturnType<typeof numbering>

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
