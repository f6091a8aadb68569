import fc from 'fast-check'
import JSZip from 'jszip'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { damage, damaged, numbersIn, type Damage } from '../../../tests/factories/damage'
import { rawZip } from '../../../tests/factories/raw-zip'
import type { BundleCheck } from './bundle-check.types'
import { checkBundle } from './check-bundle.server'
import { isSameGeometry } from './compare-fingerprints'
import { findingCodes } from './finding-codes'
import { defaultLimits } from './limits'
import { runBundleCheckWithPictures } from './run-bundle-check.server'

/* Real sets of several programs and a demo bundle, one file damaged in each run and the zip packed anew; always the same runs. */

const seed = 20_240_611
const at = (path: string) => fileURLToPath(new URL(`../../../${path}`, import.meta.url))
const sets = [
  'tests/fixtures/bundles/OC21-fx-usbadapter.zip',
  'tests/fixtures/bundles/OC30-geda-tut1.zip',
  'tests/fixtures/bundles/OC31-pcbrnd-step6.zip',
  'tests/fixtures/bundles/OC40-gv-gedaold.zip',
  'db/seed/bundles/almanac-1.0.1.zip'
]
const limits = { ...defaultLimits, gerberObjects: 20_000, drillHoles: 20_000, macroShapes: 100_000, listRows: 2_000 }

const bundles: { name: string; data: Buffer }[][] = []
beforeAll(async () => {
  for (const path of sets) {
    const zip = await JSZip.loadAsync(await readFile(at(path)))
    const files = Object.values(zip.files).filter((file) => !file.dir)
    bundles.push(await Promise.all(files.map(async (file) => ({ name: file.name, data: await file.async('nodebuffer') }))))
  }
})

/** What holds of every answer. */
function expectSound({ findings, facts, layers, ok }: BundleCheck): void {
  expect(ok).toBe(!findings.some((f) => f.severity === 'stop'))
  expect(numbersIn([facts, layers, findings]).filter((number) => !Number.isFinite(number))).toEqual([])
  for (const { code, message } of findings) {
    expect(Object.keys(findingCodes)).toContain(code)
    expect(message.length).toBeGreaterThan(0)
    expect(findings.filter((f) => f.code === code).length).toBeLessThanOrEqual(limits.findingsPerCode)
  }
}

describe('the whole check', () => {
  it('answers whatever one file of a real set holds, within its limits', async () => {
    const share = fc.double({ min: 0, max: 1, noNaN: true, maxExcluded: true })
    const which = fc.nat({ max: sets.length - 1 })
    const runOne = async (set: number, part: number, changes: Damage) => {
      const files = bundles[set]!
      const hit = files[Math.floor(part * files.length)]!
      const zip = rawZip(
        files.map((file) =>
          file === hit ? { ...file, data: damaged(file.data, changes), stored: true } : { ...file, stored: true }
        )
      )
      const { check, record, reading } = await checkBundle(zip, { declaredLayers: 2, thicknessMm: 1.6 }, limits)
      expectSound(check)
      expect(check.findings.filter((f) => f.code.startsWith('zip-'))).toEqual([])
      expect(check.layers).toHaveLength(files.length)
      for (const { image, holes } of reading?.files ?? []) {
        expect(image?.objects ?? 0).toBeLessThanOrEqual(limits.gerberObjects)
        expect(holes?.length ?? 0).toBeLessThanOrEqual(limits.drillHoles)
      }
      if (!record) return
      expect(numbersIn(record).filter((number) => !Number.isFinite(number))).toEqual([])
      for (const print of record.fingerprints) {
        expect(print.fingerprint).not.toMatch(/NaN|Infinity/)
        expect(isSameGeometry(print, print)).toBe(true)
      }
    }
    await fc.assert(fc.asyncProperty(which, share, damage, runOne), { seed, numRuns: 60 })
  })
})

describe('a child process', () => {
  let folder: string
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'fettle-fuzz-'))
  })
  afterAll(() => rm(folder, { recursive: true, force: true }))

  it('answers for random bytes, also where they begin and end as a zip does', async () => {
    const path = join(folder, 'noise.zip')
    const crashes: string[] = []
    const noise = fc.uint8Array({ minLength: 1, maxLength: 5000, size: 'max' })
    await fc.assert(
      fc.asyncProperty(noise, fc.boolean(), async (bytes, isFramed) => {
        const empty = rawZip([{ name: 'a.gbr', data: 'M02*' }])
        await writeFile(path, isFramed ? Buffer.concat([empty.subarray(0, 30), bytes, empty.subarray(30)]) : bytes)
        const input = { path, onCrash: (detail: string) => void crashes.push(detail) }
        const { check, record, pictures } = await runBundleCheckWithPictures(input)
        expectSound(check)
        expect([check.ok, record, pictures]).toEqual([false, null, null])
      }),
      { seed, numRuns: 3, endOnFailure: true }
    )
    expect(crashes).toEqual([])
  })
})
