import type { Insertable } from 'kysely'
import type { DbOrTx } from '~db/client.server'
import type { FitClaimsTable } from '~db/schema'

/** Every revision of the console with the claim of the board, `untested` where none was made. */
export async function listByBoard(db: DbOrTx, boardId: string, consoleId: string) {
  const rows = await db
    .selectFrom('console_revisions')
    .leftJoin('fit_claims', (join) =>
      join.onRef('fit_claims.console_revision_id', '=', 'console_revisions.id').on('fit_claims.board_id', '=', boardId)
    )
    .select([
      'console_revisions.id',
      'console_revisions.code',
      'console_revisions.recognise',
      'fit_claims.claim',
      'fit_claims.reason',
      'fit_claims.updated_at'
    ])
    .where('console_revisions.console_id', '=', consoleId)
    .orderBy('console_revisions.position')
    .limit(100)
    .execute()
  return rows.map((row) => ({
    revisionId: row.id,
    code: row.code,
    recognise: row.recognise,
    claim: row.claim ?? ('untested' as const),
    reason: row.reason ?? '',
    updatedAt: row.updated_at
  }))
}

export const upsert = (db: DbOrTx, claim: Insertable<FitClaimsTable>) =>
  db
    .insertInto('fit_claims')
    .values(claim)
    .onConflict((oc) =>
      oc.columns(['board_id', 'console_revision_id']).doUpdateSet((eb) => ({
        claim: eb.ref('excluded.claim'),
        reason: eb.ref('excluded.reason'),
        updated_at: eb.ref('excluded.updated_at'),
        updated_by: eb.ref('excluded.updated_by')
      }))
    )
    .execute()

/** Claims about revisions of another console than the board's are dropped. */
export const deleteForOtherConsoles = (db: DbOrTx, boardId: string, consoleId: string) =>
  db
    .deleteFrom('fit_claims')
    .where('board_id', '=', boardId)
    .where('console_revision_id', 'not in', (eb) =>
      eb.selectFrom('console_revisions').select('id').where('console_id', '=', consoleId)
    )
    .execute()
