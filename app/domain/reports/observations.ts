import { daysBetween, type Day } from '~/lib/dates'
import type { Cause, EvidenceGrade, ExclusionKind, FirstPower, InstallMethod } from './report-words'

/** What the database knows of one fitted unit. Days are calendar days; `filedOn` of each row is the day Fettle was told. */
export type LifeHistory = {
  reportId: string
  releaseId: string
  revisionId: string
  /** The batch of its unit tag; null for an untagged board. */
  batchId: string | null
  evidence: EvidenceGrade
  method: InstallMethod | null
  firstPower: FirstPower
  installedOn: Day
  filedOn: Day
  exclusion: { kind: ExclusionKind; on: Day } | null
  /** `running` and `parted` check-ins in any order. */
  statements: { statement: 'running' | 'parted'; statedOn: Day; filedOn: Day }[]
  /** The failure told at a check-in, or the cause given for a unit that did not work at first power. */
  failure: { lastRunningOn: Day | null; foundOn: Day; cause: Cause; filedOn: Day } | null
}

/** The unit's part in a survival curve, in whole days from its installation. */
export type UnitObservation = {
  kind: 'observed'
  /** Day from which it was watched; 0 unless the report was filed late. */
  entry: number
  /** Day of the failure (latest day it can have been), or of the last word that it ran. */
  time: number
  /** The cause of a failure; null for a unit last heard of running. */
  cause: Cause | null
  /** Days (after lower, up to upper] between which it failed, where they lie more than 14 days apart. */
  interval: { lower: number; upper: number } | null
  /** Whether it is one of those that count for the share working at first power. */
  isFirstPowerCounted: boolean
  worksAtFirstPower: boolean
}

export type LifeOutcome =
  | UnitObservation
  /** Not known yet on the as-of day. */
  | { kind: 'not-yet' }
  | { kind: 'excluded'; exclusion: ExclusionKind }
  /** Left out by the filters. */
  | { kind: 'filtered' }
  /** Failed before its own late report was filed: listed, no part of the curve. */
  | { kind: 'failed-before-registration'; cause: Cause }
  /** Filed late and not heard of since: never at risk. */
  | { kind: 'not-followed' }

export type ObservationFilters = {
  evidence: readonly EvidenceGrade[] | 'any'
  /** `untold`: only those whose author did not say. */
  method: InstallMethod | 'untold' | 'any'
  /** Only units fitted on this day or later. */
  since: Day | null
  /** Only units that worked at first power: the question becomes how long a working one lasts. */
  worksAtFirstPowerOnly: boolean
}

/** All reports are counted. */
export const allReports: ObservationFilters = { evidence: 'any', method: 'any', since: null, worksAtFirstPowerOnly: false }

/** A report filed later than this many days after installing enters late; a failure known to within as many counts as exact. */
export const promptDays = 14

/**
 * One unit's life as an observation, as known at the end of the day `asOf`: rows filed later do not exist yet, so that a figure with an
 * as-of day can always be had again. A day that somebody states may lie one ahead of the day of filing (which is UTC) and counts with it.
 *
 * 1. Time runs in whole days from the installation. A first-power result other than `works` (`partly`, `no-change`, `worse`) is a
 *    unit that never did its work: it fails on day 0, whatever the cause.
 * 2. A unit runs up to its last statement and is censored there. Statements are check-ins, and the report itself: whoever files
 *    `works` says so on the day of filing. `parted` ends the following on its day, without a failure; what is found later is not
 *    counted, since only the failures of parted units would come to light.
 * 3. A report filed more than 14 days after installing enters on its filing day. What failed up to that day is listed apart; what was not
 *    heard of after it was never at risk.
 * 4. A failure found at a check-in lies in (last running, found]. Known to within 14 days it counts as exact on the day found; else
 *    `time` is the day found and `interval` keeps both ends.
 * 5. The cause goes along. Whether `unknown` counts against the board is for the curve to say (`countsAgainstBoard`).
 * 6. An excluded report is out from the day of its exclusion, with its kind, to be counted.
 *
 * The share working at first power counts the reports filed in time only, for the reason of rule 3.
 */
export function observationOf(life: LifeHistory, asOf: Day, filters: ObservationFilters): LifeOutcome {
  if (life.filedOn > asOf) return { kind: 'not-yet' }
  if (!isKept(life, filters)) return { kind: 'filtered' }
  if (life.exclusion !== null && life.exclusion.on <= asOf) return { kind: 'excluded', exclusion: life.exclusion.kind }
  const worksAtFirstPower = life.firstPower === 'works'

  const filed = daysBetween(life.installedOn, life.filedOn)
  const isLate = filed > promptDays
  const entry = isLate ? filed : 0
  const known = { kind: 'observed' as const, entry, isFirstPowerCounted: !isLate, worksAtFirstPower }
  const failure = failureKnown(life, asOf)

  if (!worksAtFirstPower) {
    const cause = failure?.cause ?? 'unknown'
    if (isLate) return { kind: 'failed-before-registration', cause }
    return { ...known, time: 0, cause, interval: null }
  }
  if (failure !== null) {
    const upper = daysBetween(life.installedOn, failure.foundOn)
    if (isLate && upper <= entry) return { kind: 'failed-before-registration', cause: failure.cause }
    const lower = lastRunningDay(life, asOf, upper)
    return { ...known, time: upper, cause: failure.cause, interval: upper - lower > promptDays ? { lower, upper } : null }
  }
  const time = lastHeardDay(life, asOf)
  if (isLate && time <= entry) return { kind: 'not-followed' }
  return { ...known, time, cause: null, interval: null }
}

function isKept({ evidence, method, firstPower, installedOn }: LifeHistory, filters: ObservationFilters): boolean {
  if (filters.evidence !== 'any' && !filters.evidence.includes(evidence)) return false
  if (filters.method !== 'any' && filters.method !== (method ?? 'untold')) return false
  if (filters.since !== null && installedOn < filters.since) return false
  return !filters.worksAtFirstPowerOnly || firstPower === 'works'
}

/** Rule 5: a failure whose cause is not known counts against the board. */
export const countsAgainstBoard = (cause: Cause): boolean => cause === 'board' || cause === 'unknown'

function failureKnown(life: LifeHistory, asOf: Day) {
  const { failure } = life
  if (failure === null || failure.filedOn > asOf) return null
  const parted = partedOn(life, asOf)
  return parted === null || failure.foundOn <= parted ? failure : null
}

/** The day on which it was parted with, as told by `asOf`; the first should it be told twice. */
export function partedOn(life: LifeHistory, asOf: Day): Day | null {
  let first: Day | null = null
  for (const { statement, statedOn, filedOn } of life.statements)
    if (statement === 'parted' && filedOn <= asOf && (first === null || statedOn < first)) first = statedOn
  return first
}

function* daysRunning(life: LifeHistory, asOf: Day) {
  // A filing day before the installation (time zones) says no more than the installation itself.
  yield Math.max(0, daysBetween(life.installedOn, life.filedOn))
  for (const { statement, statedOn, filedOn } of life.statements)
    if (statement === 'running' && filedOn <= asOf) yield daysBetween(life.installedOn, statedOn)
}

function lastHeardDay(life: LifeHistory, asOf: Day): number {
  const parted = partedOn(life, asOf)
  return parted === null ? Math.max(...daysRunning(life, asOf)) : daysBetween(life.installedOn, parted)
}

/** The last day up to `upper` on which it is known to have run; day 0 at least, as it worked at first power. */
function lastRunningDay(life: LifeHistory, asOf: Day, upper: number): number {
  let last = 0
  const told = life.failure?.lastRunningOn
  if (told) last = Math.min(upper, Math.max(0, daysBetween(life.installedOn, told)))
  for (const day of daysRunning(life, asOf)) if (day <= upper && day > last) last = day
  return last
}
