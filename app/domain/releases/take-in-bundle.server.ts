import { randomBytes } from 'node:crypto'
import { createWriteStream } from 'node:fs'
import { rm } from 'node:fs/promises'
import { join } from 'node:path'
import { pipeline } from 'node:stream/promises'
import type { Db } from '~db/client.server'
import { recordAudit } from '~/domain/audit/record.server'
import type { Actor } from '~/domain/accounts/can'
import { must } from '~/domain/accounts/must'
import type { BundleCheck, BundlePictures, BundleRecord, CheckStep, DeclaredDetails } from '~/domain/bundle/bundle-check.types'
import { isRefused } from '~/domain/bundle/is-refused'
import { DomainError } from '~/lib/domain-error'
import { objectKey, type Storage } from '~/server/storage.server'
import { beginRun, setRun } from './check-runs.server'
import { draftGone } from './drafts.server'
import * as findings from './findings.repo.server'
import { outlineJson } from './record-rows'
import * as records from './record.repo.server'
import * as repo from './releases.repo.server'
import { findRelease } from './releases.server'
import * as staged from './staged-objects.repo.server'
import { keepLayerPictures, objectsOf, objectsOfRelease, storePictures, type StoredPictures } from './store-pictures.server'
import { putStaged } from './stored-objects.server'

/** The bundle check as this area needs it. */
export type CheckBundle = (
  input: { path: string; onProgress?: (step: CheckStep) => void } & DeclaredDetails
) => Promise<{ check: BundleCheck; record: BundleRecord | null; pictures: BundlePictures | null }>

export type IntakeDeps = { db: Db; storage: Storage; now: () => Date; uploadDir: string; check: CheckBundle }
type UploadedFile = { path: string; bytes: number; sha256: string; name: string }
type Content = Omit<UploadedFile, 'path'>

const busy = () =>
  new DomainError(
    'conflict',
    'An upload to this draft is going on, or is being checked. Wait for it to end, then look at the draft.'
  )

/** How long a second request waits for the first one to let go of the draft. */
const waitMs = 3_000

/**
 * Takes a bundle into a draft: receives it, has it checked, stores it under its hash, and writes the outcome down in one transaction. One at a
 * time for each draft. Whatever fails leaves the draft as it was; what was stored by then is swept.
 *
 * A zip that the check refuses is not stored: the draft then has the findings, and the name and size of what was sent, but no bundle. It takes
 * the former bundle's place all the same, for nobody who sent a newer file means to publish the older one.
 * @param receive takes the file from the request, and throws when it does not come whole
 * @throws DomainError `not-found`, `forbidden`, `conflict`, and what `receive` throws
 */
export async function takeInBundle(
  deps: IntakeDeps,
  actor: Actor,
  slug: string,
  version: string,
  receive: () => Promise<UploadedFile>
): Promise<void> {
  const { board, release } = await findRelease(deps.db, actor, slug, version)
  must(actor, 'release.edit', { boardId: board.id, state: release.state })
  const end = await beginRun(release.id, { phase: 'receiving', step: null }, waitMs)
  if (!end) throw busy()
  let file: UploadedFile | null = null
  try {
    file = await receive()
    await checkAndKeep(deps, actor.userId, release.id, file, { isStored: false })
  } finally {
    if (file) await rm(file.path, { force: true })
    end()
  }
}

/**
 * Checks a draft's stored bundle once more: after its declared details changed, or after a check that a restart cut off.
 * @throws DomainError `not-found`, `forbidden`, `conflict` (no bundle, or one is going on)
 */
export async function recheckBundle(deps: IntakeDeps, actor: Actor, slug: string, version: string): Promise<void> {
  const { board, release } = await findRelease(deps.db, actor, slug, version)
  must(actor, 'release.edit', { boardId: board.id, state: release.state })
  const end = await beginRun(release.id, { phase: 'storing', step: null }, waitMs)
  if (!end) throw busy()
  const path = join(deps.uploadDir, `${randomBytes(16).toString('hex')}.part`)
  try {
    const row = await repo.findById(deps.db, release.id)
    if (!row?.bundle_sha256) throw new DomainError('conflict', 'There is no bundle to check yet.')
    const object = await deps.storage.get(objectKey('bundle', row.bundle_sha256))
    if (!object) throw new Error(`storage lacks the bundle ${row.bundle_sha256} of release ${release.id}`)
    await pipeline(object.stream, createWriteStream(path, { flags: 'wx', mode: 0o600 }))
    const content = { path, sha256: row.bundle_sha256, bytes: row.bundle_bytes!, name: row.bundle_name! }
    await checkAndKeep(deps, actor.userId, release.id, content, { isStored: true })
  } finally {
    await rm(path, { force: true })
    end()
  }
}

async function checkAndKeep(
  deps: IntakeDeps,
  actorId: string | null,
  releaseId: string,
  file: UploadedFile,
  { isStored }: { isStored: boolean }
): Promise<void> {
  const { db, now, check } = deps
  const before = await repo.findById(db, releaseId)
  if (!before) throw draftGone()
  const isMarked = await repo.updateDraft(db, releaseId, { check_state: 'running', check_started_at: now().toISOString() })
  if (!isMarked) throw draftGone()
  try {
    setRun(releaseId, { phase: 'checking', step: null })
    const {
      check: result,
      record,
      pictures
    } = await check({
      path: file.path,
      declaredLayers: before.declared_layers ?? undefined,
      thicknessMm: before.declared_thickness_mm ?? undefined,
      boardRevision: before.board_revision,
      earlier: await records.listEarlier(db, before),
      onProgress: (step) => setRun(releaseId, { phase: 'checking', step })
    })
    // A bundle that was taken in before stays, though its check be cut off this time.
    const isKept = isStored || !isRefused(result)
    if (!isStored && isKept)
      await putStaged(deps, objectKey('bundle', file.sha256), file.sha256, { ...file, contentType: 'application/zip' })
    const stored = await storePictures((...picture) => putStaged(deps, ...picture), isKept ? pictures : null)
    await keep(deps, actorId, before, { ...file, isKept }, { check: result, record: isKept ? record : null }, stored)
  } catch (error) {
    await repo.updateDraft(db, releaseId, { check_state: before.check_state === 'running' ? 'none' : before.check_state })
    throw error
  }
}

/** The outcome, whole or not at all: the draft, its files, findings, facts, record and pictures, and what is in storage for it. */
async function keep(
  { db, now }: IntakeDeps,
  actorId: string | null,
  before: repo.ReleaseRow,
  file: Content & { isKept: boolean },
  { check, record }: { check: BundleCheck; record: BundleRecord | null },
  pictures: StoredPictures
): Promise<void> {
  const at = now().toISOString()
  const refers = { bundle_sha256: file.isKept ? file.sha256 : null, ...pictures.columns }
  await db.transaction().execute(async (tx) => {
    const row = await repo.findById(tx, before.id)
    if (!row || row.state !== 'draft') throw draftGone()
    const isAsDeclared =
      row.declared_layers === before.declared_layers &&
      row.declared_thickness_mm === before.declared_thickness_mm &&
      row.board_revision === before.board_revision
    await repo.updateDraft(tx, row.id, {
      ...refers,
      bundle_bytes: file.bytes,
      bundle_name: file.name,
      check_state: isAsDeclared ? 'done' : 'none',
      is_check_ok: check.ok ? 1 : 0,
      facts_json: JSON.stringify(check.facts),
      outline_json: outlineJson(record),
      updated_at: at
    })
    await findings.replaceAll(tx, row.id, check)
    await records.replaceRecord(tx, row.id, record)
    const kept = objectsOf(refers, pictures.layers)
    const former = await objectsOfRelease(tx, row)
    await keepLayerPictures(tx, row.id, pictures)
    for (const key of kept) await staged.unstage(tx, key)
    for (const key of former) if (!kept.includes(key)) await staged.stage(tx, key, at)
    await recordAudit(
      tx,
      {
        actorId,
        action: 'release.bundle',
        subjectKind: 'release',
        subjectId: row.id,
        detail: { sha256: file.sha256, bytes: file.bytes, ok: check.ok, findings: check.findings.length }
      },
      at
    )
  })
}
