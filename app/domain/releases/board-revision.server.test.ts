import { readFileSync } from 'node:fs'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { edit, type Files } from '../../../tests/factories/defect'
import { demoFiles, zipOf } from '../../../tests/factories/demo-bundle'
import { draftOf, openReleaseWorld, owner, type ReleaseWorld } from '../../../tests/factories/release-world'
import { checkBundle } from '../bundle/check-bundle.server'
import { answerCautions, draftRelease, editDraft } from './drafts.server'
import { publishRelease } from './publish.server'
import { listFingerprints, listParts, listPlacements } from './record.repo.server'
import { releasePage } from './release-page.server'
import { recheckBundle, takeInBundle } from './take-in-bundle.server'

let world: ReleaseWorld
beforeEach(async () => {
  world = await openReleaseWorld()
  // The real check, in this process: what it finds is what is tested here.
  world.deps.check = async ({ path, onProgress: _, ...declared }) => {
    const { check, record } = await checkBundle(readFileSync(path), declared)
    return { check, record, pictures: null }
  }
})
afterEach(() => world.close())

const draft = (version: string, boardRevision: string) => draftOf(version, { boardRevision, layers: 4, thicknessMm: 0.8 })
const page = (version: string) => releasePage(world.db, owner, 'ledger', version)
const findingsOf = async (version: string) => (await page(version)).findings.map((f) => f.code)
const idOf = async (version: string) =>
  (await world.db.selectFrom('releases').select('id').where('version', '=', version).executeTakeFirstOrThrow()).id

async function upload(version: string, change: (files: Files) => unknown = () => {}) {
  const files = await demoFiles('buttress-1.1.0')
  change(files)
  world.tick()
  const zip = await zipOf(files)
  await takeInBundle(world.deps, owner, 'ledger', version, async () => world.file(zip))
  const cautions = (await page(version)).findings.filter((f) => f.severity === 'caution')
  await answerCautions(world.deps, owner, 'ledger', version, new Map(cautions.map((f) => [f.id, 'Meant so.'])))
}
async function publish(version: string) {
  const { bundle, release } = await page(version)
  await publishRelease(world.deps, owner, 'ledger', version, { bundle: bundle!.sha256, updatedAt: release.updatedAt })
}
async function release(version: string, boardRevision: string, change?: (files: Files) => unknown) {
  await draftRelease(world.deps, owner, 'ledger', draft(version, boardRevision))
  await upload(version, change)
}
const lessHoles = (files: Files) => edit(files, 'drill/buttress-PTH.drl', (text) => text.replace('X0.8Y11.4\n', ''))

describe('a board revision', () => {
  it('stands for its copper, holes and outline: another hole needs another letter', async () => {
    await release('1.1.0', 'B')
    await publish('1.1.0')
    await release('1.1.1', 'B', lessHoles)
    const stops = (await page('1.1.1')).findings.filter((f) => f.severity === 'stop')
    expect(stops.map((f) => f.code)).toEqual(['revision-unchanged'])
    expect(stops[0]).toMatchObject({
      message: expect.stringContaining('The drilled holes differ from release 1.1.0 of the same board revision B.'),
      expected: 'as in 1.1.0, or a new board revision'
    })
    await expect(publish('1.1.1')).rejects.toMatchObject({ kind: 'impossible' })

    const edited = await editDraft(world.deps, owner, 'ledger', '1.1.1', draft('1.1.1', 'C'))
    expect(edited.needsCheck).toBe(true)
    await expect(publish('1.1.1')).rejects.toMatchObject({ kind: 'impossible' })
    await recheckBundle(world.deps, owner, 'ledger', '1.1.1')
    expect(await findingsOf('1.1.1')).not.toContain('revision-unchanged')
    await publish('1.1.1')
    expect((await page('1.1.1')).release).toMatchObject({ state: 'released', boardRevision: 'C' })
  })

  it('keeps its letter where only parts change', async () => {
    await release('1.1.0', 'B')
    await publish('1.1.0')
    await release('1.1.1', 'B', (files) => edit(files, 'assembly/buttress-bom.csv', (text) => text.replace(/10k/, '12k')))
    expect(await findingsOf('1.1.1')).not.toContain('revision-unchanged')
    await publish('1.1.1')
  })

  it('is compared with trials and withdrawn releases, not with drafts', async () => {
    await release('1.0.0', 'B')
    await release('1.1.0-beta.1', 'B', lessHoles)
    expect(await findingsOf('1.1.0-beta.1')).not.toContain('revision-unchanged')
    await publish('1.1.0-beta.1')
    await recheckBundle(world.deps, owner, 'ledger', '1.0.0')
    expect(await findingsOf('1.0.0')).toContain('revision-unchanged')
  })

  it('says nothing of a layer that is missing or broken: that is found already', async () => {
    await release('1.1.0', 'B')
    await publish('1.1.0')
    for (const [version, change, code] of [
      ['2.0.0', (files: Files) => files.delete('gerber/buttress-In1_Cu.gbr'), 'layer-gap'],
      ['2.0.1', (files: Files) => edit(files, 'gerber/buttress-B_Cu.gbr', (text) => text.slice(0, 20_000)), 'layer-truncated'],
      ['2.0.2', (files: Files) => files.delete('gerber/buttress-Edge_Cuts.gbr'), 'outline-missing']
    ] as const) {
      await release(version, 'B', change)
      const stops = (await page(version)).findings.filter((f) => f.severity === 'stop')
      expect(stops.map((f) => f.code)).toEqual([code])
    }
  })

  it('is compared once more when publishing: another may have been published since the check', async () => {
    await release('1.1.0', 'B')
    await release('1.1.1', 'B', lessHoles)
    expect((await page('1.1.1')).obstacles).toEqual([])
    await publish('1.1.0')
    await expect(publish('1.1.1')).rejects.toMatchObject({
      kind: 'impossible',
      errors: [{ message: expect.stringMatching(/^The drilled holes differ from release 1\.1\.0, .* revision B /) }]
    })
    expect((await page('1.1.1')).release.state).toBe('draft')
  })

  it('asks for another check when it changed while one was running', async () => {
    await draftRelease(world.deps, owner, 'ledger', draft('1.1.0', 'B'))
    const { check } = world.deps
    world.deps.check = async (input) => {
      await editDraft(world.deps, owner, 'ledger', '1.1.0', draft('1.1.0', 'C'))
      return check(input)
    }
    await upload('1.1.0')
    expect((await page('1.1.0')).checkState).toBe('none')
  })
})

describe('what is kept of a bundle', () => {
  it('stands beside the release, is replaced with the bundle, and never changes once published', async () => {
    await release('1.1.0', 'B')
    const id = await idOf('1.1.0')
    const parts = await listParts(world.db, id)
    const places = await listPlacements(world.db, id)
    const text = (await demoFiles('buttress-1.1.0')).get('assembly/buttress-bom.csv')!.toString()
    expect(parts.length).toBe(text.trim().split('\n').length - 1)
    expect(parts.find((part) => part.designators.includes('C1'))!.reading).toMatchObject({ kind: 'capacitor', unread: null })
    expect(places.length).toBeGreaterThan(5)
    expect((await listFingerprints(world.db, id)).map((print) => print.function)).toContain('drill')
    const row = await world.db.selectFrom('releases').select('outline_json').executeTakeFirstOrThrow()
    expect(JSON.parse(row.outline_json!)).toEqual({ minX: 0, minY: 0, maxX: 38, maxY: 14 })

    await upload('1.1.0', (files) =>
      edit(files, 'assembly/buttress-bom.csv', (bom) => bom.trim().split('\n').slice(0, -1).join('\n'))
    )
    expect(await listParts(world.db, id)).toHaveLength(parts.length - 1)
    await upload('1.1.0')
    await publish('1.1.0')
    for (const table of ['bom_lines', 'placements', 'layer_fingerprints'] as const)
      await expect(world.db.deleteFrom(table).execute()).rejects.toThrow('never changes')
  })

  it('is nothing where the zip was refused', async () => {
    await release('1.1.0', 'B')
    const id = await idOf('1.1.0')
    world.tick()
    await takeInBundle(world.deps, owner, 'ledger', '1.1.0', async () => world.file('no zip'))
    expect([await listParts(world.db, id), await listFingerprints(world.db, id)]).toEqual([[], []])
  })

  it('holds the place of a finding', async () => {
    world.deps.check = async () => {
      const { check } = await checkBundle(await zipOf(await demoFiles('buttress-1.1.0')))
      const findings = check.findings.map((f) => ({ ...f, place: { x: 1.5, y: 2, side: 'top' as const } }))
      return { check: { ...check, findings }, record: null, pictures: null }
    }
    await draftRelease(world.deps, owner, 'ledger', draft('1.1.0', 'B'))
    await takeInBundle(world.deps, owner, 'ledger', '1.1.0', async () => world.file('x'))
    for (const finding of (await page('1.1.0')).findings) expect(finding.place).toEqual({ x: 1.5, y: 2, side: 'top' })
  })
})
