import type { Day } from '~/lib/dates'
import { addDays, dayOf } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import type { DbOrTx, Tx } from '~db/client.server'
import type { LifeHistory } from '../reports/observations'
import type { FilterChoices } from './reliability-filters'

const published = ['trial', 'released', 'withdrawn'] as const
/** More than this is refused rather than half read. */
const maxRows = 1_000_000

export const findBoard = (db: DbOrTx, slug: string) =>
  db
    .selectFrom('boards as b')
    .innerJoin('consoles as k', 'k.id', 'b.console_id')
    .leftJoin('report_versions as w', 'w.board_id', 'b.id')
    .where('b.slug', '=', slug)
    .select(['b.id', 'b.slug', 'b.name', 'b.console_id', 'k.name as console_name', 'w.version as report_version'])
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

/**
 * The life histories of one release's units filed up to a day, on one console revision or all. Reads three lists along the same index and
 * joins them in memory.
 */
export async function listLives(tx: Tx, releaseId: string, revisionId: string | null, asOf: Day): Promise<LifeHistory[]> {
  // Reports filed on the day itself count; instants sort as text.
  const before = addDays(asOf, 1)
  const reports = await tx
    .selectFrom('install_reports as r')
    .leftJoin('failures as f', 'f.report_id', 'r.id')
    .leftJoin('units as u', 'u.tag', 'r.unit_tag')
    .where('r.release_id', '=', releaseId)
    .$if(revisionId !== null, (q) => q.where('r.console_revision_id', '=', revisionId))
    .where('r.filed_at', '<', before)
    .select([
      'r.id',
      'r.console_revision_id',
      'u.batch_id',
      'r.evidence',
      'r.method',
      'r.first_power',
      'r.installed_on',
      'r.filed_on',
      'r.excluded_at',
      'r.exclusion_kind',
      'f.last_running_on',
      'f.found_on',
      'f.cause',
      'f.created_at as failure_filed_at'
    ])
    .limit(maxRows + 1)
    .execute()
  if (reports.length > maxRows) throw tooMany()
  const lives = new Map<string, LifeHistory>()
  for (const r of reports)
    lives.set(r.id, {
      reportId: r.id,
      releaseId,
      revisionId: r.console_revision_id,
      batchId: r.batch_id,
      evidence: r.evidence,
      method: r.method,
      firstPower: r.first_power,
      installedOn: r.installed_on,
      filedOn: r.filed_on,
      exclusion: r.excluded_at === null ? null : { kind: r.exclusion_kind!, on: dayOf(r.excluded_at) },
      statements: [],
      failure:
        r.found_on === null
          ? null
          : { lastRunningOn: r.last_running_on, foundOn: r.found_on, cause: r.cause!, filedOn: dayOf(r.failure_filed_at!) }
    })
  const checkIns = await tx
    .selectFrom('install_reports as r')
    .innerJoin('check_ins as i', 'i.report_id', 'r.id')
    .where('r.release_id', '=', releaseId)
    .$if(revisionId !== null, (q) => q.where('r.console_revision_id', '=', revisionId))
    .where('r.filed_at', '<', before)
    .where('i.statement', 'in', ['running', 'parted'])
    .where('i.filed_at', '<', before)
    .select(['i.report_id', 'i.statement', 'i.stated_on', 'i.filed_at'])
    .limit(maxRows + 1)
    .execute()
  if (checkIns.length > maxRows) throw tooMany()
  for (const { report_id, statement, stated_on, filed_at } of checkIns)
    lives
      .get(report_id)!
      .statements.push({ statement: statement as 'running' | 'parted', statedOn: stated_on, filedOn: dayOf(filed_at) })
  return [...lives.values()]
}

const tooMany = () =>
  new DomainError('impossible', 'There are more reports than one figure can be computed from. Narrow the filters.')
