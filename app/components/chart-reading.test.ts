import { describe, expect, it } from 'vitest'
import {
  dayWords,
  intervalText,
  nextStop,
  pointerStep,
  readAt,
  readingText,
  readingWords,
  stopsOf,
  type ReadPoint
} from './chart-reading'

const point = (time: number, survival: number, atRisk: number, more: Partial<ReadPoint> = {}): ReadPoint => ({
  time,
  survival,
  lower: survival - 0.06,
  upper: survival + 0.04,
  atRisk,
  ...more
})
/** S falls somewhere after day 100 and up to day 200, and surely on day 300. */
const curve = [
  point(50, 0.95, 40),
  point(100, 0.95, 30),
  point(200, 0.8, 25, { from: 100 }),
  point(300, 0.7, 20),
  point(400, 0.7, 4)
]

describe('readAt', () => {
  it('holds a level from its step to the next, and starts where nothing has failed', () => {
    expect(readAt(curve, 49)).toMatchObject({ kind: 'known', share: 1, atRisk: 40, lower: null })
    expect(readAt(curve, 50)).toMatchObject({ kind: 'known', share: 0.95, atRisk: 40 })
    expect(readAt(curve, 250)).toMatchObject({ kind: 'known', share: 0.8, atRisk: 20 })
  })
  it('says between what the share lies where it is not determined, with limits that hold both', () => {
    const open = readAt(curve, 150)
    expect(open).toEqual({ kind: 'open', low: 0.8, high: 0.95, lower: 0.8 - 0.06, upper: 0.95 + 0.04, atRisk: 25 })
    expect(readAt(curve, 100)).toMatchObject({ kind: 'known', share: 0.95 })
    expect(readAt(curve, 200)).toMatchObject({ kind: 'known', share: 0.8 })
  })
  it('claims nothing between two rows of which some were left out', () => {
    const thin = [point(10, 0.9, 30), point(14, 0.8, 26, { since: 10 }), point(15, 0.79, 25)]
    expect(readAt(thin, 12)).toMatchObject({ kind: 'open', low: 0.8, high: 0.9 })
    expect(readAt(thin, 14.5)).toMatchObject({ kind: 'known', share: 0.8 })
  })
  it('says nothing of fewer than five, nor past the end', () => {
    expect(readAt(curve, 301)).toEqual({ kind: 'few', atRisk: 4 })
    expect(readAt(curve, 401)).toEqual({ kind: 'ended' })
    expect(readAt([], 0)).toEqual({ kind: 'ended' })
  })
  it('of shares failed, starts at none', () =>
    expect(readAt([point(10, 0.1, 30)], 5, 0)).toMatchObject({ kind: 'known', share: 0 }))
})

describe('words', () => {
  it.each([
    [0, 'day 0'],
    [59, 'day 59'],
    [150, 'day 150 (about 5 months)'],
    [365, 'day 365 (1 year)'],
    [366, 'day 366 (1 year and 1 day)'],
    [777, 'day 777 (2 years and 47 days)']
  ])('day %d is %s', (day, words) => expect(dayWords(day)).toBe(words))
  it('rounds limits away from the claim, and never says 100', () => {
    expect(intervalText(0.889, 0.951)).toBe('88 to 96')
    expect(intervalText(0.88, 0.96)).toBe('88 to 96')
    expect(intervalText(0.9, 0.995)).toBe('90 to over 99')
  })
  it('give share, interval and those followed', () => {
    const said = (day: number) => Object.values(readingWords(readAt(curve, day))).join(' | ')
    expect(said(300)).toBe('70 % | 64 to 74 | 20 followed')
    expect(said(150)).toBe('between 80 and 95 % | 74 to 99 | 25 followed')
    expect(said(350)).toBe('too few to say |  | 4 followed')
    expect(said(500)).toBe('nobody followed so long |  | ')
  })
  it('state the bound of those followed on the day, not of the row before', () => {
    const bound = [point(10, 1, 8, { lower: 0.05 ** (1 / 8), upper: null }), point(400, 0.8, 5)]
    // 0.05^(1/5) = 0.549…; with the eight of day 10 it would be 0.687
    expect(readingWords(readAt(bound, 365))).toMatchObject({ share: '≥ 54 %', interval: 'none failed' })
    expect(readingWords(readAt(bound, 10)).share).toBe('≥ 68 %')
  })
  it('claim no more than the bound where nothing has failed', () => {
    const bound = [point(10, 1, 30, { lower: 0.905, upper: null }), point(40, 0.9, 20, { from: 20 })]
    expect(readingWords(readAt(bound, 10))).toMatchObject({ share: '≥ 90 %', interval: 'none failed' })
    expect(readingWords(readAt(bound, 30)).share).toBe('90 % or more')
    expect(readingText(bound, 30, 'day 30')).toBe('90 % or more at day 30')
    expect(readingText(curve, 150, 'day 150')).toBe('80 to 95 % at day 150')
  })
})

describe('the cursor', () => {
  it('stops at each fall, at both ends of what is not determined, at the day that is read anyway, first and last', () =>
    expect(stopsOf(curve, 400, 365, null)).toEqual([0, 50, 100, 200, 300, 365, 400]))
  it('of thinned curves stops where all are exact', () => {
    expect(stopsOf(curve, 23, 365, 5)).toEqual([0, 5, 10, 15, 20, 23])
    expect([pointerStep(2_000, 5, false), pointerStep(2_000, null, false), pointerStep(7, null, true)]).toEqual([5, 1, 0.01])
  })
  it('goes by keys from stop to stop, to the ends and by tenths', () => {
    const stops = [0, 10, 12, 40, 95, 100]
    const to = (key: string, at: number) => nextStop(key, at, stops)
    expect([to('ArrowRight', 10), to('ArrowRight', 11), to('ArrowRight', 100)]).toEqual([12, 12, 100])
    expect([to('ArrowLeft', 12), to('ArrowLeft', 11), to('ArrowLeft', 0)]).toEqual([10, 10, 0])
    expect([to('Home', 40), to('End', 40)]).toEqual([0, 100])
    expect([to('PageUp', 0), to('PageUp', 40), to('PageUp', 95)]).toEqual([10, 95, 100])
    expect([to('PageDown', 100), to('PageDown', 40), to('PageDown', 10)]).toEqual([95, 12, 0])
    expect(to('a', 40)).toBeNull()
  })
})
