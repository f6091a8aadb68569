import BetterSqlite from 'better-sqlite3'
import { sql, type Insertable } from 'kysely'
import { mustReadVersion, precedenceKey } from '~/domain/releases/version'
import { addDays } from '~/lib/dates'
import { newId } from '~/lib/new-id'
import type { Db } from '~db/client.server'
import type { Schema } from '~db/schema'
import { insertRows } from '~db/seed/insert-rows'
import { bundleName, readManifests } from '~db/seed/manifests'
import { demoPeople } from '~db/seed/people'
import { randomOf, type Random } from '~db/seed/random'
import { demoBatches } from '~db/seed/releases'
import { drawInstalledOn, drawStory, type UnitStory } from '~db/seed/simulate-unit'
import { badLot, demoSeed, reporting, truth } from '~db/seed/truth'
import { fixedId, releaseId, releaseRow, revisionId, worldRows } from '~db/seed/world-rows'

type Row<T extends keyof Schema> = Insertable<Schema[T]>
type Made = { id: string; version: string; code: string; madeOn: string }

/** Share of reports that a steward has taken out. */
const excludedShare = 0.005

/**
 * Fills a migrated database with the demo's world and `units` units of one board, drawn by the demo's own simulation: its releases, revisions and
 * batches in their proportions, late reports, silence, failures found late, the bad lot; some are excluded.
 * @returns the releases and a console revision that reports can be filed on
 */
export async function fillBoard(db: Db, board: string, units: number) {
  const manifests = readManifests().filter((manifest) => manifest.board === board)
  const world = worldRows(demoSeed)
  await db.transaction().execute(async (tx) => {
    for (const table of ['users', 'consoles', 'console_revisions', 'boards', 'board_maintainers', 'fit_claims'] as const)
      await insertRows(tx, table, world[table])
    const check = { isOk: true, factsJson: '{}', outlineJson: null, pictures: {} }
    for (const manifest of manifests) {
      const key = precedenceKey(mustReadVersion(manifest.version))
      await insertRows(tx, 'releases', [releaseRow(demoSeed, manifest, key, bundleName(manifest), check)])
    }
  })
  const { rows } = await sql<{ file: string }>`pragma database_list`.execute(db)
  const sqlite = new BetterSqlite(rows[0]!.file)
  try {
    sqlite.pragma('synchronous = OFF')
    const published = new Map(manifests.map((manifest) => [manifest.version, manifest.date]))
    sqlite.transaction(() => withoutTriggers(sqlite, () => insertUnits(sqlite, board, units, published)))()
  } finally {
    sqlite.close()
  }
  const revision = Object.keys(Object.values(truth[board]!.units)[0]!)[0]!
  return { release: releaseId(demoSeed, board, manifests[0]!.version), revision: revisionId(demoSeed, revision) }
}

/** Triggers on the tables of reports are of no use to a board that is counted afterwards, and take most of the time. */
function withoutTriggers(sqlite: BetterSqlite.Database, work: () => void): void {
  const triggers = sqlite
    .prepare(
      "select name, sql from sqlite_schema where type = 'trigger' and tbl_name in ('install_reports', 'check_ins', 'failures')"
    )
    .all() as { name: string; sql: string }[]
  for (const { name } of triggers) sqlite.exec(`drop trigger ${name}`)
  work()
  for (const trigger of triggers) sqlite.exec(trigger.sql)
}

/** An insert that is prepared once; columns in the order of the first row's. */
function inserter<T extends keyof Schema>(sqlite: BetterSqlite.Database, table: T): (row: Row<T>) => void {
  let statement: BetterSqlite.Statement | null = null
  return (row) => {
    const columns = Object.keys(row)
    statement ??= sqlite.prepare(
      `insert into ${table} (${columns.join(', ')}) values (${columns.map((column) => `@${column}`).join(', ')})`
    )
    statement.run(row)
  }
}

function insertUnits(sqlite: BetterSqlite.Database, board: string, units: number, published: Map<string, string>): void {
  const insert = {
    batches: inserter(sqlite, 'batches'),
    units: inserter(sqlite, 'units'),
    reports: inserter(sqlite, 'install_reports'),
    checkIns: inserter(sqlite, 'check_ins'),
    failures: inserter(sqlite, 'failures')
  }
  const batches: Made[] = demoBatches
    .filter((batch) => batch.board === board)
    .map(({ version, code, madeOn }) => ({ id: fixedId(demoSeed, `batch/${board}/${version}/${code}`), version, code, madeOn }))
  for (const { id, version, code, madeOn } of batches)
    insert.batches({
      ...{ id, code, made_on: madeOn, quantity: units, assembled_by: 'board house', created_at: `${madeOn}T18:00:00.000Z` },
      release_id: releaseId(demoSeed, board, version)
    })
  const releases = new Map([...published.keys()].map((version) => [version, releaseId(demoSeed, board, version)]))
  const kinds = Object.entries(truth[board]!.units).flatMap(([release, byRevision]) =>
    Object.entries(byRevision).map(([revision, weight]) => ({ release, revision, weight }))
  )
  const revisions = new Map(kinds.map(({ revision }) => [revision, revisionId(demoSeed, revision)]))
  const weights = Object.fromEntries(kinds.map(({ weight }, i) => [String(i), weight]))
  for (let i = 0; i < units; i++) {
    const random = randomOf(demoSeed, `${board}/${i}`)
    const { release, revision } = kinds[Number(random.weighted(weights))]!
    const isBadLot = board === badLot.board && release === badLot.release && random.chance(0.5)
    const kind = { board, release, revision, isBadLot }
    const bad = batches.find(({ code }) => code === badLot.batch)
    const from = isBadLot ? addDays(bad!.madeOn, 10) : addDays(published.get(release)!, 14)
    const story = drawStory(random, kind, drawInstalledOn(random, kind, from))
    const own = isBadLot ? [bad!] : batches.filter((b) => b !== bad && b.version === release && b.madeOn < story.installedOn)
    const batch = own.length > 0 && !random.chance(reporting.untaggedShare) ? random.pick(own) : null
    const tag = batch === null ? null : `U-${i}`
    if (tag !== null) insert.units({ tag, batch_id: batch!.id, created_at: `${batch!.madeOn}T18:00:00.000Z` })
    insertStory(random, story, { tag, releaseId: releases.get(release)!, revisionId: revisions.get(revision)! }, insert)
  }
}

function insertStory(
  random: Random,
  story: UnitStory,
  on: { tag: string | null; releaseId: string; revisionId: string },
  insert: {
    reports: (row: Row<'install_reports'>) => void
    checkIns: (row: Row<'check_ins'>) => void
    failures: (row: Row<'failures'>) => void
  }
): void {
  const id = newId()
  const isExcluded = random.chance(excludedShare)
  const filedAt = `${story.filedOn}T12:00:00.000Z`
  insert.reports({
    id,
    release_id: on.releaseId,
    console_revision_id: on.revisionId,
    unit_tag: on.tag,
    reporter_id: demoPeople[0]!.id,
    installed_on: story.installedOn,
    filed_on: story.filedOn,
    filed_at: filedAt,
    evidence: story.evidence,
    method: random.pick(['iron', 'iron', 'iron', 'hot-air', 'hot-plate', 'several', null]),
    first_power: story.firstPower,
    excluded_at: isExcluded ? `${addDays(story.filedOn, 5)}T09:00:00.000Z` : null,
    exclusion_kind: isExcluded ? random.pick(['duplicate', 'other-board', 'not-plausible']) : null
  })
  let failed: { id: string; at: string } | null = null
  story.statements.forEach(({ statement, on: statedOn, filedOn }, i) => {
    const at = `${filedOn}T12:00:00.000Z`
    if (statement === 'failed') failed = { id: `${id}-${i}`, at }
    insert.checkIns({ id: `${id}-${i}`, report_id: id, statement, stated_on: statedOn, filed_at: at })
  })
  if (story.failure)
    insert.failures({
      ...{ report_id: id, last_running_on: story.failure.lastRunningOn, found_on: story.failure.foundOn },
      ...{ cause: story.failure.cause, check_in_id: (failed as { id: string } | null)?.id ?? null },
      created_at: (failed as { at: string } | null)?.at ?? filedAt
    })
}
