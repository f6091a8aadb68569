import { sql } from 'kysely'
import type { DbOrTx } from '~db/client.server'

/** More than any console or site of this kind has; the lists below stop there. */
const mostRevisions = 100
const mostBoards = 200

export type ConsoleRow = NonNullable<Awaited<ReturnType<typeof findBySlug>>>
export type RevisionRow = Awaited<ReturnType<typeof listRevisions>>[number]

/** Consoles by their address, `limit` of them after the address `after`, with the number of boards made for each. */
export function list(db: DbOrTx, { after, limit }: { after?: string; limit: number }) {
  let query = db
    .selectFrom('consoles')
    .selectAll('consoles')
    .select((eb) =>
      eb
        .selectFrom('boards')
        .select((b) => b.fn.countAll<number>().as('n'))
        .whereRef('boards.console_id', '=', 'consoles.id')
        .as('boards')
    )
  if (after !== undefined) query = query.where('slug', '>', after)
  return query.orderBy('slug').limit(limit).execute()
}

export const findBySlug = (db: DbOrTx, slug: string) =>
  db.selectFrom('consoles').selectAll().where('slug', '=', slug).executeTakeFirst()

/** The revisions of some consoles, in the order in which they were built. */
export const listRevisions = (db: DbOrTx, consoleIds: string[]) =>
  consoleIds.length === 0
    ? Promise.resolve([])
    : db
        .selectFrom('console_revisions')
        .select(['id', 'console_id', 'code', 'position', 'built_from', 'recognise'])
        .where('console_id', 'in', consoleIds)
        .orderBy('console_id')
        .orderBy('position')
        .limit(mostRevisions * consoleIds.length)
        .execute()

/** The boards made for a console, by name, each with its newest released version (else its newest trial). */
export const listBoards = (db: DbOrTx, consoleId: string) =>
  db
    .selectFrom('boards')
    .select(['boards.id', 'boards.slug', 'boards.name', 'boards.summary'])
    .select((eb) =>
      eb
        .selectFrom('releases')
        .select('version')
        .whereRef('releases.board_id', '=', 'boards.id')
        .where('state', 'in', ['released', 'trial'])
        .orderBy(sql`state = 'released'`, 'desc')
        .orderBy('precedence_key', 'desc')
        .limit(1)
        .as('newest')
    )
    .where('console_id', '=', consoleId)
    .orderBy('name')
    .limit(mostBoards)
    .execute()

/** What is claimed about the revisions of a console by the boards made for it. */
export const listClaims = (db: DbOrTx, consoleId: string) =>
  db
    .selectFrom('fit_claims')
    .innerJoin('boards', 'boards.id', 'fit_claims.board_id')
    .select(['fit_claims.board_id', 'fit_claims.console_revision_id', 'fit_claims.claim', 'fit_claims.reason'])
    .where('boards.console_id', '=', consoleId)
    .limit(mostBoards * mostRevisions)
    .execute()

/** Install reports that count, by revision and board, for the revisions of a console. */
export const countReports = (db: DbOrTx, consoleId: string) =>
  db
    .selectFrom('install_reports')
    .innerJoin('console_revisions', 'console_revisions.id', 'install_reports.console_revision_id')
    .innerJoin('releases', 'releases.id', 'install_reports.release_id')
    .select(['install_reports.console_revision_id', 'releases.board_id'])
    .select((eb) => eb.fn.countAll<number>().as('n'))
    .where('console_revisions.console_id', '=', consoleId)
    .where('install_reports.excluded_at', 'is', null)
    .groupBy(['install_reports.console_revision_id', 'releases.board_id'])
    .execute()
