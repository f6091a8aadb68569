/*
 * The hidden parameters of the demo world. Everything that the reports say was drawn from these, so that the curves can be held
 * against the truth. Nothing in the product reads this file; the seed and its tests do. All of it is invented.
 */
import type { Day } from '~/lib/dates'

/** The day on which the demo world stands still. */
export const demoAsOf: Day = '2026-12-01'
export const demoSeed = 20_261_202

export type Cause = 'board' | 'fitting' | 'other-fault' | 'accident'
/** Cumulative hazard H(t) = (t / scaleDays) ^ shape, t in days after a first power-up that worked. */
export type Weibull = { shape: number; scaleDays: number }

export type BoardTruth = {
  /** Hazards of a release with factor 1 in a console revision with factor 1. */
  hazards: Record<Cause, Weibull>
  /** Multiplies the board's own hazard. */
  releaseFactor: Record<string, number>
  /** Multiplies the board's own hazard, by console revision and, where they differ, by release. */
  revisionFactor: Record<string, number | { default: number; byRelease: Record<string, number> }>
  /** Probability that a unit works at first power, by console revision. */
  firstPowerSuccess: Record<string, number>
  /** Units fitted: release, console revision, count. */
  units: Record<string, Record<string, number>>
  /** Mean days from a release's publication to a fitting. */
  fittingDelay: Record<string, number>
  /** Share of failures that are found at the next check-in only, so that they lie somewhere in a long interval. */
  foundLate: number
}

/** Why a unit that did not work at first power did not, by what the diagnosis rested on. */
export const firstPowerCauses: Record<Evidence, Record<FailureCause, number>> = {
  measured: { board: 0.4, fitting: 0.38, 'other-fault': 0.08, 'wrong-diagnosis': 0.06, accident: 0.02, unknown: 0.06 },
  'code-read': { board: 0.3, fitting: 0.34, 'other-fault': 0.1, 'wrong-diagnosis': 0.18, accident: 0.02, unknown: 0.06 },
  'symptom-only': { board: 0.2, fitting: 0.22, 'other-fault': 0.1, 'wrong-diagnosis': 0.4, accident: 0.01, unknown: 0.07 },
  none: { board: 0.2, fitting: 0.2, 'other-fault': 0.05, 'wrong-diagnosis': 0.5, accident: 0, unknown: 0.05 }
}
export type Evidence = 'measured' | 'code-read' | 'symptom-only' | 'none'
export type FailureCause = Cause | 'wrong-diagnosis' | 'unknown'

export const evidenceShares: Record<Evidence, number> = { measured: 0.46, 'code-read': 0.2, 'symptom-only': 0.28, none: 0.06 }
/** Share of later failures whose cause nobody established. */
export const unknownCauseShare = 0.06

/** How people report. */
export const reporting = {
  /** Share of reports filed more than 14 days after fitting, and how late they are at most. */
  lateShare: 0.12,
  lateMostDays: 320,
  /** Probability of never being heard of again, after the report and after each check-in. */
  dropOut: 0.055,
  /** Units that change hands or are scrapped, per year. */
  partedPerYear: 0.02,
  /** Share of units without a tag in the report. */
  untaggedShare: 0.18,
  /** Days after fitting at which a check-in is asked for. */
  checkInDays: [30, 180, 365, 730, 1095, 1460, 1825] as readonly number[]
}

/** The bad lot: one reel of C13 in one Buttress batch. It multiplies the board's own hazard. */
export const badLot = { board: 'buttress', release: '1.1.1', batch: '2024-09', units: 48, part: 'C13', factor: 14 }

export const truth: Record<string, BoardTruth> = {
  buttress: {
    hazards: {
      board: { shape: 0.85, scaleDays: 33_000 },
      fitting: { shape: 0.6, scaleDays: 900_000 },
      'other-fault': { shape: 1, scaleDays: 60_000 },
      accident: { shape: 1, scaleDays: 200_000 }
    },
    releaseFactor: { '0.9.0-beta.2': 2, '1.0.0': 1.5, '1.1.0': 1, '1.1.1': 0.8, '2.0.0': 0.6 },
    revisionFactor: {
      'TM-1': { default: 6, byRelease: { '2.0.0': 2.5 } },
      'TM-2': 2.2,
      'TM-3': 0.8,
      'TM-4': 1,
      'TM-5': 1.2,
      'TM-6': 1
    },
    firstPowerSuccess: { 'TM-1': 0.93, 'TM-2': 0.95, 'TM-3': 0.975, 'TM-4': 0.96, 'TM-5': 0.965, 'TM-6': 0.97 },
    units: {
      '0.9.0-beta.2': { 'TM-2': 6, 'TM-3': 8, 'TM-5': 2 },
      '1.0.0': { 'TM-2': 15, 'TM-3': 19, 'TM-5': 16 },
      '1.1.0': { 'TM-1': 3, 'TM-2': 52, 'TM-3': 87, 'TM-5': 68, 'TM-6': 4 },
      '1.1.1': { 'TM-1': 6, 'TM-2': 7, 'TM-3': 13, 'TM-4': 29, 'TM-5': 15, 'TM-6': 1 },
      '2.0.0': { 'TM-1': 14, 'TM-2': 6, 'TM-3': 14, 'TM-4': 35, 'TM-5': 17, 'TM-6': 2 }
    },
    fittingDelay: { '0.9.0-beta.2': 40, '1.0.0': 220, '1.1.0': 480, '1.1.1': 260, '2.0.0': 330 },
    foundLate: 0
  },
  sundial: {
    hazards: {
      board: { shape: 1.1, scaleDays: 18_000 },
      fitting: { shape: 0.6, scaleDays: 1_500_000 },
      'other-fault': { shape: 1, scaleDays: 90_000 },
      accident: { shape: 1, scaleDays: 80_000 }
    },
    releaseFactor: { '1.0.0-beta.1': 1.6, '1.0.0': 1.2, '1.2.0': 0.7 },
    // The later lamp of TP-4 asks more current than the driver of revision A can carry away as heat.
    revisionFactor: { 'TP-2': 1, 'TP-3': 0.9, 'TP-4': { default: 9, byRelease: { '1.2.0': 1.1 } } },
    firstPowerSuccess: { 'TP-2': 0.975, 'TP-3': 0.985, 'TP-4': 0.97 },
    units: {
      '1.0.0-beta.1': { 'TP-2': 6, 'TP-3': 8 },
      '1.0.0': { 'TP-2': 30, 'TP-3': 38, 'TP-4': 31 },
      '1.2.0': { 'TP-2': 48, 'TP-3': 74, 'TP-4': 55 }
    },
    fittingDelay: { '1.0.0-beta.1': 45, '1.0.0': 330, '1.2.0': 420 },
    foundLate: 0.3
  },
  almanac: {
    hazards: {
      board: { shape: 1, scaleDays: 2_500_000 },
      fitting: { shape: 1, scaleDays: 4_000_000 },
      'other-fault': { shape: 1, scaleDays: 4_000_000 },
      accident: { shape: 1, scaleDays: 4_000_000 }
    },
    releaseFactor: { '1.0.0': 1, '1.0.1': 1 },
    revisionFactor: { 'TP-1': 1, 'TP-2': 1, 'TP-3': 1, 'TP-4': 1 },
    firstPowerSuccess: { 'TP-1': 0.9999, 'TP-2': 0.9999, 'TP-3': 0.9999, 'TP-4': 0.9999 },
    units: {
      '1.0.0': { 'TP-1': 5, 'TP-2': 8, 'TP-3': 10, 'TP-4': 5 },
      '1.0.1': { 'TP-1': 8, 'TP-2': 14, 'TP-3': 20, 'TP-4': 12 }
    },
    fittingDelay: { '1.0.0': 150, '1.0.1': 520 },
    foundLate: 0
  }
}

/** A kind of unit: everything that its hidden fate depends on. */
export type UnitKind = { board: string; release: string; revision: string; isBadLot: boolean }

const boardFactor = (kind: UnitKind): number => {
  const board = truth[kind.board]!
  const byRevision = board.revisionFactor[kind.revision]!
  const revision = typeof byRevision === 'number' ? byRevision : (byRevision.byRelease[kind.release] ?? byRevision.default)
  return board.releaseFactor[kind.release]! * revision * (kind.isBadLot ? badLot.factor : 1)
}

/** Cumulative hazard of one cause at day `t` for a unit that worked at first power. */
export function hiddenHazard(kind: UnitKind, cause: Cause, t: number): number {
  const { shape, scaleDays } = truth[kind.board]!.hazards[cause]
  return (cause === 'board' ? boardFactor(kind) : 1) * (t / scaleDays) ** shape
}

export const causes: readonly Cause[] = ['board', 'fitting', 'other-fault', 'accident']

/** Cumulative hazard of all causes together at day `t`, first power aside. */
export const hiddenTotalHazard = (kind: UnitKind, t: number): number =>
  causes.reduce((sum, cause) => sum + hiddenHazard(kind, cause, t), 0)

export const hiddenFirstPower = (kind: UnitKind): number => truth[kind.board]!.firstPowerSuccess[kind.revision]!

/** The true share of such units that still work at day `t`. */
export const hiddenSurvival = (kind: UnitKind, t: number): number =>
  hiddenFirstPower(kind) * Math.exp(-hiddenTotalHazard(kind, t))

/** The day on which a cause strikes, for a uniform draw `u` in [0, 1): the inverse of exp(-H). */
export function hiddenTime(kind: UnitKind, cause: Cause, u: number): number {
  const { shape, scaleDays } = truth[kind.board]!.hazards[cause]
  const factor = cause === 'board' ? boardFactor(kind) : 1
  return scaleDays * (-Math.log(1 - u) / factor) ** (1 / shape)
}
