import { visibleRuns } from '~/components/chart-geometry'
import { tooFew } from '~/domain/reliability/reliability-words'
import type { ShownFigures, ShownGroup } from './page-figures'

const sectionKeys = [
  'revisions',
  'curves',
  'strips',
  'releases',
  'causes',
  'comparison',
  'ageing',
  'followUp',
  'batches',
  'apart',
  'steps'
] as const
const figureKeys = ['curves', 'strips', 'releases', 'causes', 'silent'] as const
const tableKeys = [
  'revisions',
  'releases',
  'causes',
  'comparedRevisions',
  'comparedReleases',
  'ageing',
  'silent',
  'batches',
  'steps',
  'support'
] as const

export type SectionKey = (typeof sectionKeys)[number]
type Numbers<Key extends string> = Record<Key, number | null>

/** Numbers what is there, from 1 on without a gap; null for what is not. */
const numbered = <Key extends string>(keys: readonly Key[], has: Record<Key, boolean>): Numbers<Key> => {
  let number = 0
  return Object.fromEntries(keys.map((key) => [key, has[key] ? ++number : null])) as Numbers<Key>
}

const isDrawn = (groups: readonly ShownGroup[]) => groups.some((g) => visibleRuns(g.points).length > 0)

/**
 * The numbers of what a page shows, counted without a gap: its sections, figures and tables, each null where there is nothing to say, or too
 * few are followed for anything to be drawn.
 */
export function numbering(shown: ShownFigures) {
  const { all, byRevision, byRelease, comparisons, batches, causes, steps } = shown
  const hasStrips = byRevision.length > 1 && isDrawn(byRevision)
  const hasReleases = byRelease.length > 1
  const compared = (by: 'revision' | 'release') => comparisons.some((c) => c.by === by)
  const sections = numbered(sectionKeys, {
    revisions: true,
    curves: true,
    strips: hasStrips,
    releases: hasReleases,
    causes: true,
    comparison: comparisons.length > 0,
    ageing: all.events > 0,
    followUp: all.n > 0,
    batches: batches !== null,
    apart: true,
    steps: all.n > 0
  })
  return {
    sections,
    figures: numbered(figureKeys, {
      curves: isDrawn(byRevision),
      strips: hasStrips,
      releases: hasReleases && isDrawn(byRelease),
      causes: causes.isDrawn,
      silent: sections.followUp !== null && hasRange(all)
    }),
    tables: numbered(tableKeys, {
      revisions: true,
      releases: hasReleases,
      causes: causes.rows.length > 0,
      comparedRevisions: compared('revision'),
      comparedReleases: compared('release'),
      ageing: shown.shapes.length > 0,
      silent: sections.followUp !== null && all.silent !== null,
      batches: batches !== null,
      steps: sections.steps !== null,
      support: steps.support !== null
    })
  }
}
export type Numbering = ReturnType<typeof numbering>

/** Whether all three marks of what the silent could hide are known from enough units, so that they can be drawn. */
export function hasRange({ silent, atOneYear }: Pick<ShownGroup, 'silent' | 'atOneYear'>): boolean {
  return silent !== null && atOneYear.atRisk >= tooFew && Object.values(silent.atOneYear).every((share) => share !== null)
}
