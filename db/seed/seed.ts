import type { Insertable } from 'kysely'
import type { BundleCheck, BundlePictures, BundleRecord, DeclaredDetails } from '~/domain/bundle/bundle-check.types'
import { runBundleCheckWithPictures } from '~/domain/bundle/run-bundle-check.server'
import { recountBoard } from '~/domain/reliability/recount-board.server'
import { outlineJson, placeColumns, recordRows } from '~/domain/releases/record-rows'
import { keepLayerPictures, objectsOfRelease, storePictures, type StoredPictures } from '~/domain/releases/store-pictures.server'
import { mustReadVersion, precedenceKey } from '~/domain/releases/version'
import { addDays } from '~/lib/dates'
import { objectKey, type Storage } from '~/server/storage.server'
import type { Db } from '~db/client.server'
import type { Schema } from '~db/schema'
import { demoBoards } from './boards'
import { insertRows } from './insert-rows'
import { bundleName, bundlePath, readManifests, type Manifest } from './manifests'
import { personByLogin } from './people'
import { cautionAnswers } from './releases'
import { simulate } from './simulate'
import { demoSeed } from './truth'
import { fixedId, releaseId, releaseRow, revisionId, worldRows } from './world-rows'

export type SeedOptions = {
  /** The bundle check; by default the real one, two at a time in child processes. */
  check?: (
    input: { path: string } & DeclaredDetails
  ) => Promise<{ check: BundleCheck; record: BundleRecord | null; pictures: BundlePictures | null }>
  seed?: number
  /** Told what is going on, a line at a time. */
  say?: (line: string) => void
}

/** The check as a maintainer's upload gets it, two at a time in child processes, but with time enough on a busy machine: these bundles are known. */
export const realCheck: NonNullable<SeedOptions['check']> = (input) =>
  runBundleCheckWithPictures(input, { wallMs: 180_000, drawMs: 180_000 })

type Rows<T extends keyof Schema> = Insertable<Schema[T]>[]
type Checked = { manifest: Manifest; check: BundleCheck; record: BundleRecord; pictures: StoredPictures }

/**
 * Fills a migrated database and an object storage with the demo world: everything or nothing, the same rows every time. Run again it
 * changes nothing in the database, and puts back what storage lacks.
 * @returns `seeded`, or `present` when the world was there already
 * @throws Error when a bundle does not pass its check, or a caution has no answer
 */
export async function seedDemo(
  { db, storage }: { db: Db; storage: Storage },
  options: SeedOptions = {}
): Promise<'seeded' | 'present'> {
  const { seed = demoSeed, say = () => {} } = options
  await storage.ensureBucket()
  const isPresent = await db.selectFrom('boards').select('id').where('id', '=', demoBoards[0]!.id).executeTakeFirst()
  if (isPresent) {
    if (await lacksObjects(db, storage)) await checkAndStore(storage, options)
    return 'present'
  }

  say('Reading and checking the ten bundles ...')
  const checked = await checkAndStore(storage, options)
  say('Writing boards, releases and reports ...')
  const manifestOf = (board: string, version: string) =>
    checked.find(({ manifest }) => manifest.board === board && manifest.version === version)!.manifest
  const { rows } = simulate(seed, {
    releaseId: (board, version) => releaseId(seed, board, version),
    publishedOn: (board, version) => manifestOf(board, version).date,
    revisionId: (code) => revisionId(seed, code)
  })
  const world = worldRows(seed)
  const releases = checked.flatMap((one) => releaseRows(seed, one))

  await db.transaction().execute(async (tx) => {
    for (const table of ['users', 'consoles', 'console_revisions', 'boards', 'board_maintainers', 'fit_claims'] as const)
      await insertRows(tx, table, world[table])
    for (const { release, files, findings, record, pictures, audit } of releases) {
      await insertRows(tx, 'releases', [release])
      await insertRows(tx, 'release_files', files)
      await insertRows(tx, 'findings', findings)
      for (const table of ['bom_lines', 'placements', 'layer_fingerprints'] as const) await insertRows(tx, table, record[table])
      await keepLayerPictures(tx, release.id, pictures)
      await insertRows(tx, 'audit_log', audit)
    }
    for (const table of ['batches', 'units', 'install_reports', 'check_ins', 'failures', 'downloads'] as const)
      await insertRows(tx, table, rows[table])
    await insertRows(tx, 'audit_log', exclusionAudit(seed, rows.install_reports))
    for (const { id } of demoBoards) await recountBoard(tx, id)
  })
  return 'seeded'
}

/** Whether storage lost a bundle or a picture that the database names. */
async function lacksObjects(db: Db, storage: Storage): Promise<boolean> {
  const rows = await db
    .selectFrom('releases')
    .select(['id', 'bundle_sha256', 'picture_top_sha256', 'picture_bottom_sha256', 'thumb_top_sha256', 'thumb_bottom_sha256'])
    .where(
      'board_id',
      'in',
      demoBoards.map((board) => board.id)
    )
    .where('state', '<>', 'draft')
    .execute()
  for (const row of rows) for (const key of await objectsOfRelease(db, row)) if ((await storage.head(key)) === null) return true
  return false
}

async function checkAndStore(storage: Storage, options: SeedOptions): Promise<Checked[]> {
  const { check = realCheck } = options
  return Promise.all(
    readManifests().map(async (manifest) => {
      const path = bundlePath(manifest)
      const { copperLayers, thicknessMm } = manifest.declared
      const { check: found, record, pictures } = await check({ path, declaredLayers: copperLayers, thicknessMm })
      const stops = found.findings.filter((f) => f.severity === 'stop').map((f) => `${f.code} ${f.file ?? ''}: ${f.message}`)
      if (!found.ok || !record)
        throw new Error(`The demo bundle ${bundleName(manifest)} does not pass its check: ${stops.join('; ')}`)
      const { sha256, bytes } = manifest.bundle
      await storage.putFile({
        key: objectKey('bundle', sha256),
        path,
        bytes,
        sha256,
        contentType: 'application/zip',
        ifAbsent: true
      })
      const put = async (key: string, sum: string, content: { body: Buffer; contentType: string }) => {
        await storage.putFile({ key, ...content, bytes: content.body.length, sha256: sum, ifAbsent: true })
      }
      return { manifest, check: found, record, pictures: await storePictures(put, pictures) }
    })
  )
}

/** A release with what its check found, every caution answered by the board's owner the evening before it was published. */
function releaseRows(seed: number, { manifest, check, record, pictures }: Checked) {
  const { board, version, date } = manifest
  const id = releaseId(seed, board, version)
  const key = precedenceKey(mustReadVersion(version))
  const stored = {
    isOk: check.ok,
    factsJson: JSON.stringify(check.facts),
    outlineJson: outlineJson(record),
    pictures: pictures.columns
  }
  const release = releaseRow(seed, manifest, key, bundleName(manifest), stored)
  const owner = personByLogin(demoBoards.find((b) => b.slug === board)!.owner).id
  const files: Rows<'release_files'> = check.layers.map((layer, position) => ({
    release_id: id,
    position,
    file: layer.file,
    function: layer.function,
    side: layer.side,
    layer_index: layer.index,
    evidence: layer.evidence
  }))
  const findings: Rows<'findings'> = check.findings.map((f, position) => {
    const isCaution = f.severity === 'caution'
    const answer = isCaution ? cautionAnswers[f.code] : null
    if (answer === undefined) throw new Error(`The demo has no answer to the caution ${f.code} of ${bundleName(manifest)}`)
    return {
      id: fixedId(seed, `finding/${board}/${version}/${position}`),
      release_id: id,
      position,
      code: f.code,
      severity: f.severity,
      file: f.file,
      message: f.message,
      expected: f.expected,
      found: f.found,
      ...placeColumns(f),
      answer,
      answered_at: isCaution ? `${addDays(date, -1)}T19:00:00.000Z` : null,
      answered_by: isCaution ? owner : null
    }
  })
  const entry = (action: string, at: string, actor: string): Rows<'audit_log'>[number] => ({
    id: fixedId(seed, `audit/${action}/${board}/${version}`),
    at,
    actor_id: actor,
    action,
    subject_kind: 'release',
    subject_id: id,
    detail_json: JSON.stringify({ version })
  })
  const audit = [entry('release.publish', release.published_at!, owner)]
  if (release.withdrawn_at) audit.push(entry('release.withdraw', release.withdrawn_at, release.withdrawn_by!))
  return { release, files, findings, record: recordRows(id, record), pictures, audit }
}

const exclusionAudit = (seed: number, reports: Rows<'install_reports'>): Rows<'audit_log'> =>
  reports
    .filter((report) => report.excluded_at)
    .map((report) => ({
      id: fixedId(seed, `audit/exclude/${report.id}`),
      at: report.excluded_at!,
      actor_id: report.excluded_by ?? null,
      action: 'report.exclude',
      subject_kind: 'report',
      subject_id: report.id,
      detail_json: JSON.stringify({ kind: report.exclusion_kind })
    }))
