import type { Insertable } from 'kysely'
import { addDays, type Day } from '~/lib/dates'
import { newId } from '~/lib/new-id'
import type { Schema } from '~db/schema'
import { demoBoards } from './boards'
import { personByLogin, demoPeople } from './people'
import { randomOf, type Random } from './random'
import { demoBatches, type DemoBatch } from './releases'
import { byFiling, drawInstalledOn, drawStory, type UnitStory } from './simulate-unit'
import { reportNote, statementNote } from './told'
import { badLot, demoAsOf, reporting, truth, type UnitKind } from './truth'

type Row<T extends keyof Schema> = Insertable<Schema[T]>
export type SimulatedRows = {
  batches: Row<'batches'>[]
  units: Row<'units'>[]
  install_reports: Row<'install_reports'>[]
  check_ins: Row<'check_ins'>[]
  failures: Row<'failures'>[]
  downloads: Row<'downloads'>[]
}
/** A unit's hidden kind beside the report that tells of it, for the tests that compare the two. */
export type Told = { kind: UnitKind; reportId: string }

/** What the simulation must know of the stored releases and console revisions. */
export type Places = {
  releaseId: (board: string, version: string) => string
  publishedOn: (board: string, version: string) => Day
  revisionId: (code: string) => string
}

const tagAlphabet = '0123456789ABCDEFGHJKMNPQRSTVWXYZ'
const evening = (day: Day, random: Random) =>
  `${day}T${String(random.whole(8, 21)).padStart(2, '0')}:${String(random.whole(0, 59)).padStart(2, '0')}:${String(random.whole(0, 59)).padStart(2, '0')}.000Z`

const installers = demoPeople.filter((p) => p.part.startsWith('installer') || p.part.startsWith('builder')).map((p) => p.id)

/** Every batch with the tags of all its units. */
function makeBatches(seed: number, places: Places, rows: SimulatedRows) {
  const tags = new Map<DemoBatch, string[]>()
  const used = new Set<string>()
  for (const batch of demoBatches) {
    const random = randomOf(seed, `batch/${batch.board}/${batch.version}/${batch.code}`)
    const id = newId((n) => random.bytes(n))
    const createdAt = `${batch.madeOn}T18:00:00.000Z`
    const prefix = demoBoards.find((b) => b.slug === batch.board)!.tagPrefix
    rows.batches.push({
      id,
      release_id: places.releaseId(batch.board, batch.version),
      code: batch.code,
      made_on: batch.madeOn,
      quantity: batch.quantity,
      assembled_by: batch.assembledBy,
      note: batch.note,
      created_at: createdAt,
      created_by: personByLogin(batch.builder).id
    })
    const own: string[] = []
    while (own.length < batch.quantity) {
      const tag = `${prefix}-${[...random.bytes(5)].map((b) => tagAlphabet[b & 31]).join('')}`
      if (used.has(tag)) continue
      used.add(tag)
      own.push(tag)
      rows.units.push({ tag, batch_id: id, created_at: createdAt })
    }
    tags.set(batch, own)
  }
  return tags
}

/** Every unit of the truth's table with its story; those of the bad lot are chosen among all of their release. */
function drawStories(seed: number, places: Places): UnitStory[] {
  const stories: UnitStory[] = []
  for (const [board, { units }] of Object.entries(truth))
    for (const [release, byRevision] of Object.entries(units)) {
      const revisions = Object.entries(byRevision).flatMap(([revision, n]) => Array.from({ length: n }, () => revision))
      const hasBadLot = board === badLot.board && release === badLot.release
      const order = randomOf(seed, `lot/${board}/${release}`).shuffled(revisions)
      order.forEach((revision, i) => {
        const random = randomOf(seed, `unit/${board}/${release}/${revision}/${i}`)
        const kind = { board, release, revision, isBadLot: hasBadLot && i < badLot.units }
        stories.push(drawStory(random, kind, drawInstalledOn(random, kind, availableOn(kind, places))))
      })
    }
  return stories.sort(byFiling)
}

function availableOn(kind: UnitKind, places: Places): Day {
  if (!kind.isBadLot) return addDays(places.publishedOn(kind.board, kind.release), 14)
  const batch = demoBatches.find((b) => b.board === badLot.board && b.code === badLot.batch)!
  return addDays(batch.madeOn, 10)
}

/** A tag from a batch that was made before the unit was fitted; the bad lot's units carry that batch's tags and no others do. */
function takeTag(random: Random, story: UnitStory, tags: Map<DemoBatch, string[]>): string | null {
  const isBad = (b: DemoBatch) => b.board === badLot.board && b.code === badLot.batch
  if (!story.kind.isBadLot && random.chance(reporting.untaggedShare)) return null
  for (const [batch, own] of tags) {
    if (batch.board !== story.kind.board || batch.version !== story.kind.release || isBad(batch) !== story.kind.isBadLot) continue
    if (batch.madeOn < story.installedOn && own.length > 0) return own.shift()!
  }
  return null
}

function tell(
  random: Random,
  story: UnitStory,
  unitTag: string | null,
  places: Places,
  rows: SimulatedRows
): Row<'install_reports'> {
  const reporter = random.pick(installers)
  const id = newId((n) => random.bytes(n))
  const report: Row<'install_reports'> = {
    id,
    release_id: places.releaseId(story.kind.board, story.kind.release),
    console_revision_id: places.revisionId(story.kind.revision),
    unit_tag: unitTag,
    reporter_id: reporter,
    installed_on: story.installedOn,
    filed_on: story.filedOn,
    filed_at: evening(story.filedOn, random),
    evidence: story.evidence,
    method: random.weighted({ iron: 0.62, 'hot-air': 0.22, 'hot-plate': 0.04, several: 0.12 }),
    first_power: story.firstPower,
    notes: reportNote(random, story)
  }
  rows.install_reports.push(report)
  let failedId: string | null = null
  for (const { statement, on, filedOn } of story.statements) {
    const checkInId = newId((n) => random.bytes(n))
    if (statement === 'failed') failedId = checkInId
    const filedAt = evening(filedOn, random)
    rows.check_ins.push({
      id: checkInId,
      report_id: id,
      statement,
      stated_on: on,
      filed_at: filedAt < report.filed_at ? report.filed_at : filedAt,
      filed_by: reporter,
      notes: statementNote(random, statement, story.failure?.cause ?? null)
    })
  }
  if (story.failure)
    rows.failures.push({
      report_id: id,
      check_in_id: failedId,
      last_running_on: story.failure.lastRunningOn,
      found_on: story.failure.foundOn,
      cause: story.failure.cause,
      notes: '',
      created_at: failedId === null ? report.filed_at : rows.check_ins.at(-1)!.filed_at
    })
  return report
}

type Exclusion = { board: string; kind: 'duplicate' | 'other-board' | 'not-plausible'; reason: string }
const exclusions: Exclusion[] = [
  { board: 'buttress', kind: 'duplicate', reason: 'The same unit as another report of the same day; the reporter asked for it.' },
  { board: 'buttress', kind: 'duplicate', reason: 'Filed a second time after a lost connection.' },
  { board: 'buttress', kind: 'other-board', reason: 'The photo the reporter mailed shows another board.' },
  { board: 'sundial', kind: 'duplicate', reason: 'The same unit as another report; the tag is the same.' },
  { board: 'sundial', kind: 'not-plausible', reason: 'Dated before the release existed; the reporter did not answer.' }
]

/** Copies of reports that a steward has excluded, each with its public reason. */
function addExcluded(seed: number, rows: SimulatedRows, releaseBoard: Map<string, string>) {
  const steward = demoPeople.find((p) => p.isSteward)!.id
  exclusions.forEach(({ board, kind, reason }, i) => {
    const random = randomOf(seed, `excluded/${i}`)
    const old = rows.install_reports.filter((r) => releaseBoard.get(r.release_id) === board && r.filed_on < '2026-06-01')
    const original = random.pick(old)
    const filedOn = addDays(original.filed_on, 1)
    rows.install_reports.push({
      ...original,
      id: newId((n) => random.bytes(n)),
      unit_tag: kind === 'duplicate' ? original.unit_tag : null,
      installed_on: kind === 'not-plausible' ? '2020-02-01' : original.installed_on,
      filed_on: filedOn,
      filed_at: evening(filedOn, random),
      excluded_at: `${addDays(filedOn, random.whole(3, 30))}T09:00:00.000Z`,
      excluded_by: steward,
      exclusion_kind: kind,
      exclusion_reason: reason
    })
  })
}

/** Weekly download counts of each release, from its publication to the end; more when it is new. */
function addDownloads(seed: number, places: Places, rows: SimulatedRows) {
  for (const [board, { units }] of Object.entries(truth))
    for (const release of Object.keys(units)) {
      const random = randomOf(seed, `downloads/${board}/${release}`)
      const published = places.publishedOn(board, release)
      for (let day = addDays(published, random.whole(0, 6)), week = 0; day < demoAsOf; day = addDays(day, 7), week++) {
        const count = Math.floor(random.exponential(1 + 9 * Math.exp(-week / 12)))
        if (count > 0) rows.downloads.push({ release_id: places.releaseId(board, release), day, count })
      }
    }
}

/** The whole simulated part of the demo world: the same seed and places give the same rows, byte for byte. */
export function simulate(seed: number, places: Places): { rows: SimulatedRows; told: Told[] } {
  const rows: SimulatedRows = { batches: [], units: [], install_reports: [], check_ins: [], failures: [], downloads: [] }
  const tags = makeBatches(seed, places, rows)
  const told: Told[] = []
  const releaseBoard = new Map<string, string>()
  drawStories(seed, places).forEach((story, i) => {
    const random = randomOf(seed, `told/${i}`)
    const report = tell(random, story, takeTag(random, story, tags), places, rows)
    releaseBoard.set(report.release_id, story.kind.board)
    told.push({ kind: story.kind, reportId: report.id })
  })
  addExcluded(seed, rows, releaseBoard)
  addDownloads(seed, places, rows)
  return { rows, told }
}
