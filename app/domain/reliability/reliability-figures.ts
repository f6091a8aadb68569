import { exclusionKinds } from '../reports/report-words'
import { batchFigures, type BatchCounts } from './batch-figures'
import { comparison } from './comparison'
import { columnsOfCounts, sumOfColumns, tallyOfCounts, type CountColumns } from './counts-tally'
import type { ReliabilityFigures } from './figures.types'
import { addCounts, noCounts, noTotals, totalKeys, type DayCounts, type GroupCounts, type GroupTotals } from './group-counts'
import { groupFigures, oneYear, wideOf, type Counting, type Detail, type SummedCounts } from './group-figures'
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
 *
 * @param detail `page`: without hazards, and with incidences of all units together only, which is what a page shows
 */
export function reliabilityFigures(
  { filters, cells, grain, ...names }: FiguresInput,
  detail: 'whole' | 'page' = 'whole'
): ReliabilityFigures {
  const counting: Counting = {
    counted: countedCauses(filters.cause),
    isOneCause: filters.cause !== 'all',
    asOf: filters.asOf
  }
  const columns = columnsOfCounts(cells.map(({ counts }) => counts.days))
  const counted = cells.map((cell, i): CountedCell => ({ ...cell, columns: columns[i]! }))
  const all = sumOf('all', counted)
  const revisions = groupsOf(names.revisions, counted, (cell) => cell.revisionId)
  const releases = groupsOf(names.releases, counted, (cell) => cell.releaseId)
  const figures = (sum: Sum, ofGroup: Detail) => {
    const silent = sum.silent && silentFigures(sumOfDays(sum.cells), sum.totals, sum.silent, counting.counted, oneYear)
    return groupFigures(sum.name, sum, counting, silent, ofGroup)
  }
  const groups = (sums: readonly Sum[]) => sums.map((sum) => figures(sum, detail === 'page' ? 'brief' : 'whole'))
  const compare = (by: 'revision' | 'release', sums: readonly Sum[]) =>
    comparison(
      by,
      sums.map(({ name, totals, columns: own }) => ({ name, n: totals.inCurve, tally: tallyOfCounts(own, counting.counted) }))
    )
  return {
    filters,
    grain,
    all: figures(all, detail === 'page' ? 'all-but-hazard' : 'whole'),
    byRevision: groups(revisions),
    byRelease: groups(releases),
    revisions: compare('revision', revisions),
    releases: compare('release', releases),
    excluded: exclusionKinds.flatMap((kind) => {
      const count = all.totals[`excluded:${kind}`]
      return count > 0 ? [{ kind, count }] : []
    }),
    batches: batchFigures(names.batches, (batch) => filters.batch === null || batchName(batch) === filters.batch)
  }
}

type CountedCell = Cell & { columns: CountColumns }
type Sum = SummedCounts & { name: string; cells: readonly CountedCell[]; silent: SilentCounts | null }

function sumOf(name: string, cells: readonly CountedCell[]): Sum {
  const totals = noTotals()
  const silent = cells.some((cell) => cell.silent !== null) ? noSilent() : null
  for (const cell of cells) {
    for (const key of totalKeys) totals[key] += cell.counts.totals[key]
    if (silent !== null && cell.silent !== null) addSilent(silent, cell.silent)
  }
  const lives = cells.flatMap(({ counts }) => counts.lives ?? [])
  return {
    ...{ name, cells, totals, silent },
    columns: sumOfColumns(cells.map((cell) => cell.columns)),
    lives: lives.length < cells.length ? null : lives
  }
}

function sumOfDays(cells: readonly Cell[]): DayCounts {
  const sum = { ...noCounts(), lives: null }
  for (const { counts } of cells) addCounts(sum, { ...counts, lives: null })
  return sum.days
}

const groupsOf = (names: GroupNames, cells: readonly CountedCell[], idOf: (cell: Cell) => string): Sum[] =>
  names.flatMap(({ id, name }) => {
    const own = cells.filter((cell) => idOf(cell) === id)
    if (own.length === 0) return []
    const sum = sumOf(name, own)
    return sum.totals.fitted > 0 ? [sum] : []
  })
