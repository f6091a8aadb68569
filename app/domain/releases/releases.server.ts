import type { Db, DbOrTx } from '~db/client.server'
import { can, type Actor } from '~/domain/accounts/can'
import { boardBySlug, type BoardRow } from '~/domain/boards/boards.server'
import { DomainError } from '~/lib/domain-error'
import * as repo from './releases.repo.server'
import { precedenceKey, readVersion } from './version'

export type Found = { board: BoardRow; release: repo.ReleaseRow }

/** The sentence for an address without a release; drafts are not given away. */
async function noSuchRelease(db: DbOrTx, board: BoardRow, version: string): Promise<DomainError> {
  const others = (await repo.listByBoard(db, board.id)).filter((r) => r.state !== 'draft').map((r) => r.version)
  const list = others.length === 0 ? 'It has none yet.' : `Its releases are ${others.slice(0, 12).join(', ')}.`
  return new DomainError('not-found', `There is no release ${version.slice(0, 64)} of ${board.name}. ${list}`)
}

/**
 * The release at an address, spelled exactly as it was published. A draft is there for its maintainers only.
 * @throws DomainError `not-found`
 */
export async function findRelease(db: Db, actor: Actor, slug: string, version: string): Promise<Found> {
  const board = await boardBySlug(db, slug)
  const read = readVersion(version)
  const release = read.ok ? await repo.findByVersion(db, board.id, precedenceKey(read.version)) : undefined
  if (!release || release.version !== version) throw await noSuchRelease(db, board, version)
  if (!can(actor, 'release.see', { boardId: board.id, state: release.state })) throw await noSuchRelease(db, board, version)
  return { board, release }
}
