import type { Path } from './geometry'

/** How many plane waves a fingerprint is made of. */
export const waveCount = 12

/** A mark tells objects of different form apart: one phase for each wave, in units of a 2^32nd of a turn. */
export type Mark = Int32Array

/** Wave vectors in 2^-32 turns per nm. Lengths of 0.35 to 0.6 mm, so that a pad moved by 0.05 mm turns its share by 30° and more. */
const waveX = new Int32Array(waveCount)
const waveY = new Int32Array(waveCount)
for (let k = 0; k < waveCount; k++) {
  const nm = 350_000 + 250_000 * ((k * 0.618034) % 1)
  const angle = ((k + 0.37) * Math.PI) / waveCount
  waveX[k] = Math.round((2 ** 32 / nm) * Math.cos(angle))
  waveY[k] = Math.round((2 ** 32 / nm) * Math.sin(angle))
}

/** Radians per mm of each wave. */
export const waveNumbers = Array.from(waveX, (x, k) => (Math.hypot(x, waveY[k]!) / 2 ** 32) * 2 * Math.PI * 1e6)

const tableBits = 14
const cosines = Float64Array.from({ length: 2 ** tableBits }, (_, i) => Math.cos(((i + 0.5) / 2 ** tableBits) * 2 * Math.PI))
const quarter = 2 ** (tableBits - 2)
const tableMask = 2 ** tableBits - 1

/** A whole number scattered over 32 bits; the multipliers are odd numbers without a pattern. */
export function scatter(value: number): number {
  let h = Math.imul(value | 0, 0x9e3779b1)
  h = Math.imul(h ^ (h >>> 15), 0x85ebca77)
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae3d)
  return h ^ (h >>> 16)
}

/** The mark of whole numbers in their order. */
export function markOf(...words: number[]): Mark {
  let h = 0x1b873593
  for (const word of words) h = scatter(h ^ scatter(word))
  return Int32Array.from({ length: waveCount }, (_, k) => scatter(h + Math.imul(k + 1, 0x27d4eb2f)))
}

/** One mark on top of another. */
export const joined = (a: Mark, b: Mark): Mark => a.map((phase, k) => phase + b[k]!)

/** The mark of objects that need none. */
export const noMark = markOf()

const plain = markOf(0)
const middle = markOf(1)
const clear = markOf(2)
const clearMiddle = joined(middle, clear)

/**
 * The sum over points p of exp(i (w·p + mark)) for each wave w: it does not depend on the order of the points, and where 0, 0 lies only turns
 * it as a whole, so that it can be related to any origin afterwards. Constant memory, one table look-up a wave and point.
 */
export class WaveSum {
  objects = 0
  points = 0
  sumX = 0
  sumY = 0
  readonly re = new Float64Array(waveCount)
  readonly im = new Float64Array(waveCount)

  /** Adds a point in mm. */
  add(x: number, y: number, mark: Mark, more: Mark): void {
    const nmX = Math.round(x * 1e6)
    const nmY = Math.round(y * 1e6)
    this.points++
    this.sumX += x
    this.sumY += y
    for (let k = 0; k < waveCount; k++) {
      const phase = Math.imul(waveX[k]!, nmX) + Math.imul(waveY[k]!, nmY) + mark[k]! + more[k]!
      const at = phase >>> (32 - tableBits)
      this.re[k]! += cosines[at]!
      this.im[k]! += cosines[(at + 3 * quarter) & tableMask]!
    }
  }
}

/** A wave's sum as seen from (x, y) in mm, as real and imaginary parts in turn. */
export function seenFrom(sum: WaveSum, x: number, y: number): number[] {
  const values: number[] = []
  for (let k = 0; k < waveCount; k++) {
    const turns = (waveX[k]! * x * 1e6 + waveY[k]! * y * 1e6) / 2 ** 32
    const angle = -(turns - Math.floor(turns)) * 2 * Math.PI
    const [cos, sin] = [Math.cos(angle), Math.sin(angle)]
    values.push(sum.re[k]! * cos - sum.im[k]! * sin, sum.re[k]! * sin + sum.im[k]! * cos)
  }
  return values
}

/** Adds a stroke's ends and the point half-way. */
export function addStroke(sum: WaveSum, points: Path, mark: Mark, isDark = true): void {
  const last = points.length - 2
  const [x0, y0, x1, y1] = [points[0]!, points[1]!, points[last]!, points[last + 1]!]
  const more = isDark ? plain : clear
  sum.add(x0, y0, mark, more)
  sum.add(x1, y1, mark, more)
  const [x, y] = points.length === 4 ? [(x0 + x1) / 2, (y0 + y1) / 2] : halfWay(points)
  sum.add(x, y, mark, isDark ? middle : clearMiddle)
}

/** Adds a closed contour's corners; one that ends where it began counts that corner once. */
export function addContour(sum: WaveSum, points: Path, isDark = true): void {
  const last = points.length - 2
  const end = points[0] === points[last] && points[1] === points[last + 1] ? last : points.length
  for (let i = 0; i < end; i += 2) sum.add(points[i]!, points[i + 1]!, noMark, isDark ? plain : clear)
}

/** Adds a point by itself. */
export function addPoint(sum: WaveSum, x: number, y: number, mark: Mark, isDark = true): void {
  sum.add(x, y, mark, isDark ? plain : clear)
}

/** The point at half the length of a path. */
function halfWay(points: Path): [number, number] {
  let length = 0
  for (let i = 2; i < points.length; i += 2) length += Math.hypot(points[i]! - points[i - 2]!, points[i + 1]! - points[i - 1]!)
  let left = length / 2
  for (let i = 2; i < points.length; i += 2) {
    const [dx, dy] = [points[i]! - points[i - 2]!, points[i + 1]! - points[i - 1]!]
    const step = Math.hypot(dx, dy)
    if (step >= left && step > 0) return [points[i - 2]! + (dx * left) / step, points[i - 1]! + (dy * left) / step]
    left -= step
  }
  return [points[0]!, points[1]!]
}
