import type { Spans } from './spans'

/**
 * Units that entered before t and may still have been at risk at t: neither last seen working before it nor known to have failed before it. For
 * exact and right-censored times this is the number at risk.
 *
 * @param times ascending
 */
export function possiblyAtRisk(spans: Spans, times: Float64Array): number[] {
  const { entry, lower, upper, weight } = spans
  if (times.length < fewTimes) return Array.from(times, (t) => atRiskOnce(spans, t))
  const order = [...entry.keys()]
  const exit = (i: number) => (upper[i] === Infinity ? lower[i]! : upper[i]!)
  const byEntry = [...order].sort((a, b) => entry[a]! - entry[b]!)
  const byExit = order.sort((a, b) => exit(a) - exit(b))
  let n = 0
  let nextEntry = 0
  let nextExit = 0
  return Array.from(times, (t) => {
    for (; nextEntry < byEntry.length && isIn(entry[byEntry[nextEntry]!]!, t); nextEntry++) n += weight[byEntry[nextEntry]!]!
    for (; nextExit < byExit.length && exit(byExit[nextExit]!) < t; nextExit++) n -= weight[byExit[nextExit]!]!
    return n
  })
}

const isIn = (entry: number, t: number) => entry < t || entry === 0

/** For fewer, a look at every row is quicker than their order. */
const fewTimes = 8

function atRiskOnce({ entry, lower, upper, weight }: Spans, t: number): number {
  let n = 0
  for (let i = 0; i < entry.length; i++)
    if (isIn(entry[i]!, t) && (upper[i] === Infinity ? lower[i]! : upper[i]!) >= t) n += weight[i]!
  return n
}
