import autocannon from 'autocannon'
import { readFile } from 'node:fs/promises'
import { fileURLToPath } from 'node:url'
import { startDemoSite } from '../e2e/demo-site'
import type { Claim } from './claim'

const largestDemo = fileURLToPath(new URL('../../db/seed/bundles/buttress-1.1.0.zip', import.meta.url))
const seconds = 15
const checksAtOnce = 4

/**
 * How long visitors wait for pages of the built server, with nobody else there and while four bundle checks are always under way. Requests
 * leave at a steady rate, so that a stalled server shows. Idle is measured before and after, and the worse of the two counts.
 */
export async function checkLoad(file = largestDemo): Promise<Claim[]> {
  const zip = await readFile(file)
  const site = await startDemoSite()
  try {
    const load = async (name: string, duration = seconds) => {
      const result = await autocannon({
        url: site.url,
        connections: 8,
        overallRate: 40,
        duration,
        requests: ['/', '/boards/buttress', '/boards/buttress/releases/1.1.0', '/consoles'].map((path) => ({ path }))
      })
      if (result.non2xx + result.errors + result.timeouts > 0)
        throw new Error(`${name}: ${result.non2xx} refused, ${result.errors} errors, ${result.timeouts} timeouts`)
      const { p50, p99, max } = result.latency
      console.log(`${name.padEnd(26)} ${result.requests.total} requests, p50 ${p50} ms, p99 ${p99} ms, longest ${max} ms`)
      return p99
    }
    await load('warming up', 5)
    const before = await load('idle')
    let isOver = false
    let checks = 0
    // Each keeps one check under way; addresses of their own, so that the limit of checks a minute is not what is measured.
    const checking = Array.from({ length: checksAtOnce }, async (_, lane) => {
      while (!isOver) {
        const answer = await fetch(`${site.url}/api/v1/compute/bundle-check`, {
          method: 'POST',
          headers: { 'Content-Type': 'application/zip', 'X-Forwarded-For': `10.0.${lane}.${checks % 250}` },
          body: zip
        })
        if (answer.status !== 200) throw new Error(`a check was answered ${answer.status}`)
        await answer.arrayBuffer()
        checks++
      }
    })
    const busy = await load('four checks under way')
    isOver = true
    await Promise.all(checking)
    console.log(`${checks} checks were made meanwhile`)
    const after = await load('idle again')
    return [{ claim: 'p99 with four checks over p99 idle', measured: busy / Math.max(1, before, after), limit: 2 }]
  } finally {
    await site.close()
  }
}
