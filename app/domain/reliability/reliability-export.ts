import { csvFile } from '~/lib/csv'
import { DomainError } from '~/lib/domain-error'
import { exportTables, groupsBy, type By } from './export-tables'
import type { GroupFigures, ReliabilityFigures } from './figures.types'
import { filtersQuery, type ReliabilityFilters } from './reliability-filters'

export type ReliabilityTable = keyof typeof exportTables
/** The tables in which a page's figures can be had, the first one where none is asked for. */
export const reliabilityTables = Object.keys(exportTables) as ReliabilityTable[]

/**
 * The table that an address asks for.
 * @throws DomainError `invalid` for one that there is not
 */
export function tableAsked(query: URLSearchParams): ReliabilityTable {
  const given = query.get('table')?.trim() ?? ''
  const table = reliabilityTables.find((name) => name === (given || 'curve'))
  if (table !== undefined) return table
  const message = `“${given.slice(0, 40)}” is not one of ${reliabilityTables.join(', ')}.`
  throw new DomainError('invalid', 'There is no such table.', [{ path: 'table', message }])
}

/** What a table needs computed: those of the silent units ask for the bounds by themselves. */
export const filtersFor = (table: ReliabilityTable, filters: ReliabilityFilters): ReliabilityFilters =>
  table.startsWith('silent') ? { ...filters, silent: 'bounds' } : filters

/** A table as CSV. Each row says which board, as of when and under which filters (as in an address), so that a file explains itself. */
export function reliabilityCsv(board: string, figures: ReliabilityFigures, table: ReliabilityTable = 'curve'): string {
  const { head, rows } = exportTables[table](figures)
  const query = filtersQuery(figures.filters)
  query.delete('as-of')
  const filters = query.toString()
  return csvFile(
    ['board', 'as_of', ...head, 'filters'],
    rows.map((row) => [board, figures.filters.asOf, ...row, filters])
  )
}

/** The whole of a board's figures as text: the answer of the API, or a table. */
export const reliabilityText = (board: string, figures: ReliabilityFigures, as: 'json' | ReliabilityTable): string =>
  as === 'json' ? JSON.stringify(reliabilityJson(board, figures)) : reliabilityCsv(board, figures, as)

/** The answer of the API: METHODS' group objects, with what the rules kept out, comparisons, batches and silent units beside them. */
export function reliabilityJson(board: string, figures: ReliabilityFigures) {
  const { asOf, ...filters } = figures.filters
  return {
    board,
    asOf,
    filters,
    method: figures.all.estimator,
    timeUnit: 'day',
    confidence: 0.95,
    interval: 'log-log',
    grain: figures.grain,
    excluded: { total: figures.excluded.reduce((sum, e) => sum + e.count, 0), byKind: figures.excluded },
    followUpCompleteness: figures.all.followUp?.ratio ?? null,
    logRank: figures.revisions?.logRank ?? null,
    groups: groupsBy(figures).map(groupJson),
    comparisons: [figures.revisions, figures.releases].filter((comparison) => comparison !== null),
    batches: figures.batches
  }
}

/** A group as `POST /api/v1/compute/survival` answers it, and what a board's reports add. */
function groupJson([by, { estimator, meanInYear, shape, support, incidence, silent, ...group }]: [By, GroupFigures]) {
  return {
    by,
    ...group,
    method: estimator,
    rmst: meanInYear,
    weibull: shape && {
      shape: shape.estimate,
      scale: shape.scale,
      shapeStandardError: shape.standardError,
      scaleStandardError: shape.scaleStandardError,
      logLikelihood: shape.logLikelihood,
      shapeLimits: { lower: shape.lower, upper: shape.upper },
      scaleLimits: { lower: shape.scaleLower, upper: shape.scaleUpper },
      failures: shape.failures,
      b10: shape.b10,
      median: shape.median
    },
    ...(support === null ? {} : { support }),
    ...(incidence.length === 0 ? {} : { incidence }),
    ...(silent === null ? {} : { silent })
  }
}
