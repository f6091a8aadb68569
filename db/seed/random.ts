/** A stream of pseudo-random numbers for the demo world; the same seed gives the same stream on every machine. */
export type Random = {
  /** A number in [0, 1). */
  unit(): number
  /** A whole number from `low` to `high`, both included. */
  whole(low: number, high: number): number
  /** True with the given probability. */
  chance(probability: number): boolean
  /** One of the items, each as likely as the next. */
  pick<T>(items: readonly T[]): T
  /** A key of the table, as likely as its weight. */
  weighted<K extends string>(weights: Readonly<Record<K, number>>): K
  /** An exponential waiting time with the given mean. */
  exponential(mean: number): number
  /** `n` bytes, for identifiers. */
  bytes(n: number): Uint8Array
  /** The items in another order; the argument stays as it is. */
  shuffled<T>(items: readonly T[]): T[]
}

/** A 32-bit hash of the text (FNV-1a): turns a name into a seed. */
export function hashText(text: string): number {
  let h = 0x811c9dc5
  for (let i = 0; i < text.length; i++) h = Math.imul(h ^ text.charCodeAt(i), 0x01000193)
  return h >>> 0
}

/**
 * A counter that is mixed by multiplication and shifts (the SplitMix construction of Steele, Lea and Flood 2014, in 32 bits). Good enough
 * for invented data, and no use for secrets. Streams of different names do not depend on each other, so that adding a board to the
 * world leaves the others as they were.
 */
export function randomOf(seed: number, name: string): Random {
  let state = (seed ^ hashText(name)) >>> 0
  const next = () => {
    state = (state + 0x9e3779b9) >>> 0
    let z = state
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b)
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35)
    return (z ^ (z >>> 16)) >>> 0
  }
  const unit = () => next() / 0x1_0000_0000
  const whole = (low: number, high: number) => low + Math.floor(unit() * (high - low + 1))
  return {
    unit,
    whole,
    chance: (probability) => unit() < probability,
    pick: (items) => items[whole(0, items.length - 1)]!,
    weighted(weights) {
      const keys = Object.keys(weights) as (keyof typeof weights)[]
      let left = unit() * keys.reduce((sum, k) => sum + weights[k], 0)
      for (const key of keys) {
        left -= weights[key]
        if (left < 0) return key
      }
      return keys.at(-1)!
    },
    exponential: (mean) => -mean * Math.log(1 - unit()),
    bytes: (n) => Uint8Array.from({ length: n }, () => whole(0, 255)),
    shuffled(items) {
      const out = [...items]
      for (let i = out.length - 1; i > 0; i--) {
        const j = whole(0, i)
        ;[out[i], out[j]] = [out[j]!, out[i]!]
      }
      return out
    }
  }
}
