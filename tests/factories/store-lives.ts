import type { LifeHistory } from '~/domain/reports/observations'
import type { Db } from '~db/client.server'

/** Writes life histories into the report world as their reports, check-ins and failures; a batch's units get tags of their own. Counts nothing. */
export async function storeLives(db: Db, lives: readonly LifeHistory[], prefix = 'life'): Promise<void> {
  const at = (day: string) => `${day}T10:00:00.000Z`
  await db.transaction().execute(async (tx) => {
    for (const [i, life] of lives.entries()) {
      const id = `${prefix}${i}`
      const tag = life.batchId === null ? null : `${prefix}-${i}`
      if (tag !== null)
        await tx
          .insertInto('units')
          .values({ tag, batch_id: life.batchId!, created_at: at('2020-01-01') })
          .execute()
      await tx
        .insertInto('install_reports')
        .values({
          id,
          release_id: life.releaseId,
          unit_tag: tag,
          console_revision_id: life.revisionId,
          reporter_id: 'ann',
          installed_on: life.installedOn,
          filed_on: life.filedOn,
          filed_at: at(life.filedOn),
          evidence: life.evidence,
          method: life.method,
          first_power: life.firstPower,
          ...(life.exclusion && {
            excluded_at: at(life.exclusion.on),
            excluded_by: 'stu',
            exclusion_kind: life.exclusion.kind,
            exclusion_reason: 'As somebody else can see.'
          })
        })
        .execute()
      for (const [k, { statement, statedOn, filedOn }] of life.statements.entries())
        await tx
          .insertInto('check_ins')
          .values({ id: `${id}-${k}`, report_id: id, statement, stated_on: statedOn, filed_at: at(filedOn) })
          .execute()
      if (life.failure === null) continue
      const { foundOn, lastRunningOn, cause, filedOn } = life.failure
      const isTold = life.firstPower === 'works'
      if (isTold)
        await tx
          .insertInto('check_ins')
          .values({ id: `${id}-f`, report_id: id, statement: 'failed', stated_on: foundOn, filed_at: at(filedOn) })
          .execute()
      await tx
        .insertInto('failures')
        .values({
          report_id: id,
          check_in_id: isTold ? `${id}-f` : null,
          last_running_on: lastRunningOn,
          found_on: foundOn,
          cause,
          created_at: at(filedOn)
        })
        .execute()
    }
  })
}
