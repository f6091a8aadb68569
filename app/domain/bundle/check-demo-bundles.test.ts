import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { checkBundle } from './check-bundle.server'
import { roleFromAttribute } from './name-layer'

const folder = (name: string) => fileURLToPath(new URL(`../../../db/seed/${name}/`, import.meta.url))

type Manifest = {
  bundle: { bytes: number; sha256: string; files: number }
  declared: { copperLayers: number; thicknessMm: number; castellated?: boolean }
  layers: { file: string; function: string }[]
  facts: {
    widthMm: number
    heightMm: number
    copperLayers: number
    minTrackMm: number
    minHoleMm: number
    holes: { plated: number; nonPlated: number }
    slots: { plated: number; nonPlated: number }
    placements: { top: number; bottom: number }
    bom: { lines: number; parts: number; notFitted: number }
    castellatedHoles?: number
  }
}

/** The demo bundles come with a manifest each, written by the scripts that drew them and not by Fettle. */
describe.each(readdirSync(folder('bundles')).filter((name) => name.endsWith('.zip')))('%s', (name) => {
  const manifest = JSON.parse(readFileSync(folder('manifests') + name.replace(/\.zip$/, '.json'), 'utf8')) as Manifest
  const { declared, facts } = manifest

  it('is told and measured as its manifest says, without a stop', async () => {
    const bytes = readFileSync(folder('bundles') + name)
    const { check } = await checkBundle(bytes, { declaredLayers: declared.copperLayers, thicknessMm: declared.thicknessMm })
    const told = Object.fromEntries(check.layers.map((layer) => [layer.file, layer]))
    for (const { file, function: expected } of manifest.layers) {
      const role = roleFromAttribute(expected.split(',')) ?? { function: expected, side: null, index: null }
      expect(told[file], file).toMatchObject(role)
    }
    expect(check.layers).toHaveLength(manifest.layers.length)
    expect(check.facts).toEqual({
      width: facts.widthMm,
      height: facts.heightMm,
      copperLayers: facts.copperLayers,
      minTrack: facts.minTrackMm,
      smallestStroke: null,
      minHole: facts.minHoleMm,
      holes: { plated: facts.holes.plated, nonPlated: facts.holes.nonPlated, unknown: 0 },
      slots: facts.slots.plated + facts.slots.nonPlated,
      placements: facts.placements,
      bom: { lines: facts.bom.lines, parts: facts.bom.parts, notFitted: facts.bom.notFitted },
      files: manifest.bundle.files,
      bytes: manifest.bundle.bytes,
      sha256: manifest.bundle.sha256
    })
    expect(check.findings.filter((f) => f.severity === 'stop')).toEqual([])
    expect(check.ok).toBe(true)
    const codes = check.findings.map((f) => f.code)
    expect(codes).toEqual(declared.castellated ? ['copper-past-outline', 'hole-on-outline'] : [])
  })
})
