import type { Tx } from '~db/client.server'
import type { BatchCounts } from './batch-figures'
import { cellCounter, coarseLives } from './count-cells'
import { addCounts, noTotals, totalKeys } from './group-counts'
import { areCountsCurrent, readCounts, readLives } from './read-counts.server'
import { grainNeeded, type Cell } from './reliability-figures'
import { pagesOfLives } from './lives.repo.server'
import type { ReliabilityFilters } from './reliability-filters'

/** What is counted: the releases that the filters leave, and the one console revision or batch they name. `batches` are those of the releases, without counts. */
export type Selection = {
  boardId: string
  filters: ReliabilityFilters
  releaseIds: string[]
  revisionId: string | null
  batchId: string | null
  batches: BatchCounts[]
}

/** `way`: what was read for them. */
export type CountedSelection = { cells: Cell[]; grain: 1 | 14; way: 'counts' | 'histories' }

/** Counts a selection by the stored counts where they answer, else by the life histories; both give the same. Fills the batches' counts. */
export async function countSelection(tx: Tx, selection: Selection): Promise<CountedSelection> {
  const { since, silent, asOf } = selection.filters
  const isStored = since === null && silent === 'as-reported' && (await areCountsCurrent(tx, selection.boardId, asOf))
  return isStored ? countStored(tx, selection) : countHistories(tx, selection)
}

/** From the stored counts: time that does not grow with the units. Fills the batches' counts. */
export async function countStored(
  tx: Tx,
  { filters, releaseIds, revisionId, batchId, batches }: Selection
): Promise<CountedSelection> {
  const releaseOf = new Map(releaseIds.map((id) => [id, id]))
  for (const batch of batches) releaseOf.set(batch.id, batch.releaseId)
  const asked = { scopeIds: batchId === null ? releaseIds : [batchId], revisionId, filters }
  const counted = await readCounts(tx, asked)
  const cells = [...counted].flatMap(([scope, byRevision]) =>
    [...byRevision].map(([revision, counts]): Cell => ({
      releaseId: releaseOf.get(scope)!,
      revisionId: revision,
      counts,
      silent: null
    }))
  )
  const grain = grainOf(cells, filters)
  if (grain !== null)
    for (const [scope, byRevision] of await readLives(tx, asked, grain))
      for (const [revision, lives] of byRevision) counted.get(scope)!.get(revision)!.lives = lives
  const ofBatches = await readCounts(tx, { ...asked, scopeIds: batches.map(({ id }) => id) })
  for (const { id, counts } of batches) for (const more of ofBatches.get(id)?.values() ?? []) addCounts(counts, more)
  return { cells, grain: grain ?? 1, way: 'counts' }
}

/** From the life histories, a page at a time: any filter, any as-of day. Fills the batches' counts. */
export async function countHistories(
  tx: Tx,
  { filters, releaseIds, revisionId, batchId, batches }: Selection
): Promise<CountedSelection> {
  const counter = cellCounter(filters, batchId, batches)
  for (const releaseId of releaseIds)
    for await (const page of pagesOfLives(tx, { releaseId, revisionId, asOf: filters.asOf }))
      for (const life of page) counter.add(life)
  const cells = counter.cells()
  const grain = grainOf(cells, filters) ?? 1
  if (grain === 14) for (const { counts } of cells) counts.lives = coarseLives(counts.lives!)
  return { cells, grain, way: 'histories' }
}

function grainOf(cells: readonly Cell[], filters: ReliabilityFilters) {
  const totals = noTotals()
  for (const { counts } of cells) for (const key of totalKeys) totals[key] += counts.totals[key]
  return grainNeeded(totals, filters)
}
