import { sql } from 'kysely'
import { addDays, dayOf, type Day } from '~/lib/dates'
import type { Tx } from '~db/client.server'
import type { LifeHistory } from '../reports/observations'

const lifeRows = (tx: Tx) =>
  tx
    .selectFrom('install_reports as r')
    .leftJoin('failures as f', 'f.report_id', 'r.id')
    .leftJoin('units as u', 'u.tag', 'r.unit_tag')
    .select([
      'r.id',
      'r.release_id',
      'r.console_revision_id',
      'u.batch_id',
      'r.evidence',
      'r.method',
      'r.first_power',
      'r.installed_on',
      'r.filed_on',
      'r.filed_at',
      'r.excluded_at',
      'r.exclusion_kind',
      'f.last_running_on',
      'f.found_on',
      'f.cause',
      'f.created_at as failure_filed_at'
    ])

export type LifeRow = Awaited<ReturnType<ReturnType<typeof lifeRows>['execute']>>[number]

/** A report and its failure as a life history, still without its check-ins. */
const lifeOf = (r: LifeRow): LifeHistory => ({
  reportId: r.id,
  releaseId: r.release_id,
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

/** Reads the check-ins of reports into their life histories. */
async function withStatements(tx: Tx, rows: LifeRow[], before: Day | null): Promise<LifeHistory[]> {
  const lives = new Map(rows.map((row) => [row.id, lifeOf(row)]))
  const checkIns = await tx
    .selectFrom('check_ins as i')
    .where('i.report_id', 'in', sql<string>`(select value from json_each(${JSON.stringify([...lives.keys()])}))`)
    .where('i.statement', 'in', ['running', 'parted'])
    .$if(before !== null, (q) => q.where('i.filed_at', '<', before!))
    .select(['i.report_id', 'i.statement', 'i.stated_on', 'i.filed_at'])
    .execute()
  for (const { report_id, statement, stated_on, filed_at } of checkIns)
    lives
      .get(report_id)!
      .statements.push({ statement: statement as 'running' | 'parted', statedOn: stated_on, filedOn: dayOf(filed_at) })
  return [...lives.values()]
}

/** The whole life history of one report. */
export async function findLife(tx: Tx, reportId: string): Promise<LifeHistory | null> {
  const row = await lifeRows(tx).where('r.id', '=', reportId).executeTakeFirst()
  return row === undefined ? null : (await withStatements(tx, [row], null))[0]!
}

export const livesPage = 2_000

export type LivesAsked = {
  releaseId: string
  revisionId?: string | null
  batchId?: string | null
  /** Only what was filed by the end of this day; null for everything. */
  asOf?: Day | null
}

/** The life histories of one release's units as they were filed, in pages along an index: memory does not grow with their number. */
export async function* pagesOfLives(tx: Tx, { releaseId, revisionId, batchId, asOf }: LivesAsked): AsyncGenerator<LifeHistory[]> {
  // Reports filed on the day itself count; instants sort as text.
  const before = asOf == null ? null : addDays(asOf, 1)
  for (let last: LifeRow | undefined; ;) {
    const rows: LifeRow[] = await lifeRows(tx)
      .where('r.release_id', '=', releaseId)
      .$if(revisionId != null, (q) => q.where('r.console_revision_id', '=', revisionId!))
      .$if(batchId != null, (q) => q.where('u.batch_id', '=', batchId!))
      .$if(before !== null, (q) => q.where('r.filed_at', '<', before!))
      .$if(last !== undefined, (q) =>
        q.where(({ eb, refTuple, tuple }) => eb(refTuple('r.filed_at', 'r.id'), '>', tuple(last!.filed_at, last!.id)))
      )
      .orderBy('r.filed_at')
      .orderBy('r.id')
      .limit(livesPage)
      .execute()
    if (rows.length > 0) yield await withStatements(tx, rows, before)
    if (rows.length < livesPage) return
    last = rows.at(-1)
  }
}
