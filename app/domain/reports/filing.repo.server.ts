import type { DbOrTx } from '~db/client.server'

const published = ['trial', 'released', 'withdrawn'] as const

/** Boards with something published, by console, as the first step of a report. */
export const listReportableBoards = (db: DbOrTx, limit: number) =>
  db
    .selectFrom('boards as b')
    .innerJoin('consoles as k', 'k.id', 'b.console_id')
    .where((e) =>
      e.exists(e.selectFrom('releases as v').whereRef('v.board_id', '=', 'b.id').where('v.state', 'in', published).select('v.id'))
    )
    .orderBy('k.name')
    .orderBy('b.name')
    .select(['b.slug', 'b.name', 'b.replaces', 'k.name as console_name'])
    .limit(limit)
    .execute()

export const findBoard = (db: DbOrTx, slug: string) =>
  db
    .selectFrom('boards as b')
    .innerJoin('consoles as k', 'k.id', 'b.console_id')
    .where('b.slug', '=', slug)
    .select(['b.id', 'b.slug', 'b.name', 'b.replaces', 'b.console_id', 'k.name as console_name', 'k.slug as console_slug'])
    .executeTakeFirst()

/** Published releases of a board, the highest version first. */
export const listPublishedReleases = (db: DbOrTx, boardId: string, limit: number) =>
  db
    .selectFrom('releases')
    .where('board_id', '=', boardId)
    .where('state', 'in', published)
    .orderBy('precedence_key', 'desc')
    .select(['id', 'version', 'state', 'withdrawn_reason', 'published_at'])
    .limit(limit)
    .execute()

export const listRevisions = (db: DbOrTx, consoleId: string) =>
  db
    .selectFrom('console_revisions')
    .where('console_id', '=', consoleId)
    .orderBy('position')
    .select(['id', 'code', 'recognise'])
    .limit(100)
    .execute()

export const listFitClaims = (db: DbOrTx, boardId: string) =>
  db
    .selectFrom('fit_claims')
    .where('board_id', '=', boardId)
    .select(['console_revision_id', 'claim', 'reason'])
    .limit(100)
    .execute()

/** A release with the console its board is made for. */
export const findRelease = (db: DbOrTx, id: string) =>
  db
    .selectFrom('releases as v')
    .innerJoin('boards as b', 'b.id', 'v.board_id')
    .where('v.id', '=', id)
    .select(['v.id', 'v.state', 'b.console_id'])
    .executeTakeFirst()

export const findRevision = (db: DbOrTx, id: string) =>
  db.selectFrom('console_revisions').where('id', '=', id).select(['id', 'console_id']).executeTakeFirst()

/** A unit by its tag, with its batch and what it is. */
export const findUnit = (db: DbOrTx, tag: string) =>
  db
    .selectFrom('units as u')
    .innerJoin('batches as t', 't.id', 'u.batch_id')
    .innerJoin('releases as v', 'v.id', 't.release_id')
    .innerJoin('boards as b', 'b.id', 'v.board_id')
    .where('u.tag', '=', tag)
    .select([
      'u.tag',
      't.code as batch_code',
      't.made_on',
      'v.id as release_id',
      'v.version',
      'b.name as board_name',
      'b.slug as board_slug'
    ])
    .executeTakeFirst()

/** How many standing reports there are on a unit. */
export const countReportsOfUnit = async (db: DbOrTx, tag: string) => {
  const row = await db
    .selectFrom('install_reports')
    .where('unit_tag', '=', tag)
    .where('excluded_at', 'is', null)
    .select((e) => e.fn.countAll<number>().as('n'))
    .executeTakeFirstOrThrow()
  return row.n
}
