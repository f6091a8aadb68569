/* The inputs of the survival benches, the same here and in survival.R: an integer generator that both languages run exactly. */

/** Minimal standard generator (S. K. Park and K. W. Miller, Communications of the ACM 31:1192, 1988), as numbers between 0 and 1. */
export function* parkMiller(seed: number): Generator<number, never> {
  for (let x = seed; ;) {
    x = (x * 16807) % 2147483647
    yield x / 2147483647
  }
}

/** Right-censored whole days in ten groups, of which later ones live longer. */
export function rightCensored(n: number) {
  const next = parkMiller(20240611)
  const time = new Float64Array(n)
  const event = new Uint16Array(n)
  const group = new Uint8Array(n)
  for (let i = 0; i < n; i++) {
    const g = Math.floor(10 * next.next().value)
    const u = next.next().value
    const failed = 1 + Math.floor((1200 + 60 * g) * (u * u))
    const left = 1 + Math.floor(730 * next.next().value)
    group[i] = g
    time[i] = Math.min(failed, left)
    event[i] = failed <= left ? 1 : 0
  }
  return { time, event, group }
}

/** Failures known only between two check-ins some weeks or months apart, over two years. */
export function intervalCensored(n: number) {
  const next = parkMiller(987654321)
  const lower = new Float64Array(n)
  const upper = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const u = next.next().value
    const failed = 1 + Math.floor(1500 * (u * u))
    const first = 1 + Math.floor(120 * next.next().value)
    const gap = 20 + Math.floor(160 * next.next().value)
    const k = Math.max(0, Math.ceil((failed - first) / gap))
    const found = first + k * gap
    const isCensored = found > 730
    lower[i] = isCensored ? first + Math.floor((730 - first) / gap) * gap : k === 0 ? 0 : first + (k - 1) * gap
    upper[i] = isCensored ? Infinity : found
  }
  return { lower, upper }
}
