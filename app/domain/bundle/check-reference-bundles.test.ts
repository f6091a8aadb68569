import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { checkBundle } from './check-bundle.server'
import { roleFromAttribute, type Role } from './name-layer'

/**
 * Real boards from several design tools and synthetic hostile zips; where they come from stands in `LICENCES.md` beside them. The
 * manifests were made by an independent reader and by looking at the boards.
 */
const folder = fileURLToPath(new URL('../../../tests/fixtures/bundles/', import.meta.url))
const sets = readdirSync(folder).filter((name) => name.endsWith('.zip'))
const manifestOf = (name: string) => JSON.parse(readFileSync(folder + name.replace(/\.zip$/, '.manifest.json'), 'utf8'))

type Clean = {
  layerCount: number
  boardMm: [number, number] | null
  drill: { total: number; slots: number; minMm: number }
  minTrackMm: number
  fileFunctions: Record<string, string>
}

const others: Record<string, Role['function'][]> = {
  Readme: ['document', 'licence'],
  BOM: ['bom'],
  Placement: ['placement'],
  JobFile: ['job']
}

describe.each(sets.filter((name) => name.startsWith('OC')))('the real board %s', (name) => {
  const manifest = manifestOf(name) as Clean

  it('is told and measured as its manifest says', async () => {
    const { check } = await checkBundle(readFileSync(folder + name))
    for (const [file, stated] of Object.entries(manifest.fileFunctions)) {
      const layer = check.layers.find((candidate) => candidate.file === file)
      const role = roleFromAttribute(stated.split(','))
      if (role) expect(layer, file).toMatchObject(role)
      else expect(others[stated], file).toContain(layer?.function)
    }
    const { facts } = check
    expect(facts.copperLayers).toBe(manifest.layerCount)
    if (manifest.boardMm) {
      expect(Math.abs(facts.width! - manifest.boardMm[0])).toBeLessThanOrEqual(0.1)
      expect(Math.abs(facts.height! - manifest.boardMm[1])).toBeLessThanOrEqual(0.1)
    } else expect([facts.width, facts.height]).toEqual([null, null])
    expect(facts.holes.plated! + facts.holes.nonPlated! + facts.holes.unknown!).toBe(manifest.drill.total)
    expect(facts.slots).toBe(manifest.drill.slots)
    expect(Math.abs(facts.minHole! - manifest.drill.minMm)).toBeLessThanOrEqual(0.005)
    // None of these boards carries aperture attributes: what is measured is a stroke, not a track.
    expect(facts.minTrack).toBeNull()
    expect(facts.smallestStroke).toBeCloseTo(manifest.minTrackMm, 6)
  })

  it('has no stop but for what is not there', async () => {
    const { check } = await checkBundle(readFileSync(folder + name))
    const expected = new Set<string>()
    const stated = Object.values(manifest.fileFunctions)
    if (!stated.includes('BOM')) expected.add('bom-missing')
    if (!stated.includes('Placement')) expected.add('placement-missing')
    if (!stated.some((fn) => fn.startsWith('Profile'))) expected.add('outline-missing')
    expect(new Set(check.findings.filter((f) => f.severity === 'stop').map((f) => f.code))).toEqual(expected)
  })
})

/** What each synthetic zip is answered with; nested archives alone are the one defect. */
const answers: Record<string, string[]> = {
  'OB54-not-a-zip-text.zip': ['zip-unreadable'],
  'OB56-not-a-zip-html.zip': ['zip-unreadable'],
  'OB57-zip-empty.zip': ['zip-unreadable'],
  'OB58-zero-bytes.zip': ['zip-unreadable'],
  'OB62-zip-bomb-lying-size.zip': ['zip-too-large'],
  'OB63-zip-bomb-overlap.zip': ['zip-too-large'],
  'OB64-zip-bomb-shared-entry.zip': ['zip-too-large'],
  'OB65-zip-bomb-nested.zip': ['zip-nested']
}

describe.each(sets.filter((name) => name.startsWith('OB')))('the broken set %s', (name) => {
  it('gives its code', async () => {
    const { check } = await checkBundle(readFileSync(folder + name))
    expect([...new Set(check.findings.map((f) => f.code))]).toEqual(answers[name])
    expect(check.ok).toBe(false)
  })
})

it('says where the format of a drill file had to be found out', async () => {
  const { check } = await checkBundle(readFileSync(folder + 'OC40-gv-gedaold.zip'))
  expect(check.findings.find((f) => f.code === 'drill-format-assumed')).toMatchObject({
    severity: 'caution',
    expected: 'unit and digits in the header'
  })
})
