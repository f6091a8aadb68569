import { csvFile } from '~/lib/csv'
import type { GroupFigures, ReliabilityFigures } from './figures.types'

type By = 'all' | 'revision' | 'release'

const groupsBy = (figures: ReliabilityFigures): [By, GroupFigures][] => [
  ['all', figures.all],
  ...figures.byRevision.map((group): [By, GroupFigures] => ['revision', group]),
  ...figures.byRelease.map((group): [By, GroupFigures] => ['release', group])
]

/** Every step of every curve as CSV; each row says which board and as of when, so that a file explains itself. */
export function reliabilityCsv(board: string, figures: ReliabilityFigures): string {
  const head = [
    'board',
    'as_of',
    'by',
    'group',
    'day',
    'at_risk',
    'events',
    'censored',
    'survival',
    'standard_error',
    'lower',
    'upper',
    'bound'
  ]
  const rows = groupsBy(figures).flatMap(([by, { group, curve }]) =>
    curve.map((r) => [
      board,
      figures.filters.asOf,
      by,
      group,
      r.time,
      r.atRisk,
      r.events,
      r.censored,
      r.survival,
      r.standardError,
      r.lower,
      r.upper,
      r.bound
    ])
  )
  return csvFile(head, rows)
}

/** The answer of the API: METHODS' group objects of Kaplan-Meier, with what the rules kept out beside them. */
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
    excluded: { total: figures.excluded.reduce((sum, e) => sum + e.count, 0), byKind: figures.excluded },
    followUpCompleteness: figures.all.followUp?.ratio ?? null,
    logRank: figures.revisions?.logRank ?? null,
    groups: groupsBy(figures).map(([by, { group, ...rest }]) => ({ by, group, ...rest }))
  }
}
