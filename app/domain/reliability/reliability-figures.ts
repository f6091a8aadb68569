import { exclusionKinds } from '../reports/report-words'
import { batchFigures, type BatchCounts } from './batch-figures'
import { comparison } from './comparison'
import type { GroupFigures, ReliabilityFigures } from './figures.types'
import { addCounts, noCounts, type GroupCounts, type GroupTotals } from './group-counts'
import { groupFigures, oneYear, wideOf, type Counting } from './group-figures'
import { batchName, countedCauses, type ReliabilityFilters } from './reliability-filters'
import { addSilent, noSilent, silentFigures, type SilentCounts } from './silent-figures'

/** The name of a release or revision by its id, in the order in which groups are shown. */
export type GroupNames = readonly { id: string; name: string }[]

/** The counts of one release's units on one console revision; `silent` where the filters ask for bounds. */
export type Cell = { releaseId: string; revisionId: string; counts: GroupCounts; silent: SilentCounts | null }

/** Past so many units in the curve, Turnbull's estimate is made from joint observations on the coarse grid. */
const maxFineUnits = 3000

/** Days between the lines on which the joint observations of a selection are counted; null when none are needed. */
export function grainNeeded(totals: GroupTotals, filters: ReliabilityFilters): 1 | 14 | null {
  if (wideOf(totals, countedCauses(filters.cause)) === 0) return null
  return totals.inCurve > maxFineUnits ? 14 : 1
}

export type FiguresInput = {
  filters: ReliabilityFilters
  /** Those that the filters leave, with joint observations at the `grain` needed. */
  cells: readonly Cell[]
  grain: 1 | 14
  revisions: GroupNames
  releases: GroupNames
  /** The batches of the releases counted, the newest first. */
  batches: readonly BatchCounts[]
}

/**
 * The figures of a board: all counted units together, by console revision and by release, each group the sum of its cells. Groups of which nothing is
 * reported are left out. Pure.
 */
export function reliabilityFigures({ filters, cells, grain, ...names }: FiguresInput): ReliabilityFigures {
  const counting: Counting = {
    counted: countedCauses(filters.cause),
    isOneCause: filters.cause !== 'all',
    asOf: filters.asOf
  }
  const all = sumOf('all', cells)
  const revisions = groupsOf(names.revisions, cells, (cell) => cell.revisionId)
  const releases = groupsOf(names.releases, cells, (cell) => cell.releaseId)
  const figures = ({ name, counts, silent }: Sum): GroupFigures =>
    groupFigures(name, counts, counting, silent && silentFigures(counts.days, counts.totals, silent, counting.counted, oneYear))
  const compare = (by: 'revision' | 'release', sums: readonly Sum[]) =>
    comparison(
      by,
      sums.map(({ name, counts }) => ({ name, n: counts.totals.inCurve, days: counts.days })),
      counting.counted
    )
  return {
    filters,
    grain,
    all: figures(all),
    byRevision: revisions.map(figures),
    byRelease: releases.map(figures),
    revisions: compare('revision', revisions),
    releases: compare('release', releases),
    excluded: exclusionKinds.flatMap((kind) => {
      const count = all.counts.totals[`excluded:${kind}`]
      return count > 0 ? [{ kind, count }] : []
    }),
    batches: batchFigures(names.batches, (batch) => filters.batch === null || batchName(batch) === filters.batch)
  }
}

type Sum = { name: string; counts: GroupCounts; silent: SilentCounts | null }

function sumOf(name: string, cells: readonly Cell[]): Sum {
  const counts = noCounts()
  const silent = cells.some((cell) => cell.silent !== null) ? noSilent() : null
  for (const cell of cells) {
    addCounts(counts, cell.counts)
    if (silent !== null && cell.silent !== null) addSilent(silent, cell.silent)
  }
  return { name, counts, silent }
}

const groupsOf = (names: GroupNames, cells: readonly Cell[], idOf: (cell: Cell) => string): Sum[] =>
  names.flatMap(({ id, name }) => {
    const own = cells.filter((cell) => idOf(cell) === id)
    if (own.length === 0) return []
    const sum = sumOf(name, own)
    return sum.counts.totals.fitted > 0 ? [sum] : []
  })
