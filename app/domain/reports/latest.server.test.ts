import { sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { visitor } from '~/domain/accounts/can'
import type { Services } from '~/server/services.server'
import type { Db } from '~db/client.server'
import { actorOf, fillReportWorld, openTestDb } from '../../../tests/factories/report-world'
import { latestOfMaintainer } from './latest.repo.server'
import { latestReports } from './latest.server'
import { fileReport } from './reports.server'

let db: Db
let services: Services
let close: () => Promise<void>
let minute = 0
const ann = actorOf('ann')

beforeAll(async () => {
  ;({ db, close } = await openTestDb())
  await fillReportWorld(db)
  services = { db, now: () => new Date(Date.UTC(2026, 11, 1, 12, ++minute)) } as Services
  for (let i = 0; i < 12; i++)
    await fileReport(services, ann, {
      form_key: String(i).padStart(16, '0'),
      release: i % 2 === 0 ? 'v1' : 'v2',
      revision: 'tm-1',
      installed_on: '2026-11-01',
      evidence: 'none',
      first_power: i === 11 ? 'worse' : 'works',
      cause: i === 11 ? 'unknown' : undefined
    })
})
afterAll(() => close())

const maintain = () =>
  db
    .insertInto('board_maintainers')
    .values({ board_id: 'b1', user_id: 'bo', role: 'owner', added_at: '2026-01-01T00:00:00.000Z' })
    .execute()

describe('latestReports', () => {
  it('has nothing for a visitor, nor for a member without a board', async () => {
    expect(await latestReports(services, visitor)).toEqual([])
    expect(await latestReports(services, actorOf('bo'))).toEqual([])
  })

  it('has the eight filed last over all releases, newest first, and says which failed', async () => {
    await maintain()
    const latest = await latestReports(services, actorOf('bo'))
    expect(latest).toHaveLength(8)
    expect(latest[0]).toMatchObject({
      what: 'Buttress 1.1.0 on TM-1',
      says: 'worse at first power',
      cause: 'cause not known',
      isFailure: true,
      by: 'Ann'
    })
    expect(latest[1]).toMatchObject({ what: 'Buttress 1.0.0 on TM-1', says: 'works', cause: null, isFailure: false })
    expect(new Set(latest.slice(1).map((r) => r.isFailure))).toEqual(new Set([false]))
  })

  it('reads reports through the index, none of them by a scan', async () => {
    const plan = await latestOfMaintainer(db, 'bo', 8).explain<{ detail: string }>(undefined, sql`query plan`)
    const lines = plan.map((row) => row.detail)
    expect(lines.some((line) => line.includes('install_reports_latest'))).toBe(true)
    expect(lines.filter((line) => /^SCAN (r|l|v|b|m)\b/.test(line))).toEqual([])
  })
})
