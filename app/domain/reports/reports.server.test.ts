import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { visitor } from '~/domain/accounts/can'
import { DomainError } from '~/lib/domain-error'
import type { Services } from '~/server/services.server'
import { actorOf, fillReportWorld, openTestDb } from '../../../tests/factories/report-world'
import { addCheckIn, excludeReport, fileReport, myReports, reportWithHistory } from './reports.server'
import type { CheckInInput, InstallReportInput } from './report.schema'

const now = new Date('2026-12-01T23:30:00.000Z')
const [ann, bo, steward] = [actorOf('ann'), actorOf('bo'), actorOf('stu', true)]
let services: Services
let close: () => Promise<void>
let keys = 0
const newKey = () => String(++keys).padStart(16, '0')

beforeAll(async () => {
  const opened = await openTestDb()
  close = opened.close
  await fillReportWorld(opened.db)
  // Use cases of reports look at the database and the clock only.
  services = { db: opened.db, now: () => now } as Services
})
afterAll(() => close())

const report = (change: Partial<InstallReportInput> = {}): InstallReportInput => ({
  form_key: newKey(),
  release: 'v1',
  revision: 'tm-1',
  installed_on: '2026-11-30',
  evidence: 'measured',
  first_power: 'works',
  ...change
})
const checkIn = (statement: 'running' | 'parted', on: string): CheckInInput => ({ form_key: newKey(), statement, stated_on: on })
const failure = (on: string): CheckInInput => ({ form_key: newKey(), statement: 'failed', stated_on: on, cause: 'board' })

const refusal = async (work: Promise<unknown>) => {
  const error: unknown = await work.then(
    () => null,
    (e: unknown) => e
  )
  expect(error).toBeInstanceOf(DomainError)
  const { kind, errors } = error as DomainError
  return [kind, ...errors.map((e) => e.path)]
}
const auditOf = async (id: string) =>
  (await services.db.selectFrom('audit_log').where('subject_id', '=', id).orderBy('at').select('action').execute()).map(
    (r) => r.action
  )

describe('fileReport', () => {
  it('stores the report and says so in the audit log', async () => {
    const { id } = await fileReport(services, ann, report({ unit_tag: 'BT-1', notes: 'Fine.' }))
    const { report: stored, failure: failed, isOpen } = await reportWithHistory(services, id)
    expect(stored).toMatchObject({
      unit_tag: 'BT-1',
      filed_on: '2026-12-01',
      reporter_name: 'Ann',
      version: '1.0.0',
      revision_code: 'TM-1'
    })
    expect(failed).toBeNull()
    expect(isOpen).toBe(true)
    expect(await auditOf(id)).toEqual(['report.file'])
  })
  it('records a failure on day 0 when it did not work, and ends the history', async () => {
    const { id } = await fileReport(services, ann, report({ first_power: 'no-change', cause: 'wrong-diagnosis' }))
    const { failure: failed, isOpen } = await reportWithHistory(services, id)
    expect(failed).toMatchObject({ check_in_id: null, found_on: '2026-11-30', cause: 'wrong-diagnosis' })
    expect(isOpen).toBe(false)
    expect(await refusal(addCheckIn(services, ann, id, checkIn('running', '2026-12-01')))).toEqual(['conflict'])
  })
  it('gives one report for a form sent twice, also at once', async () => {
    const input = report()
    const [a, b] = await Promise.all([fileReport(services, ann, input), fileReport(services, ann, input)])
    expect(a.id).toBe(b.id)
    const count = await services.db.selectFrom('install_reports').where('form_key', '=', input.form_key).select('id').execute()
    expect(count).toHaveLength(1)
    expect(await refusal(fileReport(services, bo, input))).toEqual(['conflict'])
  })
  it('takes reports on withdrawn releases and trials', async () => {
    for (const release of ['v2', 'v3']) await expect(fileReport(services, ann, report({ release }))).resolves.toHaveProperty('id')
  })
  it.each([
    ['a visitor', visitor, {}, ['unauthenticated']],
    ['a draft', ann, { release: 'v4' }, ['invalid', 'release']],
    ['an unknown release', ann, { release: 'nope' }, ['invalid', 'release']],
    ['another console', ann, { revision: 'tp-1' }, ['invalid', 'revision']],
    ['the future', ann, { installed_on: '2026-12-03' }, ['invalid', 'installed_on']],
    ['an unknown unit', ann, { unit_tag: 'BT-9' }, ['invalid', 'unit_tag']],
    ['a unit of another release', ann, { unit_tag: 'BT-1', release: 'v2' }, ['invalid', 'unit_tag']]
  ] as const)('refuses %s', async (_what, actor, change, expected) => {
    expect(await refusal(fileReport(services, actor, report(change)))).toEqual(expected)
  })
  it('allows the day that it already is further east', async () => {
    await expect(fileReport(services, ann, report({ installed_on: '2026-12-02' }))).resolves.toHaveProperty('id')
  })
})

describe('addCheckIn', () => {
  const filed = (installedOn = '2026-01-01') => fileReport(services, ann, report({ installed_on: installedOn }))

  it('keeps the order of days and ends at a failure', async () => {
    const { id } = await filed()
    await addCheckIn(services, ann, id, checkIn('running', '2026-06-01'))
    expect(await refusal(addCheckIn(services, ann, id, checkIn('running', '2026-05-01')))).toEqual(['invalid', 'stated_on'])
    const input = failure('2026-07-01')
    await addCheckIn(services, ann, id, input)
    await addCheckIn(services, ann, id, input)
    expect(await refusal(addCheckIn(services, ann, id, failure('2026-08-01')))).toEqual(['conflict'])
    const { checkIns, failure: failed } = await reportWithHistory(services, id)
    expect(checkIns.map((c) => c.statement)).toEqual(['running', 'failed'])
    expect(failed).toMatchObject({ found_on: '2026-07-01', cause: 'board', check_in_id: checkIns[1]!.id })
    expect(await auditOf(id)).toEqual(['report.file', 'report.check-in', 'report.check-in'])
  })
  it('lets two failures sent at once through as one', async () => {
    const { id } = await filed()
    const results = await Promise.allSettled([
      addCheckIn(services, ann, id, failure('2026-07-01')),
      addCheckIn(services, ann, id, failure('2026-07-01'))
    ])
    expect(results.map((r) => r.status).sort()).toEqual(['fulfilled', 'rejected'])
  })
  it('ends at a parting', async () => {
    const { id } = await filed()
    await addCheckIn(services, ann, id, checkIn('parted', '2026-07-01'))
    expect(await refusal(addCheckIn(services, ann, id, checkIn('running', '2026-08-01')))).toEqual(['conflict'])
  })
  it('is for the author alone, and nothing is written for others', async () => {
    const { id } = await filed()
    expect(await refusal(addCheckIn(services, bo, id, checkIn('running', '2026-08-01')))).toEqual(['forbidden'])
    expect(await refusal(addCheckIn(services, steward, id, checkIn('running', '2026-08-01')))).toEqual(['forbidden'])
    expect(await refusal(addCheckIn(services, visitor, id, checkIn('running', '2026-08-01')))).toEqual(['unauthenticated'])
    expect(await refusal(addCheckIn(services, ann, 'nope', checkIn('running', '2026-08-01')))).toEqual(['not-found'])
    expect((await reportWithHistory(services, id)).checkIns).toEqual([])
  })
})

describe('excludeReport', () => {
  it('is a steward’s, once, with a public reason', async () => {
    const { id } = await fileReport(services, ann, report())
    const reason = { kind: 'duplicate', reason: 'The same unit as an earlier report.' } as const
    expect(await refusal(excludeReport(services, ann, id, reason))).toEqual(['forbidden'])
    expect(await refusal(excludeReport(services, visitor, id, reason))).toEqual(['unauthenticated'])
    await excludeReport(services, steward, id, reason)
    expect(await refusal(excludeReport(services, steward, id, reason))).toEqual(['conflict'])
    expect(await refusal(addCheckIn(services, ann, id, checkIn('running', '2026-12-01')))).toEqual(['forbidden'])
    expect((await reportWithHistory(services, id)).report).toMatchObject({ exclusion_kind: 'duplicate', excluded_by_name: 'Stu' })
    expect(await auditOf(id)).toEqual(['report.file', 'report.exclude'])
  })
})

describe('myReports', () => {
  it('lists one’s own only, newest first, with what was last said', async () => {
    const { id } = await fileReport(services, bo, report({ installed_on: '2026-02-01' }))
    await addCheckIn(services, bo, id, checkIn('running', '2026-09-01'))
    const { reports, total } = await myReports(services, bo, 1)
    expect(total).toBe(1)
    expect(reports[0]).toMatchObject({ id, last_running_on: '2026-09-01', failed_on: null, parted_on: null })
    expect(await refusal(myReports(services, visitor, 1))).toEqual(['unauthenticated'])
  })
})
