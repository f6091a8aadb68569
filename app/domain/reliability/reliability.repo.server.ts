import type { Day } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import type { DbOrTx, Tx } from '~db/client.server'
import type { LifeHistory } from '../reports/observations'
import { pagesOfLives } from './lives.repo.server'
import type { FilterChoices } from './reliability-filters'

const published = ['trial', 'released', 'withdrawn'] as const
/** More than this is refused rather than half read. */
const maxLives = 1_000_000

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

/** The life histories of one release's units filed up to a day, on one console revision or all, of one batch or all. */
export async function listLives(
  tx: Tx,
  releaseId: string,
  revisionId: string | null,
  asOf: Day,
  batchId: string | null = null
): Promise<LifeHistory[]> {
  const lives: LifeHistory[] = []
  for await (const page of pagesOfLives(tx, { releaseId, revisionId, batchId, asOf })) {
    for (const life of page) lives.push(life)
    if (lives.length > maxLives) throw tooMany()
  }
  return lives
}

const tooMany = () =>
  new DomainError('impossible', 'There are more reports than one figure can be computed from. Narrow the filters.')
