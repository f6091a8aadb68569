import type { Actor } from '~/domain/accounts/can'
import { must } from '~/domain/accounts/must'
import { recordAudit } from '~/domain/audit/record.server'
import { dayOf } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import { newId } from '~/lib/new-id'
import type { Services } from '~/server/services.server'
import { withCounts } from '../reliability/keep-counts.server'
import { statementErrors, whyEnded } from './check-in-rules'
import type { CheckInInput, ExclusionInput, InstallReportInput } from './report.schema'
import * as repo from './reports.repo.server'
import { latestDay, saidSoFar, storedFilingErrors } from './stored-errors.server'

const entry = (actor: Actor, action: string, subjectId: string, detail: Record<string, string>) => ({
  actorId: actor.userId,
  action,
  subjectKind: 'report' as const,
  subjectId,
  detail
})

const noReport = () => new DomainError('not-found', 'There is no such report.')

/**
 * Files an install report, with its failure on day 0 when it did not work at first power. The same form sent twice gives one report.
 * @returns the report's id
 * @throws DomainError `invalid` with messages at the fields, `unauthenticated`, `forbidden`, `conflict`
 */
export async function fileReport({ db, now }: Services, actor: Actor, input: InstallReportInput): Promise<{ id: string }> {
  must(actor, 'report.file', null)
  const at = now()
  return db.transaction().execute(async (tx) => {
    const sent = await repo.findByFormKey(tx, input.form_key)
    if (sent) {
      if (sent.reporter_id === actor.userId) return { id: sent.id }
      throw new DomainError('conflict', 'This form was used before. Load it again.')
    }
    const errors = await storedFilingErrors(tx, input, at)
    if (errors.length > 0) throw new DomainError('invalid', 'This report cannot be filed yet.', errors)

    const id = newId()
    await withCounts(tx, id, async () => {
      await repo.insertReport(tx, {
        id,
        release_id: input.release,
        console_revision_id: input.revision,
        unit_tag: input.unit_tag ?? null,
        reporter_id: actor.userId,
        installed_on: input.installed_on,
        filed_on: dayOf(at),
        filed_at: at.toISOString(),
        evidence: input.evidence,
        method: input.method ?? null,
        first_power: input.first_power,
        notes: input.notes ?? '',
        form_key: input.form_key
      })
      if (input.first_power !== 'works')
        await repo.insertFailure(tx, {
          report_id: id,
          check_in_id: null,
          last_running_on: null,
          found_on: input.installed_on,
          cause: input.cause ?? 'unknown',
          created_at: at.toISOString()
        })
    })
    await recordAudit(
      tx,
      entry(actor, 'report.file', id, { release: input.release, firstPower: input.first_power }),
      at.toISOString()
    )
    return { id }
  })
}

/**
 * Adds a check-in to one's own report; `failed` records the failure with its cause. The same form sent twice gives one check-in.
 * @throws DomainError `not-found`, `forbidden`, `conflict` when the history has ended, `invalid` with messages at the fields
 */
export async function addCheckIn({ db, now }: Services, actor: Actor, reportId: string, input: CheckInInput): Promise<void> {
  const at = now()
  await db.transaction().execute(async (tx) => {
    const report = await repo.findById(tx, reportId)
    if (!report) throw noReport()
    must(actor, 'report.check-in', { reporterId: report.reporter_id, isExcluded: report.excluded_at !== null })
    const sent = await repo.findCheckInByFormKey(tx, input.form_key)
    if (sent) {
      if (sent.report_id === reportId) return
      throw new DomainError('conflict', 'This form was used before. Load it again.')
    }
    const said = await saidSoFar(tx, reportId, report.installed_on)
    const ended = whyEnded(said)
    if (ended !== null) throw new DomainError('conflict', ended)
    if ((await repo.countCheckIns(tx, reportId)) >= repo.maxCheckIns)
      throw new DomainError('conflict', `A report takes ${repo.maxCheckIns} check-ins at most.`)
    const isFailure = input.statement === 'failed'
    const next = {
      statement: input.statement,
      statedOn: input.stated_on,
      lastRunningOn: isFailure ? (input.last_running_on ?? null) : null,
      cause: isFailure ? input.cause : null
    }
    const errors = statementErrors(said, next, latestDay(at))
    if (errors.length > 0) throw new DomainError('invalid', 'This check-in cannot be filed yet.', errors)

    const id = newId()
    const notes = input.notes ?? ''
    const filedAt = at.toISOString()
    await withCounts(tx, reportId, async () => {
      await repo.insertCheckIn(tx, {
        id,
        report_id: reportId,
        statement: input.statement,
        stated_on: input.stated_on,
        filed_at: filedAt,
        filed_by: actor.userId,
        notes,
        form_key: input.form_key
      })
      if (isFailure)
        await repo.insertFailure(tx, {
          report_id: reportId,
          check_in_id: id,
          last_running_on: next.lastRunningOn,
          found_on: input.stated_on,
          cause: input.cause,
          notes,
          created_at: filedAt
        })
    })
    await recordAudit(tx, entry(actor, 'report.check-in', reportId, { statement: input.statement, on: input.stated_on }), filedAt)
  })
}

/**
 * Takes a report out of every figure, for a public reason that stays counted. A steward's alone.
 * @throws DomainError `not-found`, `forbidden`, `conflict` when it is excluded already
 */
export async function excludeReport({ db, now }: Services, actor: Actor, reportId: string, input: ExclusionInput): Promise<void> {
  const at = now()
  await db.transaction().execute(async (tx) => {
    const report = await repo.findById(tx, reportId)
    if (!report) throw noReport()
    must(actor, 'report.exclude', { reporterId: report.reporter_id, isExcluded: false })
    if (report.excluded_at !== null) throw new DomainError('conflict', 'This report is excluded already.')
    await withCounts(tx, reportId, () => repo.markExcluded(tx, reportId, actor.userId!, at.toISOString(), input))
    await recordAudit(tx, entry(actor, 'report.exclude', reportId, { kind: input.kind }), at.toISOString())
  })
}

/** A report with its check-ins and its failure, for its page. */
export async function reportWithHistory({ db }: Services, reportId: string) {
  const report = await repo.findById(db, reportId)
  if (!report) throw noReport()
  const [checkIns, failure] = [await repo.listCheckIns(db, reportId), await repo.findFailure(db, reportId)]
  const parted = checkIns.find((c) => c.statement === 'parted')
  return { report, checkIns, failure: failure ?? null, isOpen: !failure && !parted }
}

export const myReportsPageSize = 20

/** One page of one's own reports, newest first. */
export async function myReports({ db }: Services, actor: Actor, page: number) {
  must(actor, 'report.file', null)
  const total = await repo.countByReporter(db, actor.userId!)
  const reports = await repo.listByReporter(db, actor.userId!, myReportsPageSize, (page - 1) * myReportsPageSize)
  return { reports, total }
}
