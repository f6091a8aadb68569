import { addDays, dayNumber, daysBetween, type Day } from '~/lib/dates'
import type { Random } from './random'
import {
  causes,
  demoAsOf,
  evidenceShares,
  firstPowerCauses,
  hiddenFirstPower,
  hiddenTime,
  reporting,
  truth,
  unknownCauseShare,
  type Evidence,
  type FailureCause,
  type UnitKind
} from './truth'

export type FirstPower = 'works' | 'partly' | 'no-change' | 'worse'
export type Statement = { statement: 'running' | 'failed' | 'parted'; on: Day; filedOn: Day }
export type Failure = { lastRunningOn: Day | null; foundOn: Day; cause: FailureCause }

/** One unit's life as its reporter tells it. Days are calendar days. */
export type UnitStory = {
  kind: UnitKind
  installedOn: Day
  filedOn: Day
  evidence: Evidence
  firstPower: FirstPower
  statements: Statement[]
  failure: Failure | null
}

const lastDay = addDays(demoAsOf, -1)

/** When a unit is fitted: an exponential wait after the release (or its batch) could be had, and at least 15 days before the end. */
export function drawInstalledOn(random: Random, kind: UnitKind, availableOn: Day): Day {
  const span = daysBetween(availableOn, demoAsOf) - 15
  let wait = Infinity
  while (wait > span) wait = Math.floor(random.exponential(truth[kind.board]!.fittingDelay[kind.release]!))
  return addDays(availableOn, wait)
}

function drawFilingDelay(random: Random, most: number): number {
  const wanted = random.chance(reporting.lateShare)
    ? random.whole(15, reporting.lateMostDays)
    : Math.min(13, Math.floor(random.exponential(2.2)))
  return wanted <= most ? wanted : random.whole(0, Math.min(13, most))
}

const resultOf = (random: Random, cause: FailureCause): FirstPower =>
  random.weighted(
    cause === 'wrong-diagnosis' || cause === 'other-fault'
      ? { 'no-change': 0.8, partly: 0.2, worse: 0 }
      : { 'no-change': 0.55, partly: 0.2, worse: 0.25 }
  ) as FirstPower

/** What happens to the unit, unseen: the day of its failure and of its parting, in days after fitting. */
function drawFate(random: Random, kind: UnitKind) {
  const fates = causes.map((cause) => ({ cause, at: hiddenTime(kind, cause, random.unit()) }))
  const first = fates.reduce((a, b) => (b.at < a.at ? b : a))
  return {
    failsAt: Math.max(1, Math.ceil(first.at)),
    cause: (random.chance(unknownCauseShare) ? 'unknown' : first.cause) as FailureCause,
    partsAt: Math.max(1, Math.ceil(random.exponential(365.25 / reporting.partedPerYear)))
  }
}

/** The days after fitting on which the owner would be asked and answers: the due check-ins, and the round of the last weeks. */
function drawAnswerDays(random: Random, filedAfter: number, end: number): number[] {
  const round = Math.max(filedAfter + 1, end - random.whole(0, 24))
  const days = reporting.checkInDays.map((due) => due + random.whole(0, 9))
  return [...days.filter((day) => day > filedAfter + 3 && day < round - 30), ...(round <= end ? [round] : [])]
}

/**
 * Draws one unit's story. Silence begins at a statement and is complete: after it nothing is heard, a failure included. So censoring
 * does not depend on the fate, and a survival estimate from the stories is an estimate of the hidden curve.
 */
export function drawStory(random: Random, kind: UnitKind, installedOn: Day): UnitStory {
  const end = daysBetween(installedOn, lastDay)
  const filedAfter = drawFilingDelay(random, end)
  const evidence = random.weighted(evidenceShares)
  const day = (offset: number) => addDays(installedOn, offset)
  const base = { kind, installedOn, filedOn: day(filedAfter), evidence }

  if (!random.chance(hiddenFirstPower(kind))) {
    const cause = random.weighted(firstPowerCauses[evidence])
    const failure = { lastRunningOn: null, foundOn: installedOn, cause }
    return { ...base, firstPower: resultOf(random, cause), statements: [], failure }
  }

  const { failsAt, cause, partsAt } = drawFate(random, kind)
  const isFoundLate = random.chance(truth[kind.board]!.foundLate)
  const statements: Statement[] = []
  let lastRunning = 0

  const fail = (noMoreThan: number): UnitStory => {
    const found = isFoundLate ? noMoreThan : Math.min(noMoreThan, failsAt + random.whole(0, 6))
    const seen = isFoundLate ? lastRunning : Math.max(lastRunning, failsAt - random.whole(1, 5))
    statements.push({ statement: 'failed', on: day(found), filedOn: day(Math.max(found, filedAfter)) })
    return { ...base, firstPower: 'works', statements, failure: { lastRunningOn: day(seen), foundOn: day(found), cause } }
  }

  if (failsAt <= filedAfter) return fail(filedAfter)
  let silent = random.chance(reporting.dropOut)
  for (const asked of drawAnswerDays(random, filedAfter, end)) {
    if (silent) break
    if (failsAt <= asked && failsAt <= partsAt) return fail(asked)
    if (partsAt <= asked) {
      const on = Math.max(partsAt, filedAfter)
      statements.push({ statement: 'parted', on: day(on), filedOn: day(on) })
      break
    }
    statements.push({ statement: 'running', on: day(asked), filedOn: day(asked) })
    lastRunning = asked
    silent = random.chance(reporting.dropOut)
  }
  return { ...base, firstPower: 'works', statements, failure: null }
}

/** Sorts stories as they were filed. */
export const byFiling = (a: { filedOn: Day }, b: { filedOn: Day }) => dayNumber(a.filedOn) - dayNumber(b.filedOn)
