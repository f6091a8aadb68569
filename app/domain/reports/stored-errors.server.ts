import { addDays, dayOf, type Day } from '~/lib/dates'
import type { FieldError } from '~/lib/domain-error'
import type { Services } from '~/server/services.server'
import type { DbOrTx } from '~db/client.server'
import { statementErrors, whyEnded, type SaidSoFar } from './check-in-rules'
import * as filing from './filing.repo.server'
import { filingErrors } from './filing-rules'
import type { InstallReportInput } from './report.schema'
import type { Cause, Statement } from './report-words'
import * as repo from './reports.repo.server'

/** The last day that today can be anywhere on earth. */
export const latestDay = (now: Date): Day => addDays(dayOf(now), 1)

type NamedThings = Partial<Pick<InstallReportInput, 'release' | 'revision' | 'unit_tag' | 'installed_on'>>

/** What the stored data has against a report, at its fields, as far as these could be read. */
export async function storedFilingErrors(db: DbOrTx, input: NamedThings, at: Date): Promise<FieldError[]> {
  const release = input.release === undefined ? undefined : ((await filing.findRelease(db, input.release)) ?? null)
  const revision = input.revision === undefined ? undefined : ((await filing.findRevision(db, input.revision)) ?? null)
  const unit = input.unit_tag === undefined ? undefined : ((await filing.findUnit(db, input.unit_tag)) ?? null)
  return filingErrors(
    {
      release: release && { id: release.id, state: release.state, consoleId: release.console_id },
      revision: revision && { consoleId: revision.console_id },
      unit: unit && { releaseId: unit.release_id, boardName: unit.board_name, version: unit.version }
    },
    { installedOn: input.installed_on, today: dayOf(at), latest: latestDay(at) }
  )
}

/** What else is wrong with a report whose form has errors already, so that one answer names all. */
export const furtherFilingErrors = ({ db, now }: Services, input: NamedThings) => storedFilingErrors(db, input, now())

type SaidNow = { statement?: Statement; stated_on?: Day; last_running_on?: Day; cause?: Cause }

/** As `furtherFilingErrors`, for a check-in; nothing where the report is none or its history has ended, which the use case says. */
export async function furtherCheckInErrors({ db, now }: Services, reportId: string, input: SaidNow): Promise<FieldError[]> {
  const report = await repo.findById(db, reportId)
  if (!report || input.statement === undefined) return []
  const said = await saidSoFar(db, reportId, report.installed_on)
  if (whyEnded(said) !== null) return []
  const isFailure = input.statement === 'failed'
  const next = {
    statement: input.statement,
    statedOn: input.stated_on ?? null,
    lastRunningOn: isFailure ? (input.last_running_on ?? null) : null,
    cause: input.cause ?? null
  }
  return statementErrors(said, next, latestDay(now()))
}

export async function saidSoFar(db: DbOrTx, reportId: string, installedOn: Day): Promise<SaidSoFar> {
  const stated = new Map((await repo.lastStatedOn(db, reportId)).map((row) => [row.statement, row.stated_on]))
  const failure = await repo.findFailure(db, reportId)
  return {
    installedOn,
    lastRunningOn: stated.get('running') ?? null,
    failedOn: failure?.found_on ?? null,
    partedOn: stated.get('parted') ?? null
  }
}
