import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { runBundleCheck, runBundleCheckWithPictures } from './run-bundle-check.server'

const demo = fileURLToPath(new URL('../../../db/seed/bundles/almanac-1.0.1.zip', import.meta.url))
let folder: string

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'fettle-check-'))
})
afterAll(() => rm(folder, { recursive: true, force: true }))

describe('the check in its child process', () => {
  it('answers with facts, reports its steps in order, and draws both sides', async () => {
    const steps: string[] = []
    const { check, pictures } = await runBundleCheckWithPictures({
      path: demo,
      declaredLayers: 2,
      onProgress: (step) => steps.push(step)
    })
    expect(check.ok).toBe(true)
    expect(check.facts).toMatchObject({ width: 24, height: 20, slots: 1 })
    expect(steps).toEqual(['read-zip', 'tell-layers', 'measure', 'compare-lists', 'draw'])
    for (const svg of [pictures!.top, pictures!.bottom])
      expect(svg).toMatch(/^<svg [^>]*viewBox="0 0 24 20" width="24mm" height="20mm"/)
    expect(pictures!.top).not.toBe(pictures!.bottom)
  })

  it('compares with what the release form declares', async () => {
    const check = await runBundleCheck({ path: demo, declaredLayers: 4, thicknessMm: 1.6 })
    expect(check.findings.map((f) => f.code)).toEqual(['layer-count', 'thickness-conflict'])
    expect(check.ok).toBe(false)
  })

  it('is cut off when it takes too long, and the next check is unhurt', async () => {
    const late = await runBundleCheck({ path: demo }, { wallMs: 1 })
    expect(late).toMatchObject({
      ok: false,
      layers: [],
      findings: [{ code: 'check-cut-off', severity: 'stop', expected: 'at most 0.001 s' }]
    })
    expect((await runBundleCheck({ path: demo })).ok).toBe(true)
  })

  it('is cut off when it runs out of memory', async () => {
    let crash = ''
    const check = await runBundleCheck({ path: demo, onCrash: (detail) => (crash = detail) }, { heapMib: 4 })
    expect(check.findings).toMatchObject([{ code: 'check-cut-off', severity: 'stop', expected: 'at most 4 MiB' }])
    expect(crash).toMatch(/heap|memory/i)
  })

  it('refuses a file that is larger than a bundle without reading it', async () => {
    const check = await runBundleCheck({ path: demo }, { zipBytes: 1000 })
    expect(check.findings.map((f) => f.code)).toEqual(['zip-too-large'])
  })

  it('answers for a file that is no zip', async () => {
    const path = join(folder, 'text.zip')
    await writeFile(path, 'no zip at all')
    expect((await runBundleCheck({ path })).findings.map((f) => f.code)).toEqual(['zip-unreadable'])
  })

  it('rejects a file that does not exist, and an aborted check', async () => {
    await expect(runBundleCheck({ path: join(folder, 'none.zip') })).rejects.toMatchObject({ kind: 'not-found' })
    const reason = new Error('the visitor left')
    const abort = new AbortController()
    await expect(runBundleCheck({ path: demo, signal: abort.signal, onProgress: () => abort.abort(reason) })).rejects.toBe(reason)
  })
})
