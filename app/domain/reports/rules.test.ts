import { describe, expect, it } from 'vitest'
import { statementErrors, whyEnded, type NewStatement, type SaidSoFar } from './check-in-rules'
import { filingErrors, normalTag, type FilingFacts } from './filing-rules'
import { checkInSchema, exclusionSchema, installReportSchema } from './report.schema'
import { parseForm } from '~/lib/parse-form'

const form = (fields: Record<string, string>) => {
  const data = new FormData()
  for (const [name, value] of Object.entries(fields)) data.set(name, value)
  return data
}
const key = '0123456789abcdef'
const paths = (errors: { path: string }[]) => errors.map((e) => e.path)

describe('filingErrors', () => {
  const facts: FilingFacts = {
    release: { id: 'v1', state: 'released', consoleId: 'talvi-16' },
    revision: { consoleId: 'talvi-16' },
    unit: undefined
  }
  const dates = { installedOn: '2026-11-30', today: '2026-12-01', latest: '2026-12-02' }
  const errorsOf = (f: Partial<FilingFacts>, d = dates) => paths(filingErrors({ ...facts, ...f }, d))

  it('takes a report on a published release, a trial, and a withdrawn one', () => {
    for (const state of ['released', 'trial', 'withdrawn'] as const)
      expect(errorsOf({ release: { ...facts.release!, state } })).toEqual([])
  })
  it.each([
    ['no such release', { release: null }, ['release']],
    ['a draft', { release: { ...facts.release!, state: 'draft' } }, ['release']],
    ['no such revision', { revision: null }, ['revision']],
    ['a revision of another console', { revision: { consoleId: 'talvi-pocket' } }, ['revision']],
    ['an unknown unit', { unit: null }, ['unit_tag']],
    ['a unit of another release', { unit: { releaseId: 'v2', boardName: 'Buttress', version: '2.0.0' } }, ['unit_tag']],
    ['a unit of this release', { unit: { releaseId: 'v1', boardName: 'Buttress', version: '1.0.0' } }, []]
  ] as [string, Partial<FilingFacts>, string[]][])('%s', (_what, change, expected) => {
    expect(errorsOf(change)).toEqual(expected)
  })
  it('allows tomorrow, where it is already that day somewhere, and nothing after', () => {
    expect(errorsOf({}, { ...dates, installedOn: '2026-12-02' })).toEqual([])
    expect(errorsOf({}, { ...dates, installedOn: '2026-12-03' })).toEqual(['installed_on'])
    expect(errorsOf({}, { ...dates, installedOn: '1969-12-31' })).toEqual(['installed_on'])
  })
  it('reads a tag as it may be typed', () => {
    expect(normalTag(' bt-7k4 -19 ')).toBe('BT-7K4-19')
  })
})

describe('installReportSchema', () => {
  const good = {
    form_key: key,
    release: 'v1',
    revision: 'c1',
    installed_on: '2026-11-30',
    evidence: 'measured',
    first_power: 'works'
  }
  const errorsOf = (change: Record<string, string>) => {
    const parsed = parseForm(installReportSchema, form({ ...good, ...change }))
    return parsed.ok ? [] : paths(parsed.errors)
  }
  it('takes the least that a report needs', () => expect(errorsOf({})).toEqual([]))
  it('takes notes of 4000 characters and no more', () => {
    expect(errorsOf({ notes: 'x'.repeat(4000) })).toEqual([])
    expect(errorsOf({ notes: 'x'.repeat(4001) })).toEqual(['notes'])
  })
  it.each([
    [{ first_power: 'no-change' }, ['cause']],
    [{ first_power: 'no-change', cause: 'unknown' }, []],
    [{ first_power: '' }, ['first_power']],
    [{ first_power: 'fine' }, ['first_power']],
    [{ installed_on: '2026-02-30' }, ['installed_on']],
    [{ installed_on: '30.11.2026' }, ['installed_on']],
    [{ evidence: 'guess' }, ['evidence']],
    [{ method: 'torch' }, ['method']],
    [{ notes: 'a\u0000b' }, ['notes']],
    [{ notes: 'two\r\nlines' }, []],
    [{ unit_tag: '<b>' }, ['unit_tag']],
    [{ form_key: 'short' }, ['form_key']],
    [{ release: "x' or 1=1" }, ['release']]
  ])('%j', (change, expected) => expect(errorsOf(change)).toEqual(expected))
})

describe('checkInSchema and exclusionSchema', () => {
  const errorsOf = (fields: Record<string, string>) => {
    const parsed = parseForm(checkInSchema, form({ form_key: key, stated_on: '2026-01-01', ...fields }))
    return parsed.ok ? [] : paths(parsed.errors)
  }
  it.each([
    [{ statement: 'running' }, []],
    [{ statement: 'parted' }, []],
    [{ statement: 'failed' }, ['cause']],
    [{ statement: 'failed', cause: 'board', last_running_on: '2025-13-01' }, ['last_running_on']],
    [{ statement: 'exploded' }, ['statement']],
    [{}, ['statement']]
  ] as [Record<string, string>, string[]][])('%j', (fields, expected) => expect(errorsOf(fields)).toEqual(expected))
  it('an exclusion needs a kind and a sentence', () => {
    expect(parseForm(exclusionSchema, form({ kind: 'duplicate', reason: 'Same unit as an earlier report.' })).ok).toBe(true)
    expect(parseForm(exclusionSchema, form({ kind: 'spite', reason: 'No.' }))).toMatchObject({
      ok: false,
      errors: [{ path: 'kind' }, { path: 'reason' }]
    })
  })
})

describe('statementErrors', () => {
  const said: SaidSoFar = { installedOn: '2026-01-01', lastRunningOn: '2026-06-01', failedOn: null, partedOn: null }
  const next: NewStatement = { statement: 'running', statedOn: '2026-07-01', lastRunningOn: null, cause: null }
  const errorsOf = (change: Partial<NewStatement>, before: Partial<SaidSoFar> = {}) =>
    paths(statementErrors({ ...said, ...before }, { ...next, ...change }, '2026-12-02'))
  it.each([
    ['running later', {}, []],
    ['running on the same day again', { statedOn: '2026-06-01' }, []],
    ['running before an earlier statement', { statedOn: '2026-05-31' }, ['stated_on']],
    ['parted before an earlier statement', { statement: 'parted', statedOn: '2026-05-31' }, ['stated_on']],
    ['before it was fitted', { statedOn: '2025-12-31' }, ['stated_on']],
    ['tomorrow in the furthest zone', { statedOn: '2026-12-02' }, []],
    ['a day that has not come', { statedOn: '2026-12-03' }, ['stated_on']],
    ['failed without a cause', { statement: 'failed' }, ['cause']],
    ['failed', { statement: 'failed', cause: 'board', lastRunningOn: '2026-06-20' }, []],
    [
      'last worked after it was found failed',
      { statement: 'failed', cause: 'board', lastRunningOn: '2026-07-02' },
      ['last_running_on']
    ],
    [
      'last worked before it was said to run',
      { statement: 'failed', cause: 'board', lastRunningOn: '2026-05-01' },
      ['last_running_on']
    ]
  ] as [string, Partial<NewStatement>, string[]][])('%s', (_what, change, expected) => expect(errorsOf(change)).toEqual(expected))

  it('a failure dated before the last working day of an open history without check-ins', () => {
    expect(errorsOf({ statement: 'failed', cause: 'board', lastRunningOn: '2025-12-31' }, { lastRunningOn: null })).toEqual([
      'last_running_on'
    ])
  })
  it('nothing follows a failure or a parting', () => {
    expect(whyEnded(said)).toBeNull()
    expect(whyEnded({ ...said, failedOn: '2026-08-01' })).toContain('2026-08-01')
    expect(whyEnded({ ...said, partedOn: '2026-08-02' })).toContain('2026-08-02')
  })
})
