import { createHash } from 'node:crypto'
import { readdirSync } from 'node:fs'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import {
  answerOf,
  caution,
  draftOf,
  openReleaseWorld,
  owner,
  stop,
  type ReleaseWorld
} from '../../../tests/factories/release-world'
import type { BundlePictures } from '~/domain/bundle/bundle-check.types'
import { DomainError } from '~/lib/domain-error'
import { objectKey } from '~/server/storage.server'
import { answerCautions, deleteDraft, draftRelease, editDraft } from './drafts.server'
import { publishRelease } from './publish.server'
import { releasePage } from './release-page.server'
import { putStaged, sweepStaged } from './stored-objects.server'
import { takeInBundle } from './take-in-bundle.server'

let world: ReleaseWorld
beforeEach(async () => {
  world = await openReleaseWorld()
  await draftRelease(world.deps, owner, 'ledger', draftOf('1.0.0'))
})
afterEach(() => world.close())

const page = () => releasePage(world.db, owner, 'ledger', '1.0.0')
const upload = (content: string) => takeInBundle(world.deps, owner, 'ledger', '1.0.0', async () => world.file(content))
const stagedKeys = async () =>
  (await world.db.selectFrom('staged_objects').select('object_key').execute()).map((r) => r.object_key)
const stored = async () => (await world.storage.list('', 100)).objects.map((o) => o.key)
const dayMs = 86_400_000

describe('taking in a bundle', () => {
  it('writes down bundle, files, findings and pictures together and leaves nothing staged or in the folder', async () => {
    world.check.next = answerOf([caution()])
    const file = world.file('the zip')
    await takeInBundle(world.deps, owner, 'ledger', '1.0.0', async () => file)
    const now = await page()
    expect(now.bundle).toMatchObject({ sha256: file.sha256, bytes: 7, sentAs: 'a.zip', fileName: 'ledger-1.0.0.zip' })
    expect([now.checkState, now.files.length, now.findings.length]).toEqual(['done', 1, 1])
    expect(now.pictures.top).toContain('/picture/top.svg?v=')
    expect(now.thumbnails.bottom).toContain('/picture/bottom.png?v=')
    expect(now.pictureBox).toEqual({ minX: 0, minY: 0, maxX: 10, maxY: 5 })
    const [copper, holes] = now.layerPictures
    expect(copper).toMatchObject({ file: 'f.gbr', function: 'copper', side: 'top', index: 1 })
    expect(copper!.src).toMatch(/^\/boards\/ledger\/releases\/1\.0\.0\/picture\/layer-1\.svg\?v=[0-9a-f]{12}$/)
    expect(holes).toMatchObject({ file: null, function: 'drill', side: null, index: null })
    expect(await stagedKeys()).toEqual([])
    expect(await stored()).toHaveLength(7)
    expect(readdirSync(world.uploadDir)).toEqual([])
  })

  it('keeps an answer where the same finding comes back, and drops it where another one does', async () => {
    world.check.next = answerOf([caution()])
    await upload('one')
    await answerCautions(world.deps, owner, 'ledger', '1.0.0', new Map([[(await page()).findings[0]!.id, 'By hand.']]))
    world.check.next = answerOf([stop(), caution()])
    await upload('two')
    expect((await page()).findings.map((f) => f.answer)).toEqual([null, 'By hand.'])
    world.check.next = answerOf([caution('No paste layer for the bottom.')])
    await upload('three')
    expect((await page()).findings.map((f) => f.answer)).toEqual([null])
  })

  it('leaves the draft as it was when the file does not come whole, or the check fails on us', async () => {
    await upload('one')
    const before = await page()
    const broken = new DomainError('invalid', 'broken off')
    await expect(takeInBundle(world.deps, owner, 'ledger', '1.0.0', () => Promise.reject(broken))).rejects.toBe(broken)
    world.check.hook = () => Promise.reject(new Error('no child'))
    await expect(upload('two')).rejects.toThrow('no child')
    expect(await page()).toEqual(before)
    expect(readdirSync(world.uploadDir)).toEqual([])
  })

  it.each(['zip-too-large', 'zip-nested', 'check-cut-off'] as const)(
    'keeps nothing of a refused file but what was found (%s), and it takes the place of the bundle before',
    async (code) => {
      await upload('one')
      world.check.next = { ...answerOf([{ ...stop(), code }]), layers: [] }
      await upload('a bomb')
      const now = await page()
      expect(now.bundle).toBeNull()
      expect(now.refused).toEqual({ sentAs: 'a.zip', bytes: 6 })
      expect([now.checkState, now.findings.map((f) => f.code), now.files, now.pictures.top]).toEqual(['done', [code], [], null])
      expect(now.obstacles).not.toEqual([])
      expect(readdirSync(world.uploadDir)).toEqual([])
      const key = objectKey('bundle', createHash('sha256').update('a bomb').digest('hex'))
      expect(await stored()).not.toContain(key)
      world.tick(dayMs + 1)
      await sweepStaged(world.deps)
      expect([await stored(), await stagedKeys()]).toEqual([[], []])
      world.check.next = answerOf([])
      await upload('good')
      expect([(await page()).bundle!.bytes, (await page()).refused]).toEqual([4, null])
    }
  )

  it('takes one upload at a time for a draft', async () => {
    const nothing = () => {}
    let go = nothing
    world.check.hook = () => new Promise((resolve) => (go = resolve))
    const first = upload('one')
    await expect.poll(() => go).not.toBe(nothing)
    world.check.hook = async () => {}
    const second = upload('two')
    go()
    await Promise.all([first, second])
    expect((await page()).bundle!.bytes).toBe(3)
    expect((await world.db.selectFrom('releases').select('check_state').executeTakeFirstOrThrow()).check_state).toBe('done')
  })

  it('writes nothing when the draft was deleted while the check ran', async () => {
    world.check.hook = () => deleteDraft(world.deps, owner, 'ledger', '1.0.0')
    await expect(upload('one')).rejects.toMatchObject({ kind: 'conflict' })
    expect(await world.db.selectFrom('findings').selectAll().execute()).toEqual([])
    expect(await stagedKeys()).toHaveLength(7)
  })

  it('asks for another check when the declared details changed meanwhile', async () => {
    world.check.hook = async () => {
      await editDraft(world.deps, owner, 'ledger', '1.0.0', draftOf('1.0.0', { thicknessMm: 0.8 }))
    }
    await upload('one')
    const now = await page()
    expect([now.checkState, now.obstacles[0]?.kind]).toEqual(['none', 'not-checked'])
  })
})

describe('the sweep', () => {
  const drawn = (name: string): Partial<BundlePictures> => ({
    top: `<svg>${name} top</svg>`,
    thumbnails: { top: Buffer.from(`${name} top`), bottom: Buffer.from('bottom of all') },
    layers: [{ file: 'f.gbr', function: 'copper', side: 'top', index: 1, svg: `<svg>${name} copper</svg>` }]
  })
  const keyOf = (content: string) => objectKey('picture', createHash('sha256').update(content).digest('hex'))
  const sweep = async () => {
    world.tick(dayMs + 1)
    await sweepStaged(world.deps)
  }

  it('takes the pictures of the former bundle away, thumbnails and layers too, and keeps those in use', async () => {
    const former = ['<svg>one top</svg>', 'one top', '<svg>one copper</svg>'].map(keyOf)
    const used = ['<svg>two top</svg>', 'two top', '<svg>two copper</svg>', 'bottom of all'].map(keyOf)
    world.check.pictures = drawn('one')
    await upload('one')
    expect(await stored()).toEqual(expect.arrayContaining(former))
    world.check.pictures = drawn('two')
    await upload('two')
    expect(await stagedKeys()).toEqual(expect.arrayContaining(former))
    await sweep()
    const left = await stored()
    expect(left).toEqual(expect.arrayContaining(used))
    for (const key of former) expect(left).not.toContain(key)
    await deleteDraft(world.deps, owner, 'ledger', '1.0.0')
    await sweep()
    expect(await stored()).toEqual([])
  })

  it('keeps a layer and a thumbnail that another release shares', async () => {
    world.check.pictures = drawn('same')
    await upload('one')
    await draftRelease(world.deps, owner, 'ledger', draftOf('1.0.1'))
    await takeInBundle(world.deps, owner, 'ledger', '1.0.1', async () => world.file('two'))
    await deleteDraft(world.deps, owner, 'ledger', '1.0.1')
    await sweep()
    expect(await stored()).toEqual(expect.arrayContaining(['same top', '<svg>same copper</svg>'].map(keyOf)))
    expect(await stagedKeys()).toEqual([])
  })

  it('removes what no release refers to after a day, and nothing else', async () => {
    await upload('one')
    const kept = (await page()).bundle!
    await upload('two')
    expect((await stagedKeys()).filter((key) => key.startsWith('bundles/'))).toHaveLength(1)
    await putStaged(world.deps, keyOf('orphan'), createHash('sha256').update('orphan').digest('hex'), {
      body: Buffer.from('orphan'),
      contentType: 'image/svg+xml'
    })
    expect(await sweepStaged(world.deps)).toBe(0)
    world.tick(dayMs + 1)
    const before = (await stored()).length
    const removed = await sweepStaged(world.deps)
    expect(removed).toBeGreaterThanOrEqual(2)
    expect(await stored()).toHaveLength(before - removed)
    expect(await stagedKeys()).toEqual([])
    const now = (await page()).bundle!
    expect(now.sha256).not.toBe(kept.sha256)
    expect(await stored()).toContain(`bundles/${now.sha256.slice(0, 2)}/${now.sha256}`)
  })

  it('keeps an object that a published release shares with a deleted draft', async () => {
    await upload('same')
    const { bundle, release } = await page()
    await publishRelease(world.deps, owner, 'ledger', '1.0.0', { bundle: bundle!.sha256, updatedAt: release.updatedAt })
    await draftRelease(world.deps, owner, 'ledger', draftOf('1.0.1'))
    await takeInBundle(world.deps, owner, 'ledger', '1.0.1', async () => world.file('same'))
    await deleteDraft(world.deps, owner, 'ledger', '1.0.1')
    world.tick(dayMs + 1)
    await sweepStaged(world.deps)
    expect(await stored()).toContain(`bundles/${bundle!.sha256.slice(0, 2)}/${bundle!.sha256}`)
    expect(await stagedKeys()).toEqual([])
  })
})
