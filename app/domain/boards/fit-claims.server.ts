import type { Db } from '~db/client.server'
import { recordAudit } from '~/domain/audit/record.server'
import type { Actor } from '~/domain/accounts/can'
import { must } from '~/domain/accounts/must'
import { DomainError } from '~/lib/domain-error'
import type { FitClaim } from './board.schema'
import { boardBySlug } from './boards.server'
import * as repo from './fit-claims.repo.server'

/**
 * States for each console revision whether the board fits. Only what differs from before is written.
 * @param claims by the revision's id; ids of another console are refused
 * @throws DomainError `not-found`, `forbidden`, `invalid`
 */
export async function stateFitClaims(
  { db, now }: { db: Db; now: () => Date },
  actor: Actor,
  slug: string,
  claims: ReadonlyMap<string, FitClaim>
): Promise<void> {
  const board = await boardBySlug(db, slug)
  must(actor, 'board.edit', { boardId: board.id })
  const at = now().toISOString()
  await db.transaction().execute(async (tx) => {
    const before = new Map((await repo.listByBoard(tx, board.id, board.console_id)).map((c) => [c.revisionId, c]))
    const changed: { code: string; from: string; to: string }[] = []
    for (const [revisionId, { claim, reason }] of claims) {
      const old = before.get(revisionId)
      if (!old) throw new DomainError('invalid', `This revision is not one of the ${board.console_name}.`)
      if (old.claim === claim && old.reason === reason) continue
      changed.push({ code: old.code, from: old.claim, to: claim })
      await repo.upsert(tx, {
        board_id: board.id,
        console_revision_id: revisionId,
        claim,
        reason: reason,
        updated_at: at,
        updated_by: actor.userId
      })
    }
    if (changed.length > 0)
      await recordAudit(
        tx,
        { actorId: actor.userId, action: 'board.fit', subjectKind: 'board', subjectId: board.id, detail: { changed } },
        at
      )
  })
}
