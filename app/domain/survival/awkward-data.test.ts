import { readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import { expectClose } from '../../../tests/support/survival-reference'
import { computeSurvival } from './compute-survival'
import { parseSurvivalRequest } from './compute-survival.schema'
import type { GroupAnswer } from './survival-answer'

/*
 * The endpoint's answer to awkward data beside R's (tests/fixtures/awkward: survival 3.5-3 and npsurv 0.5-0 under R 4.2.2, whose README names the calls).
 */

type Numbers = (number | null)[]
type Case = {
  kind: 'right' | 'entry' | 'cause' | 'interval'
  request: { observations: { group?: string }[] }
  results: Record<string, Record<string, Numbers>>
}
const { cases } = JSON.parse(
  readFileSync(new URL('../../../tests/fixtures/awkward/cases.json', import.meta.url), 'utf8'),
  (_key, value: unknown) => (value === 'Inf' ? Infinity : value)
) as { cases: Case[] }

test('there are 30 of each kind', () => {
  for (const kind of ['right', 'entry', 'cause', 'interval']) expect(cases.filter((one) => one.kind === kind)).toHaveLength(30)
})

test.each(cases.map((one, i) => ({ i, ...one })))('$i: $kind', ({ kind, request, results }) => {
  const answer = computeSurvival(parseSurvivalRequest(request))
  expect(answer.method).toBe(kind === 'interval' ? 'turnbull' : 'kaplan-meier')
  let compared = 0
  for (const group of answer.groups) {
    const theirs = results[group.group ?? 'all']
    if (theirs === undefined) continue
    compared++
    if (kind === 'interval') {
      if (theirs.npmass) expectSameMasses(group, theirs)
    } else expectSameCurve(group, theirs)
    if (theirs.weibull) {
      const { shape, scale, shapeStandardError, scaleStandardError, logLikelihood } = group.weibull!
      expectClose([shape, scale], theirs.weibull.slice(0, 2), 1e-6, 'shape and scale')
      expectClose([shapeStandardError, scaleStandardError], theirs.weibull.slice(2, 4), 1e-5, 'their errors')
      expect(Math.abs(logLikelihood - theirs.weibull[4]!)).toBeLessThan(1e-8 * Math.max(1, Math.abs(logLikelihood)))
    }
  }
  expect(compared).toBeGreaterThan(0)
  const test = results['']?.logrank
  if (test === undefined) return
  if (answer.logRank === null) expect(test[0]).toBeLessThan(1e-12)
  else {
    expectClose([answer.logRank.chiSquare], [test[0]!], 1e-9, 'chi-square')
    if (test[1] !== null) expect(answer.logRank.degreesOfFreedom).toBe(test[1])
  }
})

function expectSameCurve({ curve, hazard, median, rmst, incidence }: GroupAnswer, theirs: Record<string, Numbers>): void {
  const column = (key: keyof GroupAnswer['curve'][number]) => curve.map((row) => row[key] as number | null)
  expectClose(column('time'), theirs.time!, 1e-12, 'time')
  expectClose(column('atRisk'), theirs.risk!, 0, 'at risk')
  expectClose(column('events'), theirs.event!, 0, 'events')
  expectClose(column('censored'), theirs.cens!, 0, 'censored')
  expectClose(column('survival'), theirs.surv!, 1e-12, 'S')
  const isZero = theirs.surv!.map((s) => s === 0)
  expectClose(
    column('standardError'),
    theirs.se!.map((se, i) => (isZero[i] ? null : se)),
    1e-10,
    'standard error'
  )
  // While S is 1 R has [1, 1] or nothing; the exact bound stands there.
  const told = curve.flatMap((row, i) => (row.survival === 1 ? [] : [i]))
  for (const side of ['lower', 'upper'] as const)
    expectClose(
      told.map((i) => curve[i]![side]),
      told.map((i) => theirs[side]![i]!),
      1e-9,
      side
    )
  expectClose(
    hazard.map(({ cumulative }) => cumulative),
    theirs.cumhaz!,
    1e-12,
    'hazard'
  )
  expectClose([median.estimate, median.lower, median.upper], theirs.median!, 1e-12, 'median')
  if (theirs.rmst) expectClose([rmst!.estimate, rmst!.standardError], theirs.rmst, 1e-10, 'restricted mean')
  for (const { cause, curve: rows } of incidence ?? []) {
    const [f, se] = [theirs[`cif:${cause}`], theirs[`secif:${cause}`]]
    expectClose(
      rows.map(({ estimate }) => estimate),
      f ?? rows.map(() => 0),
      1e-12,
      cause
    )
    expectClose(
      rows.map(({ standardError }) => standardError),
      se ?? rows.map(() => 0),
      1e-10,
      `error of ${cause}`
    )
  }
}

/** S just after each cell with mass; npsurv's own masses are good to about 1e-9. */
function expectSameMasses({ support }: GroupAnswer, { npright, npmass }: Record<string, Numbers>): void {
  let ours = 1
  for (const { upper, mass } of support!) {
    if (upper === null) continue
    ours -= mass
    let theirs = 1
    npright!.forEach((right, k) => {
      if (right! <= upper * (1 + 1e-12)) theirs -= npmass![k]!
    })
    if (mass > 1e-7) expect(Math.abs(ours - theirs), `S after ${upper}`).toBeLessThan(1e-6)
  }
}
