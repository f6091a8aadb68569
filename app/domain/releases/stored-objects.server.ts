import type { Db } from '~db/client.server'
import { KeyedLock } from '~/lib/keyed-lock'
import { log } from '~/server/log.server'
import type { Storage } from '~/server/storage.server'
import * as layerPictures from './layer-pictures.repo.server'
import * as releases from './releases.repo.server'
import * as staged from './staged-objects.repo.server'

type Deps = { db: Db; storage: Storage; now: () => Date }

/** Putting and sweeping one key exclude each other; this process is the only one that writes. */
const keys = new KeyedLock()

const dayMs = 86_400_000
const sweepBatch = 200

/**
 * Stores a content under its key: written down as staged first, then put unless it is there already. The release that will refer to it
 * deletes the staged row in its own transaction; otherwise the sweep takes the object away after a day.
 */
export function putStaged(
  { db, storage, now }: Deps,
  key: string,
  sha256: string,
  content: { path: string; bytes: number; contentType: string } | { body: Buffer; contentType: string }
): Promise<void> {
  return keys.run(key, async () => {
    await staged.stage(db, key, now().toISOString())
    const common = { key, sha256, contentType: content.contentType, ifAbsent: true }
    if ('path' in content) await storage.putFile({ ...common, path: content.path, bytes: content.bytes })
    else await storage.putFile({ ...common, body: content.body, bytes: content.body.length })
  })
}

/**
 * Removes objects that were staged more than a day ago and that no release refers to; a staged row whose object is in use is forgotten.
 * @returns how many objects were removed
 */
export async function sweepStaged({ db, storage, now }: Deps): Promise<number> {
  const before = new Date(now().getTime() - dayMs).toISOString()
  let removed = 0
  for (const key of await staged.listOlderThan(db, before, sweepBatch))
    await keys.run(key, async () => {
      if (!(await staged.isOlderThan(db, key, before))) return
      const sha256 = key.split('/').at(-1)!
      if (!(await releases.refersTo(db, sha256)) && !(await layerPictures.isReferredTo(db, sha256))) {
        await storage.remove(key)
        removed += 1
      }
      await staged.unstage(db, key)
    })
  if (removed > 0) log('info', 'swept-staged', { removed })
  return removed
}
