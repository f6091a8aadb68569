import { goneUnder, visibleRuns, type SurvivalPoint } from './chart-geometry'
import { percentText } from './percent-text'

/** What reading a curve needs of its points: shares working, or failed by a cause. */
export type ReadPoint = Omit<SurvivalPoint, 'censored'>

/**
 * What a curve says at a day. `open`: the share is not determined there and lies between `low` and `high`. `few`: under five are followed.
 * `ended`: past the last day that anything is known of.
 */
export type Reading =
  | { kind: 'known'; share: number; lower: number | null; upper: number | null; atRisk: number }
  | { kind: 'open'; low: number; high: number; lower: number | null; upper: number | null; atRisk: number }
  | { kind: 'few'; atRisk: number }
  | { kind: 'ended' }

/** Reads a step curve at a day; before the first point it stands at `start`. */
export function readAt(points: readonly ReadPoint[], day: number, start = 1): Reading {
  const at = points.findLastIndex((p) => p.time <= day)
  const [point, next] = [points[at], points[at + 1]]
  if (next === undefined && (point === undefined || point.time < day)) return { kind: 'ended' }
  const atRisk = point?.time === day ? point.atRisk : next!.atRisk
  if (atRisk < goneUnder) return { kind: 'few', atRisk }
  const share = point?.survival ?? start
  const upper = point?.upper ?? null
  // The exact bound of a curve without a failure is that of the units followed now, who may be fewer than at its last row.
  const lower =
    share >= 1 && point?.lower != null && point.atRisk > atRisk ? point.lower ** (point.atRisk / atRisk) : (point?.lower ?? null)
  const begins = next?.from ?? next?.since
  if (begins === undefined || begins >= day) return { kind: 'known', share, lower, upper, atRisk }
  const [low, high] = share < next!.survival ? [share, next!.survival] : [next!.survival, share]
  return share < next!.survival
    ? { kind: 'open', low, high, lower, upper: next!.upper, atRisk }
    : { kind: 'open', low, high, lower: next!.lower, upper: upper ?? (share === 1 ? 1 : null), atRisk }
}

const count = (n: number, one: string) => `${n} ${n === 1 ? one : `${one}s`}`

/** "day 412 (1 year and 47 days)"; a year is 365 days, as where figures after one year are given. */
export function dayWords(day: number): string {
  const rounded = Math.round(day)
  if (rounded < 60) return `day ${rounded}`
  if (rounded < 365) return `day ${rounded} (about ${count(Math.round(rounded / 30.4375), 'month')})`
  const [years, days] = [Math.floor(rounded / 365), rounded % 365]
  return `day ${rounded} (${count(years, 'year')}${days === 0 ? '' : ` and ${count(days, 'day')}`})`
}

/** A time in anybody's own unit, at most four figures that count. */
export const plainWords = (time: number, unit: string): string => `${Number(time.toPrecision(4))} ${unit}`

/** "88 to 96": whole percent rounded away from the claim, never "100". */
export function intervalText(lower: number, upper: number): string {
  const up = Math.ceil(upper * 100 - 1e-9)
  return `${Math.floor(lower * 100 + 1e-9)} to ${up >= 100 ? 'over 99' : up}`
}

/** The share, its interval and those followed, as three short texts; the last two may be empty. */
export function readingWords(reading: Reading): { share: string; interval: string; followed: string } {
  if (reading.kind === 'ended') return { share: 'nobody followed so long', interval: '', followed: '' }
  const followed = `${reading.atRisk} followed`
  if (reading.kind === 'few') return { share: 'too few to say', interval: '', followed }
  const { lower, upper } = reading
  const interval = lower === null || upper === null ? '' : intervalText(lower, upper)
  if (reading.kind === 'open') return { share: openText(reading, 'between ', ' and '), interval, followed }
  if (reading.share >= 1) {
    const text = percentText(1, lower)
    return { share: lower === null ? text : `${text} %`, interval: lower === null ? '' : 'none failed', followed }
  }
  return { share: `${percentText(reading.share, lower)} %`, interval, followed }
}

function openText({ low, high }: { low: number; high: number }, before: string, between: string): string {
  const [from, to] = [percentText(low, null), percentText(high, null)]
  if (high >= 1) return `${from} % or more`
  return from === to ? `${from} %` : `${before}${from}${between}${to} %`
}

/** "95 % at 1 year", or why there is no such figure. */
export function readingText(points: readonly ReadPoint[], days: number, when: string): string {
  const reading = readAt(points, days)
  if (reading.kind === 'open') return `${openText(reading, '', ' to ')} at ${when}`
  if (reading.kind !== 'known') return `too few at ${when}`
  const text = percentText(reading.share, reading.lower)
  return text === 'none failed' ? `none failed by ${when}` : `${text} % at ${when}`
}

/** The last day that a curve is drawn to; 0 when nothing is. */
export const drawnTo = (points: readonly ReadPoint[]): number => visibleRuns(points).at(-1)?.steps.at(-1)?.time ?? 0

/**
 * The days at which a cursor stops on its way along a curve: the first, each step, both ends of each stretch where it is not determined, the day that is read
 * anyway, the last. Of thinned curves, the multiples of their grain.
 */
export function stopsOf(points: readonly ReadPoint[], last: number, reading: number, grain: number | null, start = 1): number[] {
  const stops = new Set([0, last])
  if (reading <= last) stops.add(reading)
  if (grain !== null) for (let k = 1; k * grain < last; k++) stops.add(k * grain)
  else {
    let level = start
    for (const { time, from, survival } of points) {
      if (time > last) break
      if (survival !== level) {
        stops.add(time)
        if (from !== undefined) stops.add(from)
      }
      level = survival
    }
  }
  return [...stops].sort((a, b) => a - b)
}

/** How finely a pointer reads: whole days, a thinned curve's grain, or a power of ten of anybody's own unit. */
export const pointerStep = (last: number, grain: number | null, isPlain: boolean): number =>
  grain ?? (isPlain && last > 0 ? 10 ** Math.floor(Math.log10(last / 400)) : 1)

/** Where a key takes the cursor; null for a key that is none of its. A tenth counts along the time that is drawn. */
export function nextStop(key: string, at: number, stops: readonly number[]): number | null {
  const last = stops.at(-1)!
  const first = stops[0]!
  const tenth = (last - first) / 10
  const nearest = (day: number) => stops.reduce((best, stop) => (Math.abs(stop - day) < Math.abs(best - day) ? stop : best))
  switch (key) {
    case 'ArrowLeft':
      return stops.findLast((stop) => stop < at) ?? first
    case 'ArrowRight':
      return stops.find((stop) => stop > at) ?? last
    case 'Home':
      return first
    case 'End':
      return last
    case 'PageUp':
      return Math.max(nearest(Math.min(last, at + tenth)), stops.find((stop) => stop > at) ?? last)
    case 'PageDown':
      return Math.min(nearest(Math.max(first, at - tenth)), stops.findLast((stop) => stop < at) ?? first)
    default:
      return null
  }
}
