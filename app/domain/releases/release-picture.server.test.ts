import { afterEach, beforeEach, expect, it } from 'vitest'
import { draftOf, openReleaseWorld, owner, stranger, type ReleaseWorld } from '../../../tests/factories/release-world'
import { objectKey } from '~/server/storage.server'
import { draftRelease } from './drafts.server'
import { openPicture } from './release-picture.server'
import { takeInBundle } from './take-in-bundle.server'

let world: ReleaseWorld
beforeEach(async () => {
  world = await openReleaseWorld()
  await draftRelease(world.deps, owner, 'ledger', draftOf('1.0.0'))
  await takeInBundle(world.deps, owner, 'ledger', '1.0.0', async () => world.file('zip'))
})
afterEach(() => world.close())

const open = (file: string, actor = owner) => {
  const request = { method: 'GET', headers: new Headers(), signal: new AbortController().signal }
  return openPicture(world.deps, actor, 'ledger', '1.0.0', file, request)
}

it('gives each picture as what it is', async () => {
  for (const [file, type] of [
    ['top.svg', 'image/svg+xml'],
    ['bottom.png', 'image/png'],
    ['layer-2.svg', 'image/svg+xml']
  ] as const) {
    const answer = await open(file)
    if (answer === 'storage-failed') throw new Error(file)
    expect(answer.headers['Content-Type']).toBe(type)
    const start = Buffer.concat(await answer.body!.toArray()).toString()
    expect(start.slice(0, 4)).toBe(type === 'image/png' ? 'png ' : '<svg')
  }
})

it('never gives a content of one kind as the other, whatever is stored', async () => {
  const { thumb_top_sha256: sha256 } = await world.db.selectFrom('releases').selectAll().executeTakeFirstOrThrow()
  const key = objectKey('picture', sha256!)
  const body = Buffer.from('<svg/>')
  await world.storage.putFile({ key, body, bytes: body.length, contentType: 'image/svg+xml' })
  expect(await open('top.png')).toBe('storage-failed')
})

it('hides a draft’s pictures from everybody else', async () => {
  for (const file of ['top.svg', 'top.png', 'layer-1.svg'])
    await expect(open(file, stranger)).rejects.toMatchObject({ kind: 'not-found' })
})
