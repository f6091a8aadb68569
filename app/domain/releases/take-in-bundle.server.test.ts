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
import { DomainError } from '~/lib/domain-error'
import { answerCautions, deleteDraft, draftRelease, editDraft } from './drafts.server'
import { publishRelease } from './publish.server'
import { releasePage } from './release-page.server'
import { sweepStaged } from './stored-objects.server'
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
    expect(await stagedKeys()).toEqual([])
    expect(await stored()).toHaveLength(3)
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
    expect(await stagedKeys()).toHaveLength(3)
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
  it('removes what no release refers to after a day, and nothing else', async () => {
    await upload('one')
    const kept = (await page()).bundle!
    await upload('two')
    expect((await stagedKeys()).filter((key) => key.startsWith('bundles/'))).toHaveLength(1)
    world.check.hook = () => Promise.reject(new Error('no child'))
    await expect(upload('orphan')).rejects.toThrow()
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
