import { readFileSync } from 'node:fs'
import { randomBytes } from 'node:crypto'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Browser } from './browser'
import { addConsole, boardForm, upload } from './bundles'
import { startSite, type Site } from './harness'

/*
 * A bundle passes through the server as a stream. Held whole, a file of 60 MiB costs the server at least its own size (a parser that
 * gathers the parts costs it more than once); streamed it costs buffers and what the collector has not yet swept.
 */

const fileBytes = 60 * 1024 * 1024
const path = '/boards/buttress/releases/1.0.0'

let site: Site
let owner: Browser
beforeAll(async () => {
  site = await startSite()
  await site.query(addConsole)
  owner = await site.signInByGithub('vigga')
  await owner.fetch('/boards/new', { form: boardForm })
  await owner.fetch('/boards/buttress/releases/new', { form: { version: '1.0.0', boardRevision: 'A' } })
})
afterAll(() => site?.close())

/** Of the server's process, in bytes, as Linux counts them. */
const memory = (field: 'VmRSS' | 'VmHWM') =>
  Number(new RegExp(`${field}:\\s+(\\d+) kB`).exec(readFileSync(`/proc/${site.pid}/status`, 'utf8'))![1]) * 1024

it('takes a large bundle without holding it', async () => {
  await upload(owner, path, Buffer.from('warm-up: no zip'), { isScript: true })
  const before = memory('VmRSS')
  const answer = await upload(owner, path, randomBytes(fileBytes), { isScript: true })
  const growth = memory('VmHWM') - before
  expect(answer.status).toBe(200)
  expect(growth).toBeLessThan(fileBytes)
})
