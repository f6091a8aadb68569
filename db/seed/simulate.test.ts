import { describe, expect, it } from 'vitest'
import { addDays, daysBetween } from '~/lib/dates'
import { promptDays } from '~/domain/reports/observations'
import { filingErrors } from '~/domain/reports/filing-rules'
import { statementErrors } from '~/domain/reports/check-in-rules'
import { readManifests } from './manifests'
import { simulate } from './simulate'
import { badLot, demoAsOf, demoSeed, truth } from './truth'

const dates = new Map(readManifests().map((m) => [`${m.board}/${m.version}`, m.date]))
const places = {
  releaseId: (board: string, version: string) => `${board}/${version}`,
  publishedOn: (board: string, version: string) => dates.get(`${board}/${version}`)!,
  revisionId: (code: string) => code
}
const { rows, told } = simulate(demoSeed, places)
const counted = rows.install_reports.filter((r) => !r.excluded_at)
const failureOf = new Map(rows.failures.map((f) => [f.report_id, f]))
const checkInsOf = (id: string) => rows.check_ins.filter((c) => c.report_id === id)

describe('the simulated reports', () => {
  it('are the same for the same seed, and others for another', () => {
    expect(simulate(demoSeed, places)).toEqual({ rows, told })
    expect(simulate(demoSeed + 1, places).rows).not.toEqual(rows)
  })

  it('are as many as the truth says, for each release and console revision', () => {
    const expected: Record<string, number> = {}
    for (const [board, { units }] of Object.entries(truth))
      for (const [version, byRevision] of Object.entries(units))
        for (const [code, n] of Object.entries(byRevision)) expected[`${board}/${version} ${code}`] = n
    const found: Record<string, number> = {}
    for (const r of counted) {
      const key = `${r.release_id} ${r.console_revision_id}`
      found[key] = (found[key] ?? 0) + 1
    }
    expect(found).toEqual(expected)
    expect(counted).toHaveLength(811)
    const buttress = counted.filter((r) => r.release_id.startsWith('buttress/'))
    const byCode = (code: string) => buttress.filter((r) => r.console_revision_id === code).length
    expect(['TM-1', 'TM-2', 'TM-3', 'TM-4', 'TM-5', 'TM-6'].map(byCode)).toEqual([23, 86, 141, 64, 118, 7])
  })

  it('leave out five, each with its reason', () => {
    const excluded = rows.install_reports.filter((r) => r.excluded_at)
    expect(excluded.map((r) => r.exclusion_kind)).toEqual(['duplicate', 'duplicate', 'other-board', 'duplicate', 'not-plausible'])
    for (const r of excluded) {
      expect(r.exclusion_reason).toMatch(/\.$/)
      expect(r.excluded_at! > r.filed_at).toBe(true)
    }
  })

  it('could have been filed through the forms', () => {
    for (const r of counted) {
      const dates = { installedOn: r.installed_on, today: r.filed_on, latest: r.filed_on }
      const release = { id: r.release_id, state: 'released' as const, consoleId: 'c' }
      expect(filingErrors({ release, revision: { consoleId: 'c' }, unit: undefined }, dates)).toEqual([])
      expect(r.filed_at.startsWith(r.filed_on)).toBe(true)
      let lastRunningOn: string | null = null
      for (const c of checkInsOf(r.id)) {
        const failure = c.statement === 'failed' ? failureOf.get(r.id)! : null
        const said = { installedOn: r.installed_on, lastRunningOn, failedOn: null, partedOn: null }
        const next = {
          statement: c.statement,
          statedOn: c.stated_on,
          lastRunningOn: failure?.last_running_on ?? null,
          cause: failure?.cause ?? null
        }
        expect(statementErrors(said, next, c.filed_at.slice(0, 10))).toEqual([])
        expect(c.filed_at >= r.filed_at && c.filed_at.slice(0, 10) < demoAsOf).toBe(true)
        if (c.statement === 'running') lastRunningOn = c.stated_on
      }
    }
  })

  it('end with the failure or the parting, and give every failure its place', () => {
    for (const r of rows.install_reports) {
      const statements = checkInsOf(r.id).map((c) => c.statement)
      expect(statements.slice(0, -1).every((s) => s === 'running')).toBe(true)
      const failure = failureOf.get(r.id)
      expect(failure !== undefined).toBe((!r.excluded_at && r.first_power !== 'works') || statements.at(-1) === 'failed')
      if (failure && r.first_power !== 'works') expect(failure).toMatchObject({ check_in_id: null, found_on: r.installed_on })
      if (failure && r.first_power === 'works') expect(failure.check_in_id).toBe(checkInsOf(r.id).at(-1)!.id)
    }
  })

  it('have silent, late, parted and badly known units among them', () => {
    const share = (list: unknown[]) => list.length / counted.length
    const late = counted.filter((r) => daysBetween(r.installed_on, r.filed_on) > promptDays)
    expect(share(late)).toBeGreaterThan(0.08)
    expect(share(late)).toBeLessThan(0.18)
    const lastWord = (id: string, filedOn: string) => [filedOn, ...checkInsOf(id).map((c) => c.stated_on)].sort().at(-1)!
    const silent = counted.filter((r) => !failureOf.has(r.id) && lastWord(r.id, r.filed_on) < addDays(demoAsOf, -60))
    expect(share(silent)).toBeGreaterThan(0.12)
    expect(share(silent)).toBeLessThan(0.3)
    expect(rows.check_ins.some((c) => c.statement === 'parted')).toBe(true)
    const gaps = rows.failures.filter((f) => f.last_running_on).map((f) => daysBetween(f.last_running_on!, f.found_on))
    expect(gaps.filter((g) => g <= promptDays).length / gaps.length).toBeGreaterThan(0.75)
    expect(gaps.some((g) => g > promptDays)).toBe(true)
    expect(rows.failures.some((f) => f.cause === 'wrong-diagnosis')).toBe(true)
  })

  it('have one bad lot, by the tags of its batch', () => {
    const batch = rows.batches.find((b) => b.code === badLot.batch && b.release_id === `${badLot.board}/${badLot.release}`)!
    const tags = new Set(rows.units.filter((u) => u.batch_id === batch.id).map((u) => u.tag))
    const lot = counted.filter((r) => r.unit_tag && tags.has(r.unit_tag))
    expect(lot).toHaveLength(badLot.units)
    expect(new Set(lot.map((r) => r.id))).toEqual(new Set(told.filter((t) => t.kind.isBadLot).map((t) => t.reportId)))
    expect(lot.every((r) => r.installed_on > batch.made_on)).toBe(true)
  })

  it('use each tag once, never before its batch was made', () => {
    const tagged = counted.filter((r) => r.unit_tag)
    expect(new Set(tagged.map((r) => r.unit_tag)).size).toBe(tagged.length)
    const madeOn = new Map(rows.batches.map((b) => [b.id, b.made_on]))
    const batchOf = new Map(rows.units.map((u) => [u.tag, madeOn.get(u.batch_id)!]))
    for (const r of tagged) expect(batchOf.get(r.unit_tag!)! < r.installed_on).toBe(true)
  })
})
