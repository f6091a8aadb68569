import { expect, test } from 'vitest'
import type { Observation } from './observation'
import { spansOf } from './spans'
import { weibullLikelihood } from './weibull-likelihood'

const rows: [string, Observation][] = [
  ['exact', { time: 7, event: 1, weight: 2 }],
  ['right-censored', { time: 9, event: 0 }],
  ['right-censored at 0', { time: 0, event: 0 }],
  ['interval', { lower: 3, upper: 11 }],
  ['narrow interval', { lower: 5, upper: 5.001 }],
  ['left-censored', { lower: 0, upper: 6 }],
  ['far interval', { lower: 400, upper: 900 }],
  ['delayed entry', { entry: 4, time: 8, event: 1 }],
  ['delayed interval', { entry: 2, lower: 4, upper: 8, weight: 3 }]
]

const at = (row: Observation, mu: number, tau: number) => weibullLikelihood(spansOf([row]), mu, tau)
const [mu, tau] = [Math.log(12), Math.log(0.6)]

test('values from the distribution function', () => {
  const survival = (t: number) => Math.exp(-((t / 12) ** (1 / 0.6)))
  const density = (t: number) => (1 / 0.6 / 12) * (t / 12) ** (1 / 0.6 - 1) * survival(t)
  const value = (row: Observation) => at(row, mu, tau).value
  expect(value({ time: 7, event: 1 })).toBeCloseTo(Math.log(density(7)), 13)
  expect(value({ time: 9, event: 0 })).toBeCloseTo(Math.log(survival(9)), 13)
  expect(value({ lower: 3, upper: 11 })).toBeCloseTo(Math.log(survival(3) - survival(11)), 13)
  expect(value({ lower: 0, upper: 6 })).toBeCloseTo(Math.log(1 - survival(6)), 13)
  expect(value({ entry: 4, time: 8, event: 1 })).toBeCloseTo(Math.log(density(8) / survival(4)), 13)
  expect(value({ entry: 2, lower: 4, upper: 8 })).toBeCloseTo(Math.log((survival(4) - survival(8)) / survival(2)), 13)
})

test.each(rows)('gradient and information are the differences of value and gradient: %s', (_what, row) => {
  const h = 1e-5
  const { gradient, information } = at(row, mu, tau)
  const size = 1 + Math.abs(gradient[0]) + Math.abs(gradient[1]) + Math.abs(information.mu) + Math.abs(information.tau)
  const slope = (of: (mu: number, tau: number) => number, dMu: number, dTau: number) =>
    (of(mu + dMu, tau + dTau) - of(mu - dMu, tau - dTau)) / (2 * h)
  const value = (m: number, t: number) => at(row, m, t).value
  const part = (k: 0 | 1) => (m: number, t: number) => at(row, m, t).gradient[k]
  const pairs = [
    [gradient[0], slope(value, h, 0)],
    [gradient[1], slope(value, 0, h)],
    [-information.mu, slope(part(0), h, 0)],
    [-information.both, slope(part(0), 0, h)],
    [-information.both, slope(part(1), h, 0)],
    [-information.tau, slope(part(1), 0, h)]
  ]
  for (const [ours, difference] of pairs) expect(Math.abs(ours! - difference!)).toBeLessThan(1e-7 * size)
})
