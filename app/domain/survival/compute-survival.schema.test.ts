import { describe, expect, test } from 'vitest'
import { DomainError } from '~/lib/domain-error'
import { hasIntervals, maxRows, parseSurvivalRequest, parseSurvivalText } from './compute-survival.schema'

const row = { time: 5, event: 1 }

function refusal(input: unknown): { kind: string; paths: string[]; message: string } {
  try {
    parseSurvivalRequest(input)
  } catch (error) {
    if (error instanceof DomainError)
      return { kind: error.kind, paths: error.errors.map(({ path }) => path), message: error.message }
    throw error
  }
  return { kind: 'accepted', paths: [], message: '' }
}

describe('accepted', () => {
  test('the least there can be, with its defaults', () => {
    expect(parseSurvivalRequest({ observations: [row] })).toEqual({
      observations: [{ time: 5, event: 1, entry: undefined, weight: undefined }],
      groups: [null],
      groupOf: Uint16Array.of(0),
      timeUnit: 'day',
      confidence: 0.95,
      interval: 'log-log',
      tau: null,
      seed: 1
    })
  })

  test('the contract in full; groups are sorted by name', () => {
    const request = parseSurvivalRequest({
      observations: [
        { time: 6, event: 'board', entry: 0, group: 'B', weight: 3 },
        { time: 6, event: 0, group: 'A' }
      ],
      timeUnit: 'week',
      confidence: 0.9,
      interval: 'plain',
      tau: 365,
      seed: 7
    })
    expect(request).toMatchObject({
      groups: ['A', 'B'],
      groupOf: Uint16Array.of(1, 0),
      confidence: 0.9,
      interval: 'plain',
      tau: 365,
      seed: 7
    })
    expect(hasIntervals(request)).toBe(false)
  })

  test('intervals, open and closed', () => {
    const request = parseSurvivalRequest({ observations: [{ lower: 8, upper: 12 }, { lower: 8, upper: null }, row] })
    expect(hasIntervals(request)).toBe(true)
    expect(request.observations.slice(0, 2)).toMatchObject([
      { lower: 8, upper: 12 },
      { lower: 8, upper: null }
    ])
  })
})

describe('refused with its path', () => {
  test.each<[string, unknown, string, string]>([
    ['no object', [], 'invalid', ''],
    ['null', null, 'invalid', ''],
    ['no observations', {}, 'invalid', 'observations'],
    ['observations of another kind', { observations: 'x' }, 'invalid', 'observations'],
    ['none', { observations: [] }, 'invalid', 'observations'],
    ['a row that is no object', { observations: [row, 7] }, 'invalid', 'observations.1'],
    ['a time in words', { observations: [row, row, row, { time: '5', event: 1 }] }, 'invalid', 'observations.3.time'],
    ['a negative time', { observations: [row, { time: -5, event: 1 }] }, 'invalid', 'observations.1.time'],
    ['no event', { observations: [{ time: 5 }] }, 'invalid', 'observations.0.event'],
    ['no time', { observations: [{ event: 1 }] }, 'invalid', 'observations.0.time'],
    ['event 2', { observations: [{ time: 5, event: 2 }] }, 'invalid', 'observations.0.event'],
    ['event true', { observations: [{ time: 5, event: true }] }, 'invalid', 'observations.0.event'],
    ['a misspelt field', { observations: [{ ...row, entyr: 3 }] }, 'invalid', 'observations.0'],
    ['a time and an interval', { observations: [{ ...row, lower: 1, upper: 2 }] }, 'invalid', 'observations.0.time'],
    ['half an interval', { observations: [{ lower: 1 }] }, 'invalid', 'observations.0.upper'],
    ['a group in figures', { observations: [{ ...row, group: 4 }] }, 'invalid', 'observations.0.group'],
    ['a row without its group', { observations: [{ ...row, group: 'A' }, row] }, 'invalid', 'observations.1.group'],
    ['half a unit', { observations: [{ ...row, weight: 0.5 }] }, 'invalid', 'observations.0.weight'],
    ['entry = exit', { observations: [row, { ...row, entry: 5 }] }, 'impossible', 'observations.1.time'],
    ['an interval backwards', { observations: [{ lower: 5, upper: 2 }] }, 'impossible', 'observations.0.upper'],
    ['confidence in percent', { observations: [row], confidence: 95 }, 'invalid', 'confidence'],
    ['another interval', { observations: [row], interval: 'logit' }, 'invalid', 'interval'],
    ['tau 0', { observations: [row], tau: 0 }, 'invalid', 'tau'],
    ['a broken seed', { observations: [row], seed: 1.5 }, 'invalid', 'seed'],
    ['an unknown option', { observations: [row], alpha: 0.05 }, 'invalid', ''],
    ['too many rows', { observations: new Array(maxRows + 1).fill(row) }, 'too-large', 'observations'],
    ['too many units', { observations: [{ ...row, weight: 2e9 }] }, 'too-large', 'observations'],
    [
      'too many groups',
      { observations: Array.from({ length: 101 }, (_, i) => ({ ...row, group: `g${i}` })) },
      'invalid',
      'observations'
    ],
    [
      'too many causes',
      { observations: Array.from({ length: 51 }, (_, i) => ({ time: 1, event: `c${i}` })) },
      'invalid',
      'observations'
    ]
  ])('%s', (_what, input, kind, path) => {
    expect(refusal(input)).toMatchObject({ kind, paths: [path] })
  })

  test('several mistakes: all are named, and one wrong value makes the whole invalid', () => {
    const input = {
      observations: [
        { time: 5, entry: 5, event: 1 },
        { time: -1, event: 0 }
      ]
    }
    expect(refusal(input)).toEqual({
      kind: 'invalid',
      paths: ['observations.0.time', 'observations.1.time'],
      message: expect.stringContaining('2 values')
    })
  })

  test('a file full of mistakes gives at most a hundred messages', () => {
    for (const bad of [{ time: 5 }, { time: -1, event: 0 }, { time: 'x', event: 0 }])
      expect(refusal({ observations: new Array(5000).fill(bad) }).paths.length).toBeLessThanOrEqual(100)
  })

  test('text that is no JSON', () => {
    expect(() => parseSurvivalText('time,event\n5,1')).toThrow(/not JSON/)
  })
})
