import { DomainError } from '~/lib/domain-error'
import { aalenJohansen } from './aalen-johansen'
import { causesOf, columnsOf, splitColumns, type Columns } from './columns'
import { hasIntervals, type SurvivalRequest } from './compute-survival.schema'
import { computeTurnbullGroup, resamplingLimits } from './compute-turnbull'
import { curveLimits } from './confidence-limits'
import { curveRows } from './curve-rows'
import { kaplanMeier } from './kaplan-meier'
import { logRank } from './log-rank'
import { nelsonAalen } from './nelson-aalen'
import type { Observation, TimedObservation } from './observation'
import { quantile } from './quantile'
import { restrictedMean } from './restricted-mean'
import { spansOf, type Spans } from './spans'
import type { GroupAnswer, SurvivalAnswer, WeibullAnswer } from './survival-answer'
import { tallyOf, type Tally } from './tally'
import { fitWeibull } from './weibull'
import { weibullQuantile } from './weibull-quantities'

/**
 * Computes the answer of `POST /api/v1/compute/survival` (METHODS.md section 1), the same for pages, endpoint and command line. Kaplan-Meier, with
 * incidences when failures name their causes and a log-rank test of two groups or more; Turnbull for all when any row is an interval. Groups come
 * sorted by name; what does not exist is null.
 *
 * @throws DomainError `impossible` when times differ so little, for their size, that a unit's entry and exit are one
 */
export function computeSurvival(request: SurvivalRequest): SurvivalAnswer {
  if (hasIntervals(request)) {
    const rows = rowsByGroup(request)
    const units = request.observations.reduce((sum, { weight = 1 }) => sum + weight, 0)
    const options = { ...request, ...resamplingLimits(units, request.groups.length) }
    return {
      method: 'turnbull',
      groups: request.groups.map((group, g) => {
        const spans = spansOf(rows[g]!)
        refuseEmptySpans(spans, request, g)
        return computeTurnbullGroup(group, spans, options, weibullAnswer(spans, request.confidence))
      }),
      logRank: null
    }
  }
  const observations = request.observations as TimedObservation[]
  const columns = columnsOf(observations, causesOf(observations))
  refuseEmptyRows(columns)
  const tallies = splitColumns(columns, request.groupOf, request.groups.length).map(tallyOf)
  const rows = rowsByGroup(request)
  const test = tallies.length > 1 ? logRank([tallies]) : null
  return {
    method: 'kaplan-meier',
    groups: tallies.map((tally, g) => kaplanMeierGroup(request.groups[g]!, tally, spansOf(rows[g]!), request)),
    logRank: test && { chiSquare: test.chiSquare, degreesOfFreedom: test.degreesOfFreedom, p: test.p }
  }
}

function kaplanMeierGroup(group: string | null, tally: Tally, spans: Spans, request: SurvivalRequest): GroupAnswer {
  const curve = kaplanMeier(tally)
  const limits = curveLimits(curve, request)
  const hazard = nelsonAalen(curve)
  const mean = request.tau === null ? null : restrictedMean(curve, request.tau, request.confidence)
  const answer: GroupAnswer = {
    group,
    n: curve.units,
    events: curve.failures,
    curve: curveRows(curve, limits),
    median: quantile(curve, limits, 0.5),
    rmst: mean && { tau: mean.tau, estimate: mean.estimate, standardError: mean.standardError },
    hazard: Array.from(hazard.time, (time, i) => ({ time, cumulative: hazard.cumulative[i]! })),
    weibull: weibullAnswer(spans, request.confidence)
  }
  if (tally.causes.length === 0) return answer
  const { causes, time, incidence, standardError } = aalenJohansen(tally)
  answer.incidence = causes.map((cause, k) => ({
    cause,
    curve: Array.from(time, (at, i) => ({ time: at, estimate: incidence[k]![i]!, standardError: standardError[k]![i]! }))
  }))
  return answer
}

function weibullAnswer(spans: Spans, confidence: number): WeibullAnswer | null {
  const fit = fitWeibull(spans)
  if (fit === null) return null
  const { shape, scale, shapeStandardError, scaleStandardError, logLikelihood } = fit
  const b10 = weibullQuantile(fit, 0.1, confidence)
  const median = weibullQuantile(fit, 0.5, confidence)
  const answer = { shape, scale, shapeStandardError, scaleStandardError, logLikelihood, b10, median }
  // A shape so small that a life overflows says nothing that could be sent.
  const numbers = [
    shape,
    scale,
    shapeStandardError,
    scaleStandardError,
    logLikelihood,
    ...Object.values(b10),
    ...Object.values(median)
  ]
  return numbers.every(Number.isFinite) ? answer : null
}

function rowsByGroup({ observations, groups, groupOf }: SurvivalRequest): Observation[][] {
  const rows = groups.map((): Observation[] => [])
  observations.forEach((row, i) => rows[groupOf[i]!]!.push(row))
  return rows
}

// Large times that differ by less than rounding are merged (README of the reference sets, convention 2), which can empty a row.
function refuseEmptyRows({ time, entry }: Columns): void {
  if (entry === null) return
  const i = time.findIndex((t, row) => entry[row]! > 0 && t <= entry[row]!)
  if (i >= 0) throw emptied(i, 'time')
}

function refuseEmptySpans({ entry, lower, upper }: Spans, { groupOf }: SurvivalRequest, g: number): void {
  const row = entry.findIndex((e, i) => e > 0 && (upper[i] === Infinity ? lower[i]! : upper[i]!) <= e)
  if (row < 0) return
  const indices = [...groupOf.keys()].filter((i) => groupOf[i] === g)
  throw emptied(indices[row]!, upper[row] === Infinity ? 'lower' : 'upper')
}

function emptied(index: number, field: string): DomainError {
  const message = 'This lies so little after the entry, for the size of the times, that the two are one.'
  return new DomainError('impossible', message, [{ path: `observations.${index}.${field}`, message }])
}
