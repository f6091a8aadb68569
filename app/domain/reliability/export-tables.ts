import { causes } from '../reports/report-words'
import type { Comparison, GroupFigures, ReliabilityFigures } from './figures.types'

type Cell = string | number | null
/** A table of figures: its columns, and their values row by row. */
export type ExportTable = { head: string[]; rows: Cell[][] }

export type By = 'all' | 'revision' | 'release'

/** Every group: all together, by console revision, by release. */
export const groupsBy = (figures: ReliabilityFigures): [By, GroupFigures][] => [
  ['all', figures.all],
  ...figures.byRevision.map((group): [By, GroupFigures] => ['revision', group]),
  ...figures.byRelease.map((group): [By, GroupFigures] => ['release', group])
]

/** A table with rows of each group, which is named first. */
const ofGroups =
  (head: string[], rowsOf: (group: GroupFigures) => Cell[][]) =>
  (figures: ReliabilityFigures): ExportTable => ({
    head: ['by', 'group', ...head],
    rows: groupsBy(figures).flatMap(([by, group]) => rowsOf(group).map((row): Cell[] => [by, group.group, ...row]))
  })

const curve = ofGroups(
  ['day', 'at_risk', 'events', 'censored', 'survival', 'standard_error', 'lower', 'upper', 'bound', 'estimator'],
  ({ curve: rows, estimator }) =>
    rows.map((r) => [
      ...[r.time, r.atRisk, r.events, r.censored, r.survival, r.standardError, r.lower, r.upper, r.bound],
      estimator
    ])
)

const withLimits = (name: string) => [name, `${name}_lower`, `${name}_upper`]

const groups = ofGroups(
  [
    ...['estimator', 'fitted', 'n', 'events', ...causes.map((cause) => `failures_${cause.replaceAll('-', '_')}`)],
    ...['entered_late', 'failed_before_registration', 'not_followed', 'failures_within_interval'],
    ...['first_power_n', 'first_power_works', ...withLimits('first_power')],
    ...withLimits('one_year'),
    ...['one_year_bound', 'one_year_at_risk', 'one_year_open_from', 'one_year_open_to'],
    ...withLimits('median'),
    ...[...withLimits('mean_days_in_year'), 'mean_days_in_year_standard_error', 'mean_days_in_year_bound'],
    ...['observed_days', 'potential_days', 'follow_up']
  ],
  ({ firstPower: first, atOneYear: year, median, meanInYear: mean, followUp, ...g }) => [
    [
      ...[g.estimator, g.fitted, g.n, g.events, ...causes.map((cause) => g.failuresByCause[cause])],
      ...[g.enteredLate, g.failedBeforeRegistration, g.notFollowed, g.failuresWithinInterval],
      ...[first?.n ?? 0, first?.works ?? 0, first?.estimate ?? null, first?.lower ?? null, first?.upper ?? null],
      ...[year.survival, year.lower, year.upper, year.bound, year.atRisk, year.open?.from ?? null, year.open?.to ?? null],
      ...[median.estimate, median.lower, median.upper],
      ...[mean.estimate, mean.lower, mean.upper, mean.standardError, mean.bound],
      ...[followUp?.observedDays ?? 0, followUp?.potentialDays ?? 0, followUp?.ratio ?? null]
    ]
  ]
)

const incidence = ofGroups(
  ['cause', 'day', 'at_risk', 'incidence', 'standard_error', 'lower', 'upper', 'bound'],
  ({ incidence: curves }) =>
    curves.flatMap(({ cause, curve: rows }) =>
      rows.map((r) => [cause, r.time, r.atRisk, r.estimate, r.standardError, r.lower, r.upper, r.bound])
    )
)

const shape = ofGroups(
  [
    ...['failures', ...withLimits('shape'), 'shape_standard_error'],
    ...[...withLimits('scale'), 'scale_standard_error', 'log_likelihood', ...withLimits('b10'), ...withLimits('median')]
  ],
  ({ shape: s }) =>
    s === null
      ? []
      : [
          [
            ...[s.failures, s.estimate, s.lower, s.upper, s.standardError],
            ...[s.scale, s.scaleLower, s.scaleUpper, s.scaleStandardError, s.logLikelihood],
            ...[s.b10.estimate, s.b10.lower, s.b10.upper, s.median.estimate, s.median.lower, s.median.upper]
          ]
        ]
)

const hazard = ofGroups(['day', 'cumulative_hazard'], ({ hazard: rows }) =>
  rows.map(({ time, cumulative }) => [time, cumulative])
)

const support = ofGroups(['after_day', 'up_to_day', 'mass'], ({ support: cells }) =>
  (cells ?? []).map(({ lower, upper, mass }) => [lower, upper, mass])
)

const silent = ofGroups(['silent', 'heard_of', 'one_year_worst', 'one_year_reported', 'one_year_best'], ({ silent: s }) =>
  s === null ? [] : [[s.silent, s.heardOf, s.atOneYear.worst, s.atOneYear.reported, s.atOneYear.best]]
)

const silentCurve = ofGroups(['case', 'day', 'survival'], ({ silent: s }) =>
  s === null ? [] : (['worst', 'best'] as const).flatMap((which) => s[which].map(({ time, survival }) => [which, time, survival]))
)

/** The test of all groups first, then every pair, then the groups that were not compared and why. */
function comparison({ revisions, releases }: ReliabilityFigures): ExportTable {
  const rowsOf = ({ by, groups: names, logRank, pairs, leftOut, tooMany }: Comparison): Cell[][] => [
    ...(names.length < 2
      ? []
      : [[by, 'tested', 'all', 'all', ...testCells(logRank), null, null, null, null, null, null] as Cell[]]),
    ...pairs.map(({ first, second, logRank: test, meanDifference: d }): Cell[] => [
      ...[by, 'tested', first, second, ...testCells(test), test?.adjustedP ?? null],
      ...[d?.tau ?? null, d?.estimate ?? null, d?.standardError ?? null, d?.lower ?? null, d?.upper ?? null]
    ]),
    ...leftOut.map((name): Cell[] => [by, 'hardly-followed', name, null, ...empty]),
    ...tooMany.map((name): Cell[] => [by, 'beyond-twelve', name, null, ...empty])
  ]
  return {
    head: [
      ...['by', 'status', 'first', 'second', 'chi_square', 'degrees_of_freedom', 'p', 'adjusted_p'],
      ...['days_compared', 'mean_difference', 'standard_error', 'lower', 'upper']
    ],
    rows: [revisions, releases].flatMap((one) => (one === null ? [] : rowsOf(one)))
  }
}
const empty: Cell[] = new Array<Cell>(9).fill(null)
const testCells = (test: { chiSquare: number; degreesOfFreedom: number; p: number } | null): Cell[] =>
  test === null ? [null, null, null] : [test.chiSquare, test.degreesOfFreedom, test.p]

function batches({ batches: { rows } }: ReliabilityFigures): ExportTable {
  return {
    head: [
      ...['batch', 'release', 'code', 'made_on', 'quantity', 'n', 'board_failures', 'compared_to_day', 'observed', 'expected'],
      ...['ratio', 'lower', 'upper', 'flagged']
    ],
    rows: rows.map(({ watch: w, ...b }): Cell[] => [
      ...[b.batch, b.version, b.code, b.madeOn, b.quantity, b.n, b.observed],
      ...(w === null
        ? new Array<Cell>(7).fill(null)
        : [w.comparedTo, w.observed, w.expected, w.ratio, w.lower, w.upper, w.isFlagged ? 'yes' : 'no'])
    ])
  }
}

/** The tables in which a board's figures can be had, by the name in an address. */
export const exportTables = {
  curve,
  groups,
  incidence,
  comparison,
  shape,
  hazard,
  batches,
  support,
  silent,
  'silent-curve': silentCurve
} as const
