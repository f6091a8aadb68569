import { describe, expect, it } from 'vitest'
import type { FigureAt } from './figures.types'
import { plainSentence } from './plain-sentence'
import { readFilters } from './reliability-filters'

const at = (change: Partial<FigureAt>): FigureAt => ({
  ...{ time: 365, survival: 0.92, standardError: 0.01, atRisk: 120, lower: 0.894, upper: 0.9401, bound: null, open: null },
  ...change
})
const said = (change: Partial<FigureAt>, { n = 212, events = 17, query = '' } = {}) =>
  plainSentence({ n, events, atOneYear: at(change), filters: readFilters(new URLSearchParams(query), '2026-12-01').filters })
const none = (n: number): Partial<FigureAt> => ({
  ...{ survival: 1, lower: Math.pow(0.05, 1 / n), upper: 1, bound: 'exact-one-sided', atRisk: n }
})

describe('plainSentence', () => {
  it('says the share with its interval, rounded outwards', () => {
    expect(said({})).toBe(
      'Of 212 units followed, 17 have failed. About 92 of 100 still work after a year (95\u00a0% interval 89 to 95).'
    )
  })
  it('says the exact lower bound when none failed, never 100', () => {
    // 0.05^(1/30) = 0.9049…
    expect(said(none(30), { n: 40, events: 0 })).toBe(
      'Of 40 units followed, none is known to have failed. With 30 still followed, at least 90 of 100 work after a year (exact lower bound, 95\u00a0% confidence).'
    )
  })
  it('says when too few were followed', () => {
    expect(said({ atRisk: 4 })).toContain('Too few have been followed for a year (4)')
    expect(said({ survival: null, lower: null, upper: null, atRisk: 0 })).toContain('Too few')
    expect(said({}, { n: 0, events: 0 })).toBe('No unit has been followed yet, so nothing can be said.')
  })
  it('says that none lasted only where all are known to have failed', () => {
    const ended: Partial<FigureAt> = { survival: 0, lower: null, upper: null, atRisk: 0 }
    expect(said(ended, { n: 1, events: 1 })).toBe('Of 1 unit followed, 1 has failed. None of them lasted a year.')
    expect(said(ended, { n: 9, events: 1 })).toBe(
      'Of 9 units followed, 1 has failed. Too few have been followed for a year (0) to say how many last that long.'
    )
  })
  it('says of one cause what becomes of the others', () => {
    expect(said({}, { events: 9, query: 'cause=board' })).toBe(
      'Of 212 units followed, 9 have failed by the board or for no known reason. About 92 of 100 get through a year without that (95\u00a0% interval 89 to 95). Units that failed otherwise left the count when last known to run.'
    )
    expect(said(none(120), { events: 0, query: 'cause=accident' })).toBe(
      'Of 212 units followed, none is known to have failed by an accident. With 120 still followed, at least 97 of 100 get through a year without that (exact lower bound, 95\u00a0% confidence). Units that failed otherwise left the count when last known to run.'
    )
  })
  it('says where it is not known when they failed, with an interval that holds both ends', () => {
    const open = { from: 340, to: 402, before: 0.95 }
    expect(said({ open, upper: 0.97 })).toBe(
      'Of 212 units followed, 17 have failed. About 92 of 100 or more still work after a year (95\u00a0% interval 89 to 97): between day 340 and day 402 it is not known when some failed.'
    )
    const nobodyLeft = { from: 10, to: 800, before: 1 }
    expect(said({ survival: null, lower: null, upper: null, atRisk: 6, open: nobodyLeft }, { n: 6, events: 6 })).toBe(
      'Of 6 units followed, 6 have failed. How many work after a year cannot be said: between day 10 and day 800 it is not known when they failed.'
    )
  })
  it('names what the heading does not: the batch, the fault, the method, since when', () => {
    expect(said({}, { n: 43, query: 'batch=1.1.1/2024-09&since=2025-01-01' })).toMatch(
      /^Of 43 units of batch 2024-09 followed \(fitted on 2025-01-01 or later\), 17 have failed\. /
    )
    expect(said({}, { query: 'evidence=measured&method=hot-air&first-power=set-aside' })).toMatch(
      /^Of 212 units that worked at first power \(fault measured, fitted with hot air\), 17 have failed\. /
    )
  })
  it('claims no limit that there is none of', () => {
    const text = said({ survival: 1, lower: null, upper: null })
    expect(text).toContain('what its limits are cannot be said')
    expect(text).not.toMatch(/100 of 100|at least/)
  })
  it('never writes 100 for an estimate or a limit', () => {
    for (const survival of [0.9951, 0.9999])
      expect(said({ survival, lower: 0.98, upper: 0.99999 })).toContain(
        'Over 99 of 100 still work after a year (95\u00a0% interval 98 to over 99)'
      )
  })
})
