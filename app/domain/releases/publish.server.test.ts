import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import {
  answerOf,
  caution,
  draftOf,
  openReleaseWorld,
  owner,
  stop,
  stranger,
  type ReleaseWorld
} from '../../../tests/factories/release-world'
import { visitor } from '../accounts/can'
import { answerCautions, deleteDraft, draftRelease, editDraft } from './drafts.server'
import { publishRelease, withdrawRelease } from './publish.server'
import { releasePage } from './release-page.server'
import { recheckBundle, takeInBundle } from './take-in-bundle.server'

let world: ReleaseWorld
beforeEach(async () => (world = await openReleaseWorld()))
afterEach(() => world.close())

const page = (version = '1.0.0') => releasePage(world.db, owner, 'ledger', version)
const upload = (content: string, version = '1.0.0') =>
  takeInBundle(world.deps, owner, 'ledger', version, async () => world.file(content))
const wish = async (version = '1.0.0') => {
  const { bundle, release } = await page(version)
  return { bundle: bundle!.sha256, updatedAt: release.updatedAt }
}
const publish = async (version = '1.0.0', w?: Awaited<ReturnType<typeof wish>>) =>
  publishRelease(world.deps, owner, 'ledger', version, w ?? (await wish(version)))
const audit = async () => (await world.db.selectFrom('audit_log').select('action').orderBy('at').execute()).map((r) => r.action)

describe('publishing', () => {
  beforeEach(() => draftRelease(world.deps, owner, 'ledger', draftOf('1.0.0')))

  it('wants a checked bundle without stops and every caution answered, then never changes', async () => {
    await expect(
      publishRelease(world.deps, owner, 'ledger', '1.0.0', { bundle: 'a'.repeat(64), updatedAt: '' })
    ).rejects.toMatchObject({
      kind: 'conflict'
    })
    world.check.next = answerOf([stop(), caution()])
    await upload('one')
    expect((await page()).obstacles.map((o) => o.kind)).toEqual(['stops', 'cautions'])
    await expect(publish()).rejects.toMatchObject({ kind: 'impossible' })

    world.check.next = answerOf([caution()])
    world.tick()
    await upload('two')
    await expect(publish()).rejects.toMatchObject({ kind: 'impossible', errors: [{ message: 'One caution wants your answer.' }] })
    const { findings } = await page()
    await answerCautions(world.deps, owner, 'ledger', '1.0.0', new Map([[findings[0]!.id, 'Soldered by hand.']]))
    await publish()
    const published = await page()
    expect(published.release.state).toBe('released')
    expect(published.findings[0]!.answer).toBe('Soldered by hand.')
    expect(await audit()).toEqual(
      expect.arrayContaining(['release.draft', 'release.bundle', 'release.answer', 'release.publish'])
    )

    for (const attempt of [
      () => publish(),
      () => deleteDraft(world.deps, owner, 'ledger', '1.0.0'),
      () => editDraft(world.deps, owner, 'ledger', '1.0.0', draftOf('1.0.1')),
      () => upload('three'),
      () => recheckBundle(world.deps, owner, 'ledger', '1.0.0'),
      () => answerCautions(world.deps, owner, 'ledger', '1.0.0', new Map())
    ])
      await expect(attempt()).rejects.toMatchObject({ name: 'DomainError' })
    const update = (set: object) => world.db.updateTable('releases').set(set).where('version', '=', '1.0.0').execute()
    for (const set of [{ bundle_sha256: 'b'.repeat(64) }, { notes_md: 'x' }, { version: '1.0.1' }, { facts_json: '{}' }])
      await expect(update(set)).rejects.toThrow('a published release never changes')
    await expect(update({ state: 'draft' })).rejects.toThrow('does not go back')
    await expect(world.db.deleteFrom('releases').execute()).rejects.toThrow('never deleted')
    await expect(world.db.updateTable('findings').set({ answer: 'x' }).execute()).rejects.toThrow('never changes')
    await expect(world.db.deleteFrom('findings').execute()).rejects.toThrow('never changes')
    await expect(world.db.deleteFrom('release_files').execute()).rejects.toThrow('never changes')
    expect((await page()).bundle!.sha256).toBe(published.bundle!.sha256)
  })

  it('lets one of two publishers through and tells the other', async () => {
    await upload('one')
    const w = await wish()
    const results = await Promise.allSettled([publish('1.0.0', w), publish('1.0.0', w)])
    expect(results.map((r) => r.status).sort()).toEqual(['fulfilled', 'rejected'])
    expect((results.find((r) => r.status === 'rejected') as PromiseRejectedResult).reason).toMatchObject({ kind: 'conflict' })
  })

  it('refuses when another bundle came in since the page was opened', async () => {
    await upload('one')
    const w = await wish()
    world.tick()
    await upload('two')
    await expect(publish('1.0.0', w)).rejects.toMatchObject({ kind: 'conflict' })
    expect((await page()).release.state).toBe('draft')
  })

  it('refuses while the check runs, and when it was cut short', async () => {
    await upload('one')
    const w = await wish()
    const nothing = () => {}
    let go = nothing
    const stored = async () => (await world.db.selectFrom('releases').select('check_state').executeTakeFirstOrThrow()).check_state
    world.check.hook = () => new Promise((resolve) => (go = resolve))
    const second = upload('one')
    await expect.poll(stored).toBe('running')
    await expect(publish('1.0.0', w)).rejects.toMatchObject({ kind: 'impossible' })
    await expect.poll(() => go).not.toBe(nothing)
    go()
    await second
    await world.db.updateTable('releases').set({ check_state: 'running' }).execute()
    expect((await page()).checkState).toBe('interrupted')
    world.check.hook = async () => {}
    await recheckBundle(world.deps, owner, 'ledger', '1.0.0')
    expect((await page()).checkState).toBe('done')
  })

  it('makes a pre-release a trial, and a version used once stays used', async () => {
    await draftRelease(world.deps, owner, 'ledger', draftOf('1.1.0-beta.1'))
    await upload('beta', '1.1.0-beta.1')
    await publish('1.1.0-beta.1')
    expect((await page('1.1.0-beta.1')).release.state).toBe('trial')
    for (const version of ['1.1.0-beta.1', '1.1.0-beta.1+again', '1.0.0', '1.0.0+b'])
      await expect(draftRelease(world.deps, owner, 'ledger', draftOf(version))).rejects.toMatchObject({
        kind: 'conflict',
        errors: [{ path: 'version' }]
      })
    await draftRelease(world.deps, owner, 'ledger', draftOf('1.1.0-beta.2'))
    await expect(editDraft(world.deps, owner, 'ledger', '1.1.0-beta.2', draftOf('1.1.0-beta.1+x'))).rejects.toMatchObject({
      kind: 'conflict'
    })
  })

  it('is withdrawn once, with its reason, and stays', async () => {
    await upload('one')
    await publish()
    await withdrawRelease(world.deps, owner, 'ledger', '1.0.0', 'C13 can short.')
    const seen = await releasePage(world.db, visitor, 'ledger', '1.0.0')
    expect(seen.release).toMatchObject({ state: 'withdrawn', withdrawnReason: 'C13 can short.' })
    expect(seen.bundle).not.toBeNull()
    await expect(withdrawRelease(world.deps, owner, 'ledger', '1.0.0', 'Again and again.')).rejects.toMatchObject({
      kind: 'conflict'
    })
  })

  it('keeps drafts from others, without saying that they are there', async () => {
    for (const actor of [visitor, stranger])
      await expect(releasePage(world.db, actor, 'ledger', '1.0.0')).rejects.toMatchObject({ kind: 'not-found' })
    await expect(draftRelease(world.deps, stranger, 'ledger', draftOf('2.0.0'))).rejects.toMatchObject({ kind: 'forbidden' })
    await expect(draftRelease(world.deps, visitor, 'ledger', draftOf('2.0.0'))).rejects.toMatchObject({ kind: 'unauthenticated' })
    await upload('one')
    await publish()
    await expect(withdrawRelease(world.deps, stranger, 'ledger', '1.0.0', 'Not mine at all.')).rejects.toMatchObject({
      kind: 'forbidden'
    })
  })
})
