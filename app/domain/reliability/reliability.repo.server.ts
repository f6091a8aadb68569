import type { DbOrTx } from '~db/client.server'
import type { FilterChoices } from './reliability-filters'

const published = ['trial', 'released', 'withdrawn'] as const

export const findBoard = (db: DbOrTx, slug: string) =>
  db
    .selectFrom('boards as b')
    .innerJoin('consoles as k', 'k.id', 'b.console_id')
    .leftJoin('report_versions as w', 'w.board_id', 'b.id')
    .where('b.slug', '=', slug)
    .select([
      'b.id',
      'b.slug',
      'b.name',
      'b.console_id',
      'k.name as console_name',
      'k.slug as console_slug',
      'w.version as report_version'
    ])
    .executeTakeFirst()

/** Published releases, the highest version first. */
export const listReleases = (db: DbOrTx, boardId: string) =>
  db
    .selectFrom('releases')
    .where('board_id', '=', boardId)
    .where('state', 'in', published)
    .orderBy('precedence_key', 'desc')
    .select(['id', 'version', 'state', 'board_revision'])
    .limit(500)
    .execute()

export const maxBatches = 1_000

/** What the filters of a board's figures can name. */
export const choicesOf = (
  releases: readonly { version: string; board_revision: string }[],
  revisions: readonly { code: string }[],
  batches: readonly { version: string; code: string }[]
): FilterChoices => ({
  releases: releases.map((r) => ({ version: r.version, boardRevision: r.board_revision })),
  revisions: revisions.map((r) => r.code),
  batches
})

/** The newest batches of a board's published releases. */
export const listBatches = (db: DbOrTx, boardId: string, limit: number) =>
  db
    .selectFrom('batches as t')
    .innerJoin('releases as v', 'v.id', 't.release_id')
    .where('v.board_id', '=', boardId)
    .where('v.state', 'in', published)
    .orderBy('t.made_on', 'desc')
    .orderBy('t.code', 'desc')
    .select(['t.id', 't.code', 't.made_on', 't.quantity', 't.release_id', 'v.version'])
    .limit(limit)
    .execute()

export const listRevisions = (db: DbOrTx, consoleId: string) =>
  db
    .selectFrom('console_revisions')
    .where('console_id', '=', consoleId)
    .orderBy('position')
    .select(['id', 'code'])
    .limit(100)
    .execute()
