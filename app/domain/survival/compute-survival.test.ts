import { describe, expect, test } from 'vitest'
import { DomainError } from '~/lib/domain-error'
import { expectClose, reference } from '../../../tests/support/survival-reference'
import { computeSurvival } from './compute-survival'
import { parseSurvivalRequest } from './compute-survival.schema'
import type { SurvivalAnswer } from './survival-answer'

const answerOf = (input: object): SurvivalAnswer => computeSurvival(parseSurvivalRequest(input))

/** No number that JSON cannot carry. */
function expectFinite(value: unknown): void {
  expect(JSON.parse(JSON.stringify(value))).toEqual(value)
}

describe('worked by hand', () => {
  test('the shape of the contract, field by field', () => {
    const answer = answerOf({
      observations: [
        { time: 2, event: 1 },
        { time: 4, event: 0 }
      ],
      tau: 4,
      confidence: 0.75
    })
    const [group] = answer.groups
    expect(answer).toMatchObject({ method: 'kaplan-meier', logRank: null })
    expect(Object.keys(group!)).toEqual(['group', 'n', 'events', 'curve', 'median', 'rmst', 'hazard', 'weibull'])
    expect(group).toMatchObject({
      group: null,
      n: 2,
      events: 1,
      rmst: { tau: 4, estimate: 3, standardError: Math.sqrt(0.5) },
      hazard: [
        { time: 2, cumulative: 0.5 },
        { time: 4, cumulative: 0.5 }
      ],
      median: { estimate: 2, lower: 2, upper: null }
    })
    expect(group!.curve[0]).toMatchObject({ time: 2, atRisk: 2, events: 1, censored: 0, survival: 0.5, bound: null })
    expect(Object.keys(group!.curve[0]!)).toEqual([
      'time',
      'atRisk',
      'events',
      'censored',
      'survival',
      'standardError',
      'lower',
      'upper',
      'bound'
    ])
  })

  test('no failure at all: the exact bound, nothing else', () => {
    const [group] = answerOf({
      observations: [
        { time: 3, event: 0 },
        { time: 3, event: 0 }
      ],
      confidence: 0.75,
      tau: 5
    }).groups
    expect(group).toMatchObject({
      events: 0,
      curve: [{ survival: 1, standardError: 0, lower: 0.5, upper: 1, bound: 'exact-one-sided' }],
      median: { estimate: null, lower: null, upper: null },
      rmst: { tau: 5, estimate: null, standardError: null },
      weibull: null
    })
    expectFinite(group)
  })

  test('causes give incidences, one for each cause in every group', () => {
    const answer = answerOf({
      observations: [
        { time: 1, event: 'board', group: 'A' },
        { time: 2, event: 0, group: 'A' },
        { time: 3, event: 'fitting', group: 'B' }
      ]
    })
    expect(
      answer.groups.map(({ incidence }) => incidence!.map(({ cause, curve }) => [cause, curve.map(({ estimate }) => estimate)]))
    ).toEqual([
      [
        ['board', [0.5, 0.5]],
        ['fitting', [0, 0]]
      ],
      [
        ['board', [0]],
        ['fitting', [1]]
      ]
    ])
    expectFinite(answer)
  })

  test('any interval: Turnbull for all groups, no log-rank', () => {
    const answer = answerOf({
      observations: [
        { lower: 0, upper: 2, weight: 3, group: 'A' },
        { lower: 2, upper: 4, weight: 5, group: 'A' },
        { lower: 4, upper: null, weight: 2, group: 'A' },
        { time: 3, event: 1, group: 'B' }
      ],
      tau: 3
    })
    expect(answer).toMatchObject({ method: 'turnbull', logRank: null })
    const [a, b] = answer.groups
    expect(Object.keys(a!)).toEqual(['group', 'n', 'events', 'curve', 'median', 'rmst', 'hazard', 'weibull', 'support'])
    expect(a!.support!.map(({ lower, upper }) => [lower, upper])).toEqual([
      [0, 2],
      [2, 4],
      [4, null]
    ])
    expectClose(
      a!.support!.map(({ mass }) => mass),
      [0.3, 0.5, 0.2],
      1e-12,
      'mass'
    )
    expect(a!.curve.map(({ time, atRisk, events, censored }) => [time, atRisk, events, censored])).toEqual([
      [2, 10, null, null],
      [4, 7, null, null]
    ])
    expectClose(
      a!.curve.map(({ survival }) => survival),
      [0.7, 0.2],
      1e-12,
      'survival'
    )
    expectClose(
      a!.hazard.map(({ cumulative }) => cumulative),
      [0.3, 0.3 + 5 / 7],
      1e-12,
      'hazard'
    )
    expect(a!.median.estimate).toBe(4)
    expect(a!.rmst).toEqual({ tau: 3, estimate: null, standardError: null })
    expect(b).toMatchObject({ n: 1, events: 1, support: [{ lower: 3, upper: 3, mass: 1 }] })
    expectFinite(answer)
  })

  test('the seed settles the limits of a Turnbull curve', () => {
    const observations = Array.from({ length: 30 }, (_, i) => ({ lower: i, upper: i % 3 ? i + 9 : null }))
    const lower = (seed: number) => answerOf({ observations, seed }).groups[0]!.curve.map((row) => row.lower)
    expect(lower(1)).toEqual(lower(1))
    expect(lower(2)).not.toEqual(lower(1))
  })

  test('limits of a Turnbull curve do not stop at many units', () => {
    const counts = (weight: number) => [
      { lower: 0, upper: 5, weight },
      { lower: 5, upper: null, weight }
    ]
    const limitsOf = (weight: number) => answerOf({ observations: counts(weight) }).groups[0]!.curve[0]!
    for (const weight of [10, 4_000, 150_000]) {
      const { survival, lower, upper } = limitsOf(weight)
      expect(survival).toBeCloseTo(0.5, 10)
      expect(lower! < survival && survival < upper!).toBe(true)
      expect((upper! - lower!) * Math.sqrt(2 * weight)).toBeCloseTo(1.96, 0)
    }
  })

  test.each([
    [{ time: 1e9 + 1, entry: 1e9, event: 0 }, 'observations.1.time'],
    [{ lower: 1e9, upper: 1e9 + 1, entry: 1e9 }, 'observations.1.upper']
  ])('times that are one for their size are refused: %j', (row, path) => {
    const observations = [{ time: 5e9, event: 1 }, row]
    expect(() => answerOf({ observations })).toThrow(
      expect.objectContaining({ kind: 'impossible', errors: [expect.objectContaining({ path })] })
    )
    expect(() => answerOf({ observations })).toThrow(DomainError)
  })
})

describe('published data sets through the whole request (tests/fixtures/survival)', () => {
  test('remission of leukaemia: two groups with their test (1e-12)', () => {
    const { data, results } = reference('right-remission42')
    const observations = data.time.map((time: number, i: number) => ({ time, event: data.event[i], group: data.group[i] }))
    const answer = answerOf({ observations, tau: results.rmst[0].tau })
    answer.groups.forEach((group, g) => {
      const expected = results.kaplan_meier.by_group[g]
      expect(group).toMatchObject({ group: expected.group, n: expected.n, events: expected.events })
      expectClose(
        group.curve.map(({ survival }) => survival),
        expected.rows.surv,
        1e-12,
        'survival'
      )
      expectClose(
        group.curve.map(({ standardError }) => standardError && standardError ** 2),
        expected.rows.var_surv,
        1e-12,
        'variance'
      )
      expectClose(
        group.curve.map(({ lower }) => lower),
        expected.rows.ci['log-log'].lower,
        1e-9,
        'lower'
      )
      expectClose(
        group.hazard.map(({ cumulative }) => cumulative),
        expected.nelson_aalen.cumhaz,
        1e-12,
        'hazard'
      )
      expect(group.median.estimate).toBe(expected.median_print.value)
      expectClose(
        [group.rmst!.estimate, group.rmst!.standardError],
        [results.rmst[0].rmst[g], results.rmst[0].se[g]],
        1e-12,
        'mean'
      )
      const weibull = results.weibull[expected.group]
      expectClose([group.weibull!.shape, group.weibull!.scale], [weibull.shape, weibull.scale_eta], 1e-8, 'Weibull')
    })
    const { chisq, df, p } = results.log_rank.unstratified
    expectClose(
      [answer.logRank!.chiSquare, answer.logRank!.degreesOfFreedom, answer.logRank!.p],
      [chisq, df, p],
      1e-12,
      'log-rank'
    )
    expectFinite(answer)
  })

  test('rows whose entry is their exit are refused with their index', () => {
    const { data, results } = reference('truncated-retirement462')
    const observations = data.time.map((time: number, i: number) => ({ time, event: data.event[i], entry: data.entry[i] }))
    const paths = results.excluded_rows_entry_not_before_exit.map((row: number) => `observations.${row - 1}.time`)
    expect(() => answerOf({ observations })).toThrow(
      expect.objectContaining({ kind: 'impossible', errors: paths.map((path: string) => expect.objectContaining({ path })) })
    )
  })

  test('cosmetic deterioration: Turnbull (1e-8)', () => {
    const { data, results } = reference('interval-cosmesis94')
    const observations = data.left.flatMap((lower: number, i: number) =>
      data.group[i] === 'radiotherapy' ? [{ lower: lower ?? 0, upper: data.right[i] }] : []
    )
    const [group] = answerOf({ observations }).groups
    const { support } = results.turnbull.radiotherapy
    expectClose(
      group!.support!.map(({ mass }) => mass),
      support.mass,
      1e-8,
      'mass'
    )
    expect(group!.support!.map(({ upper }) => upper)).toEqual(
      support.right.map((right: number) => (right === Infinity ? null : right))
    )
    group!.curve.forEach(({ lower, survival, upper }) => expect(lower! <= survival && survival <= upper!).toBe(true))
    expectFinite(group)
  })
})
