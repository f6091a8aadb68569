/**
 * The geometry of Fettle's charts: pure arithmetic from data to places on the drawing. Time is in days, survival a share 0 to 1,
 * places are pixels of the drawing with y downwards.
 */

export type SurvivalPoint = {
  /** Days since fitting. */
  time: number
  /** S is not determined after this day and before `time`: the fall lies somewhere between. */
  from?: number
  /** Points between this day and `time` were left out; the line is drawn at this point's level from there on. */
  since?: number
  survival: number
  /** 95 % limits; null where there is none. */
  lower: number | null
  upper: number | null
  /** Units at risk just before `time`. */
  atRisk: number
  /** Working units whose last word came at `time`. */
  censored: number
}

/** Under this many at risk a curve is drawn faint, and under the other it is not drawn (LOOK, "Survival figure"; DESIGN, rule 6). */
export const faintUnder = 10
export const goneUnder = 5

export type Step = Pick<SurvivalPoint, 'time' | 'from' | 'since' | 'survival' | 'lower' | 'upper'>
export type Run = { weight: 'full' | 'faint'; steps: Step[] }

/**
 * Cuts a curve into the runs that may be drawn. The stretch that ends at a point is followed by that point's risk set; late entries can
 * make the set grow again, so runs may alternate. The first step of a run is the level it starts from; the curve starts at `start`.
 */
export function visibleRuns(points: readonly Omit<SurvivalPoint, 'censored'>[], start = 1): Run[] {
  const runs: Run[] = []
  let current = null as Run | null
  let level: Step = { time: 0, survival: start, lower: null, upper: null }
  for (const { time, from, since, survival, lower, upper, atRisk } of points) {
    const step: Step = { time, from, since, survival, lower, upper }
    const weight = atRisk >= faintUnder ? 'full' : atRisk >= goneUnder ? 'faint' : null
    // a fall on day 0 lies on the axis: the curve starts below it
    if (time > 0) {
      if (weight === null) current = null
      else {
        if (current?.weight !== weight) {
          current = { weight, steps: [level] }
          runs.push(current)
        }
        current.steps.push(step)
      }
    }
    level = step
  }
  return runs
}

/** The value of a step curve at a time: that of the last point at or before it, 1 before the first. Null after the last point. */
export function pointAt(points: readonly SurvivalPoint[], time: number): SurvivalPoint | null {
  const last = points.at(-1)
  if (!last || time > last.time) return null
  let found: SurvivalPoint = { time: 0, survival: 1, lower: null, upper: null, atRisk: points[0]!.atRisk, censored: 0 }
  for (const point of points) {
    if (point.time > time) break
    found = point
  }
  return found
}

/** Units at risk at a time: the risk set of the next point; none after the last. */
export const atRiskAt = (points: readonly { time: number; atRisk: number }[], time: number): number =>
  points.find((point) => point.time >= time)?.atRisk ?? 0

export type Scale = (value: number) => number

/** Maps [from, to] linearly on [start, end]. */
export const linear =
  (from: number, to: number, start: number, end: number): Scale =>
  (value) =>
    start + ((value - from) / (to - from)) * (end - start)

const px = (n: number) => String(Math.round(n * 10) / 10)

/** The places at which a step line turns: its ends, and wherever a level differs from the one before as drawn. */
const turns = <Place extends readonly [number, ...number[]]>(places: readonly Place[]): Place[] =>
  places.filter(
    (place, i) => i === 0 || i === places.length - 1 || place.some((level, k) => k > 0 && px(level) !== px(places[i - 1]![k]!))
  )

/** A line that runs level and then falls (or rises): `M x y H x V y …`. */
export function stepPath(places: readonly (readonly [x: number, y: number])[]): string {
  return turns(places)
    .map(([x, y], i) => (i === 0 ? `M${px(x)} ${px(y)}` : `H${px(x)}V${px(y)}`))
    .join('')
}

/** The closed area between two step lines that share their x. */
export function stepArea(places: readonly (readonly [x: number, high: number, low: number])[]): string {
  if (places.length < 2) return ''
  const kept = turns(places)
  // walking back, the level left of a place is that of the place before it
  const back = kept.slice(0, -1).map(([x, , low]) => `V${px(low)}H${px(x)}`)
  return `${stepPath(kept.map(([x, high]) => [x, high]))}${back.reverse().join('')}Z`
}

/** Where the censor ticks stand: a grid of `gap` pixels, one tick a place, so that a crowd stays readable. */
export function censorTicks(points: readonly SurvivalPoint[], x: Scale, y: Scale, gap = 4): { x: number; y: number }[] {
  const ticks = new Map<number, number>()
  for (const { time, survival, censored, atRisk } of points) {
    if (censored > 0 && atRisk >= goneUnder) ticks.set(Math.round(x(time) / gap) * gap, y(survival))
  }
  return [...ticks].map(([at, level]) => ({ x: at, y: level }))
}

/**
 * Moves labels apart until none is nearer than `gap` to the next, with the least sum of squared moves (pool adjacent violators), and
 * keeps them within [low, high] where there is room. The answer is in the order of the input.
 */
export function spreadLabels(wanted: readonly number[], gap: number, low: number, high: number): number[] {
  const order = wanted.map((_, i) => i).sort((a, b) => wanted[a]! - wanted[b]! || a - b)
  const pools: { sum: number; count: number }[] = []
  order.forEach((index, rank) => {
    pools.push({ sum: wanted[index]! - rank * gap, count: 1 })
    while (pools.length > 1) {
      const [before, last] = [pools.at(-2)!, pools.at(-1)!]
      if (before.sum / before.count <= last.sum / last.count) break
      pools.splice(-2, 2, { sum: before.sum + last.sum, count: before.count + last.count })
    }
  })
  const roof = Math.max(low, high - (order.length - 1) * gap)
  const levels = pools.flatMap(({ sum, count }) =>
    Array.from({ length: count }, () => Math.min(roof, Math.max(low, sum / count)))
  )
  const places: number[] = []
  order.forEach((index, rank) => (places[index] = levels[rank]! + rank * gap))
  return places
}

/**
 * Where the percent axis starts: the ten at least 5 below the lowest value drawn, never over 90. Below 30 it starts at 0, uncut,
 * for then little is won by cutting.
 */
export function axisFloor(lowest: number): number {
  const floor = Math.min(90, Math.floor((lowest * 100 - 5) / 10 + 1e-9) * 10)
  return floor < 30 ? 0 : floor
}

/** Ticks of a percent axis from its floor to 100. */
export function percentTicks(floor: number, isNarrow = false): number[] {
  const span = 100 - floor
  const step = span <= 30 && !isNarrow ? 5 : span <= 50 ? 10 : 20
  const ticks: number[] = []
  for (let tick = 100; tick >= floor; tick -= step) ticks.unshift(tick)
  if (ticks[0] !== floor) ticks.unshift(floor)
  return ticks
}

/** Round numbers from 0 to at least `max`, about `count` steps: 1, 2 or 5 times a power of ten. */
export function roundTicks(max: number, count = 4): number[] {
  const raw = max / count
  const power = 10 ** Math.floor(Math.log10(raw))
  const step = [1, 2, 5, 10].map((n) => n * power).find((n) => n >= raw - 1e-12)!
  return Array.from({ length: Math.ceil(max / step - 1e-9) + 1 }, (_, i) => Number((i * step).toPrecision(12)))
}

export type TimeUnit = 'year' | 'month' | 'day'
export const daysPer: Record<TimeUnit, number> = { year: 365.25, month: 365.25 / 12, day: 1 }

/** The unit in which a follow-up of so many days is best read. */
export const unitFor = (days: number): TimeUnit => (days > 1.5 * 365.25 ? 'year' : days > 60 ? 'month' : 'day')

export type TimeAxis = { days: number; ticks: { label: string; days: number }[] }

/** An axis that holds `lastDay`, with ticks on whole units and at most six of them. */
export function timeAxis(lastDay: number, unit: TimeUnit): TimeAxis {
  const units = Math.max(1, Math.ceil(lastDay / daysPer[unit] - 0.02))
  const step = [1, 2, 3, 5, 6, 10, 12, 20, 30, 60, 120].find((n) => units / n <= 6) ?? Math.ceil(units / 6)
  const count = Math.ceil(units / step)
  const ticks = Array.from({ length: count + 1 }, (_, i) => ({ label: String(i * step), days: i * step * daysPer[unit] }))
  return { days: count * step * daysPer[unit], ticks }
}

/** An axis in the data's own unit of time, whatever that is: it holds `last`, with about five ticks on round numbers. */
export function plainAxis(last: number): TimeAxis {
  const ticks = roundTicks(last > 0 ? last : 1, 5)
  return { days: ticks.at(-1)!, ticks: ticks.map((at) => ({ label: at >= 1e6 ? at.toExponential() : String(at), days: at })) }
}
