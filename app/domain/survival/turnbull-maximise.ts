import { boxQuadratic } from './special/box-quadratic'
import { curvatureMatrix, termsWithin } from './turnbull-curvature'
import type { Load, Problem } from './turnbull-problem'

/** A fall of ln S by this much is a fall to 0 in double precision (e^-40 = 4e-18). */
export const certain = 40

/** More cells than this in play at once are solved by conjugate gradients instead of a dense matrix. */
const denseLimit = 1200

export type Maximum = { falls: Float64Array; logLikelihood: number; iterations: number; isConverged: boolean }

/**
 * Maximises the concave log-likelihood of `Problem` over falls g >= 0.
 *
 * From a start on few cells, Newton steps: the quadratic model is maximised under g >= 0 over the cells that carry mass and those between them that
 * would gain most, and followed by a line search, until the model promises less than `tolerance` of the log-likelihood. Where the line search
 * has to shorten a step, a multiplicative EM step follows (failures as a Poisson process, given at least one in each term's cells). Cells that nobody is
 * known to have survived fall to 0 at once.
 *
 * @param start falls of an earlier maximum for other weights, to begin near
 */
export function maximise(problem: Problem, load: Load, tolerance = 1e-15, start?: Float64Array): Maximum {
  const model = new Model(problem, load)
  const g = model.begin(start)
  model.evaluate(g)
  for (let i = 0; i < 3; i++) model.expectationStep(g)
  let value = model.evaluate(g)
  for (let iteration = 1; iteration <= 300; iteration++) {
    const target = model.newtonTarget(g)
    let promise = 0
    for (let j = 0; j < g.length; j++) promise += model.gradient[j]! * (target[j]! - g[j]!)
    const next = new Float64Array(g.length)
    let nextValue = -Infinity
    let share = 1
    for (; share > 1e-12; share /= 2) {
      for (let j = 0; j < g.length; j++) next[j] = share === 1 ? target[j]! : g[j]! + share * (target[j]! - g[j]!)
      nextValue = model.evaluate(next)
      // Close to the top a step changes the value by less than rounding: it is taken as it comes.
      const isClose = promise < 1e-11 * Math.abs(value) && nextValue > value - 1e-9 * Math.abs(value)
      if (isClose || nextValue > value + 1e-4 * share * promise) break
    }
    const isStuck = share <= 1e-12
    if (!isStuck) {
      g.set(next)
      value = nextValue
    }
    if (promise < tolerance * Math.max(1, Math.abs(value)))
      return { falls: g, logLikelihood: value, iterations: iteration, isConverged: true }
    if (isStuck) model.evaluate(g)
    if (isStuck || share < 1) model.expectationStep(g)
    value = model.evaluate(g)
  }
  return { falls: g, logLikelihood: value, iterations: 300, isConverged: false }
}

/** The problem under one load: log-likelihood, gradient and curvature at the falls last evaluated. */
class Model {
  readonly gradient: Float64Array
  private readonly rise: Float64Array
  private readonly bend: Float64Array
  private readonly total: Float64Array
  private readonly watched: Float64Array

  constructor(
    private readonly problem: Problem,
    private readonly load: Load
  ) {
    this.gradient = new Float64Array(problem.size)
    this.rise = new Float64Array(problem.first.length)
    this.bend = new Float64Array(problem.first.length)
    this.total = new Float64Array(problem.size + 1)
    this.watched = this.spread(load.weight)
    for (let j = 0; j < problem.size; j++) this.watched[j]! += load.survived[j]!
  }

  /**
   * Falls from which every failure is possible, on few cells: the last cell of each term that no chosen cell lies in yet, each failure
   * shared among its chosen cells. With `start`, its positive falls as well.
   */
  begin(start?: Float64Array): Float64Array {
    const { first, last, size } = this.problem
    const { survived, weight } = this.load
    const isChosen = Uint8Array.from({ length: size }, (_, j) => (start !== undefined && start[j]! > 0 ? 1 : 0))
    let latest = -1
    const chosenBy = Int32Array.from(isChosen, (chosen, j) => (chosen === 1 ? (latest = j) : latest))
    let added = -1
    const order = Array.from(first.keys()).filter((t) => weight[t]! > 0)
    order.sort((a, b) => last[a]! - last[b]!)
    for (const t of order)
      if (chosenBy[last[t]!]! < first[t]! && added < first[t]!) {
        added = last[t]!
        isChosen[added] = 1
      }
    const count = new Int32Array(size + 1)
    for (let j = 0; j < size; j++) count[j + 1] = count[j]! + isChosen[j]!
    const deaths = this.spread(weight.map((w, t) => (w > 0 ? w / (count[last[t]! + 1]! - count[first[t]!]!) : 0)))
    return Float64Array.from({ length: size }, (_, j) => {
      if (!(deaths[j]! > 0)) return 0
      if (survived[j] === 0) return certain
      return isChosen[j] === 1 ? Math.min(certain, Math.max(start?.[j] ?? 0, deaths[j]! / this.watched[j]!)) : 0
    })
  }

  /** Log-likelihood at g; -Infinity where a failure is left without a place. Sets gradient and curvature. */
  evaluate(g: Float64Array): number {
    const { first, last, size } = this.problem
    const { survived, weight } = this.load
    let value = 0
    for (let j = 0; j < size; j++) {
      this.total[j + 1] = this.total[j]! + g[j]!
      value -= survived[j]! * g[j]!
    }
    for (let t = 0; t < first.length; t++) {
      const w = weight[t]!
      if (w === 0) {
        this.rise[t] = 0
        this.bend[t] = 0
        continue
      }
      // A difference of running totals would lose the digits of a short term.
      let x = 0
      if (last[t]! - first[t]! < 16) for (let j = first[t]!; j <= last[t]!; j++) x += g[j]!
      else x = this.total[last[t]! + 1]! - this.total[first[t]!]!
      if (!(x > 0)) return -Infinity
      const odds = 1 / Math.expm1(x)
      value += w * Math.log(-Math.expm1(-x))
      this.rise[t] = w * odds
      this.bend[t] = w * odds * (1 + odds)
    }
    const up = this.spread(this.rise)
    for (let j = 0; j < size; j++) this.gradient[j] = up[j]! - survived[j]!
    return value
  }

  /** One EM step in place, from the falls last evaluated; leaves the model evaluated at the new falls. */
  expectationStep(g: Float64Array): void {
    // The expected count of term t is w / (1 - e^-x) = w + w / (e^x - 1) per unit of fall.
    const expected = this.spread(this.rise.map((r, t) => r + this.load.weight[t]!))
    for (let j = 0; j < g.length; j++)
      if (this.load.survived[j]! > 0 && this.watched[j]! > 0) g[j] = Math.min(certain, (g[j]! * expected[j]!) / this.watched[j]!)
    this.evaluate(g)
  }

  /**
   * Where the quadratic model at g is largest under g >= 0, over the cells with mass and, between two of them, the one that would gain most
   * (as in Y. Wang, JRSS B 69:185-198, 2007).
   */
  newtonTarget(g: Float64Array): Float64Array {
    const { survived } = this.load
    const cells: number[] = []
    let best = -1
    const takeBest = () => {
      if (best >= 0) cells.push(best)
      best = -1
    }
    for (let j = 0; j < g.length; j++) {
      if (!(survived[j]! > 0)) continue
      if (g[j]! > 0) {
        takeBest()
        cells.push(j)
      } else if (this.gradient[j]! > (best < 0 ? 0 : this.gradient[best]!)) best = j
    }
    takeBest()
    const target = g.slice()
    const solved = cells.length <= denseLimit ? this.denseTarget(g, cells) : this.iterativeTarget(g, cells)
    cells.forEach((j, k) => (target[j] = Math.min(certain, solved[k]!)))
    return target
  }

  private denseTarget(g: Float64Array, cells: number[]): Float64Array {
    const { from, to } = termsWithin(this.problem, cells)
    return boxQuadratic(
      curvatureMatrix(cells.length, from, to, this.bend),
      cells.map((j) => this.gradient[j]!),
      cells.map((j) => g[j]!)
    )
  }

  /** The same by conjugate gradients: cells that would go below 0 are left at 0 and the rest is solved again. */
  private iterativeTarget(g: Float64Array, cells: number[]): Float64Array {
    const y = new Float64Array(cells.length)
    let open = [...cells.keys()]
    for (let round = 0; open.length > 0; round++) {
      const solved = this.solveByGradients(g, cells, open)
      const kept = open.filter((_, i) => solved[i]! > 0)
      y.fill(0)
      open.forEach((k, i) => (y[k] = Math.max(0, solved[i]!)))
      if (kept.length === open.length || round === 20) break
      open = kept
    }
    return y
  }

  /**
   * The unconstrained maximum over the `open` ones of `cells` with the others at 0, by conjugate gradients preconditioned by the diagonal; the curvature is
   * applied without being written out.
   */
  private solveByGradients(g: Float64Array, cells: number[], open: number[]): Float64Array {
    const all = termsWithin(this.problem, cells)
    const inner = termsWithin(
      this.problem,
      open.map((k) => cells[k]!)
    )
    const n = open.length
    const diagonal = this.spreadWithin(this.bend, inner.from, inner.to, n).map((value) => Math.max(value, 1e-300))
    const apply = (v: ArrayLike<number>, { from, to }: typeof all): Float64Array => {
      const sums = new Float64Array(v.length + 1)
      for (let i = 0; i < v.length; i++) sums[i + 1] = sums[i]! + v[i]!
      const scaled = this.bend.map((b, t) => (b > 0 && from[t]! <= to[t]! ? b * (sums[to[t]! + 1]! - sums[from[t]!]!) : 0))
      return this.spreadWithin(scaled, inner.from, inner.to, n)
    }
    // H (y - g) = gradient, y = 0 outside `open`: begins at y = g there.
    const rest = cells.map((j) => g[j]!)
    for (const k of open) rest[k] = 0
    const pull = apply(rest, all)
    const y = Float64Array.from(open, (k) => g[cells[k]!]!)
    const residual = Float64Array.from(open, (k, i) => this.gradient[cells[k]!]! + pull[i]!)
    const conditioned = residual.map((r, i) => r / diagonal[i]!)
    const direction = conditioned.slice()
    let rho = dot(residual, conditioned)
    const stop = rho * 1e-16
    for (let i = 0; i < 500 && rho > stop; i++) {
      const image = apply(direction, inner).map((value, c) => value + 1e-13 * diagonal[c]! * direction[c]!)
      const alpha = rho / dot(direction, image)
      for (let c = 0; c < n; c++) {
        y[c]! += alpha * direction[c]!
        residual[c]! -= alpha * image[c]!
        conditioned[c] = residual[c]! / diagonal[c]!
      }
      const next = dot(residual, conditioned)
      for (let c = 0; c < n; c++) direction[c] = conditioned[c]! + (next / rho) * direction[c]!
      rho = next
    }
    return y
  }

  private spread = (amount: Float64Array): Float64Array =>
    this.spreadWithin(amount, this.problem.first, this.problem.last, this.problem.size)

  /** Adds each term's amount to all of its cells. */
  private spreadWithin(amount: Float64Array, from: Int32Array, to: Int32Array, size: number): Float64Array {
    const sums = new Float64Array(size + 1)
    for (let t = 0; t < amount.length; t++) {
      if (from[t]! > to[t]!) continue
      sums[from[t]!]! += amount[t]!
      sums[to[t]! + 1]! -= amount[t]!
    }
    for (let j = 1; j < size; j++) sums[j]! += sums[j - 1]!
    return sums.subarray(0, size)
  }
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!
  return sum
}
