import type { Day } from '~/lib/dates'
import { allReports, observationOf, type LifeHistory } from '../reports/observations'
import { countOutcome } from './count-life'
import { slicesOf, type Slice } from './count-slices'
import { noCounts, type GroupCounts } from './group-counts'

/** What is added to one stored group, or taken from it. */
export type GroupDelta = { scopeId: string; revisionId: string; slice: Slice; counts: GroupCounts }

/** Changes of stored groups, by their key. */
export type CountsDelta = Map<string, GroupDelta>

/** Everything that was ever filed is known on this day. */
const endOfTime: Day = '9999-12-31'

/** Adds one unit to every group that it is counted in (its release, and its batch where it has a tag), or takes it out of them. */
export function countLife(delta: CountsDelta, life: LifeHistory, times: 1 | -1): void {
  const outcome = observationOf(life, endOfTime, allReports)
  const slices = slicesOf(life)
  for (const scopeId of life.batchId === null ? [life.releaseId] : [life.releaseId, life.batchId])
    for (const slice of slices) {
      const key = `${scopeId} ${life.revisionId} ${slice.evidence} ${slice.method} ${slice.firstPower}`
      let group = delta.get(key)
      if (group === undefined) delta.set(key, (group = { scopeId, revisionId: life.revisionId, slice, counts: noCounts() }))
      countOutcome(group.counts, life, outcome, times)
    }
}

/** The last day on which anything of a life history was filed, or its report excluded. */
export function lastFiledOn(life: LifeHistory): Day {
  let last = life.filedOn
  const days = [life.exclusion?.on, life.failure?.filedOn, ...life.statements.map((statement) => statement.filedOn)]
  for (const day of days) if (day !== undefined && day > last) last = day
  return last
}
