import { dayNumber } from '~/lib/dates'
import { causes, exclusionKinds, type Cause, type ExclusionKind } from '../reports/report-words'
import { observationOf, type LifeHistory, type LifeOutcome, type UnitObservation } from '../reports/observations'
import { clopperPearson, type ProportionLimits } from '../survival/clopper-pearson'
import { columnsOf } from '../survival/columns'
import { curveLimits } from '../survival/confidence-limits'
import { curveRows, type CurveRow } from '../survival/curve-rows'
import { kaplanMeier } from '../survival/kaplan-meier'
import { logRank } from '../survival/log-rank'
import { quantile, type Quantile } from '../survival/quantile'
import { survivalAt, type SurvivalAt } from '../survival/survival-at'
import { tallyOf, type Tally } from '../survival/tally'
import { observationFilters, type ReliabilityFilters } from './reliability-filters'

/** One curve with everything said beside it. Times are whole days after fitting. */
export type GroupFigures = {
  /** `all`, a console revision's code or a version. */
  group: string
  /** Reports that count, whether or not they are in the curve. */
  fitted: number
  /** Units in the curve, and failures in it. */
  n: number
  events: number
  failuresByCause: Record<Cause, number>
  /** In the curve from the filing day on, as the report was filed late. */
  enteredLate: number
  /** Out of the curve: failed before its late report; filed late and not heard of since. */
  failedBeforeRegistration: number
  notFollowed: number
  /** Failures in the curve known less closely than to 14 days; drawn at the day they were found. */
  failuresWithinInterval: number
  /** Of the reports filed in time, how many worked; limits by Clopper and Pearson. */
  firstPower: (ProportionLimits & { n: number; works: number }) | null
  atOneYear: SurvivalAt
  median: Quantile
  curve: CurveRow[]
}

export type ReliabilityFigures = {
  filters: ReliabilityFilters
  all: GroupFigures
  byRevision: GroupFigures[]
  byRelease: GroupFigures[]
  /** Log-rank test of the revisions against each other; null with fewer than two that failures were expected of. */
  revisionsDiffer: { chiSquare: number; degreesOfFreedom: number; p: number } | null
  excluded: { kind: ExclusionKind; count: number }[]
  /**
   * Completeness of follow-up: observed unit-days over those there would be had every unit without a failure been followed to the as-of
   * day. Null when there are none. Source: T. G. Clark, D. G. Altman, B. L. De Stavola, Lancet 359:1309 (2002).
   */
  followUp: number | null
}

/** The name of a release or revision by the id in a life history, in the order in which groups are shown. */
export type GroupNames = { id: string; name: string }[]

const oneYear = 365

/**
 * Kaplan-Meier curves with log-log limits for all lives together, by console revision and by release. Groups of which nothing is
 * reported are left out. Pure; linear in the lives.
 */
export function reliabilityFigures(
  lives: Iterable<LifeHistory>,
  revisions: GroupNames,
  releases: GroupNames,
  filters: ReliabilityFilters
): ReliabilityFigures {
  const kept = observationFilters(filters)
  const all = newCollection('all')
  const byRevision = new Map(revisions.map(({ id, name }) => [id, newCollection(name)]))
  const byRelease = new Map(releases.map(({ id, name }) => [id, newCollection(name)]))
  const excluded = new Map<ExclusionKind, number>()
  let observedDays = 0
  let possibleDays = 0
  const asOf = dayNumber(filters.asOf)
  for (const life of lives) {
    const outcome = observationOf(life, filters.asOf, kept)
    if (outcome.kind === 'excluded') excluded.set(outcome.exclusion, (excluded.get(outcome.exclusion) ?? 0) + 1)
    collect(all, outcome)
    const revision = byRevision.get(life.revisionId)
    const release = byRelease.get(life.releaseId)
    if (revision) collect(revision, outcome)
    if (release) collect(release, outcome)
    if (outcome.kind === 'observed') {
      observedDays += outcome.time - outcome.entry
      possibleDays += (outcome.cause === null ? asOf - dayNumber(life.installedOn) : outcome.time) - outcome.entry
    }
  }
  const revisionGroups = [...byRevision.values()].filter((group) => group.fitted > 0)
  const test = logRank([revisionGroups.map(tallyOfCollection)])
  return {
    filters,
    all: figuresOf(all),
    byRevision: revisionGroups.map(figuresOf),
    byRelease: [...byRelease.values()].filter((group) => group.fitted > 0).map(figuresOf),
    revisionsDiffer: test && { chiSquare: test.chiSquare, degreesOfFreedom: test.degreesOfFreedom, p: test.p },
    excluded: exclusionKinds.flatMap((kind) => (excluded.has(kind) ? [{ kind, count: excluded.get(kind)! }] : [])),
    followUp: possibleDays > 0 ? observedDays / possibleDays : null
  }
}

type Collection = {
  name: string
  fitted: number
  observed: UnitObservation[]
  failedBeforeRegistration: number
  notFollowed: number
}

const newCollection = (name: string): Collection => ({
  name,
  fitted: 0,
  observed: [],
  failedBeforeRegistration: 0,
  notFollowed: 0
})

function collect(group: Collection, outcome: LifeOutcome): void {
  if (outcome.kind === 'observed') group.observed.push(outcome)
  else if (outcome.kind === 'failed-before-registration') group.failedBeforeRegistration++
  else if (outcome.kind === 'not-followed') group.notFollowed++
  else return
  group.fitted++
}

const tallyOfCollection = ({ observed }: Collection): Tally =>
  tallyOf(columnsOf(observed.map(({ entry, time, cause }) => ({ entry, time, event: cause === null ? 0 : 1 }))))

function figuresOf(group: Collection): GroupFigures {
  const curve = kaplanMeier(tallyOfCollection(group))
  const limits = curveLimits(curve)
  const failuresByCause = Object.fromEntries(causes.map((cause) => [cause, 0])) as Record<Cause, number>
  for (const { cause } of group.observed) if (cause !== null) failuresByCause[cause]++
  const inTime = group.observed.filter((o) => o.isFirstPowerCounted)
  const works = inTime.filter((o) => o.worksAtFirstPower).length
  const proportion = clopperPearson(works, inTime.length)
  return {
    group: group.name,
    fitted: group.fitted,
    n: group.observed.length,
    events: curve.failures,
    failuresByCause,
    enteredLate: group.observed.filter((o) => o.entry > 0).length,
    failedBeforeRegistration: group.failedBeforeRegistration,
    notFollowed: group.notFollowed,
    failuresWithinInterval: group.observed.filter((o) => o.interval !== null).length,
    firstPower: proportion && { ...proportion, n: inTime.length, works },
    atOneYear: survivalAt(curve, oneYear),
    median: quantile(curve, limits, 0.5),
    curve: curveRows(curve, limits)
  }
}
