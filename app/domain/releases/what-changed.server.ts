import type { Db } from '~db/client.server'
import type { BundleFacts, BundleRecord } from '~/domain/bundle/bundle-check.types'
import type { Box } from '~/domain/bundle/geometry'
import type { Actor } from '~/domain/accounts/can'
import { draftToEdit } from './board-releases.server'
import { changeRows, type ChangesShown } from './change-rows'
import { declaredOf } from './declared-of.server'
import { detailColumns } from './drafts.server'
import * as findings from './findings.repo.server'
import { previousOf } from './previous-release'
import * as record from './record.repo.server'
import type { Draft } from './release.schema'
import * as repo from './releases.repo.server'
import { whatChanged as compare } from './what-changed'
import { startNotes, whatChangedNotes, type StartedNotes } from './what-changed-notes'
import type { ReleaseSide, WhatChanged } from './what-changed.types'

type Row = Pick<
  repo.ReleaseRow,
  | 'id'
  | 'board_id'
  | 'version'
  | 'board_revision'
  | 'facts_json'
  | 'outline_json'
  | 'declared_layers'
  | 'declared_thickness_mm'
  | 'declared_copper_um'
  | 'declared_finish'
  | 'declared_mask'
  | 'declared_legend'
  | 'declared_stencil'
>

async function recordOf(db: Db, release: Row): Promise<BundleRecord | null> {
  const [parts, placements, fingerprints] = await Promise.all([
    record.listParts(db, release.id),
    record.listPlacements(db, release.id),
    record.listFingerprints(db, release.id)
  ])
  const outline = release.outline_json === null ? null : (JSON.parse(release.outline_json) as Box)
  const isKept = outline !== null || parts.length + placements.length + fingerprints.length > 0
  return isKept ? { outline, parts, placements, fingerprints } : null
}

async function sideOf(db: Db, release: Row): Promise<ReleaseSide> {
  const [kept, files] = await Promise.all([recordOf(db, release), findings.listFiles(db, release.id)])
  return {
    version: release.version,
    boardRevision: release.board_revision,
    record: kept,
    facts: release.facts_json === null ? null : (JSON.parse(release.facts_json) as BundleFacts),
    layers: files.map(({ function: fn, side, layer_index }) => ({
      function: fn as ReleaseSide['layers'][number]['function'],
      side,
      index: layer_index
    })),
    declared: declaredOf(release)
  }
}

/** The published release before this version of a board, or undefined when it is the first. */
async function previousRow(db: Db, boardId: string, version: string): Promise<repo.ReleaseRow | undefined> {
  const previous = previousOf(await repo.listByBoard(db, boardId), version)
  return previous ? repo.findById(db, previous.id) : undefined
}

/**
 * What a release changed since the one before it (`previousOf`).
 * @returns null when there is none before it, or when its bundle is not checked
 */
export async function whatChanged(db: Db, release: Row): Promise<WhatChanged | null> {
  if (release.facts_json === null) return null
  const previous = await previousRow(db, release.board_id, release.version)
  if (!previous) return null
  const [before, after] = await Promise.all([sideOf(db, previous), sideOf(db, release)])
  return compare(before, after)
}

/** As `whatChanged`, in the words of the release's page. */
export async function changesShown(db: Db, release: Row): Promise<ChangesShown | null> {
  const changed = await whatChanged(db, release)
  return changed && changeRows(changed)
}

/** What the form of a draft can offer: to start the notes with what changed since `since`, once the bundle is checked. */
export type NotesOffer = { since: string; isReady: boolean }

export async function notesOffer(db: Db, release: Row): Promise<NotesOffer | null> {
  const previous = await previousRow(db, release.board_id, release.version)
  return previous ? { since: previous.version, isReady: release.facts_json !== null } : null
}

/**
 * The notes of a draft with what changed before them. Nothing is saved. What is entered in the form counts in place of what was saved.
 * @param notes as they were typed, which `entered` has trimmed
 * @throws DomainError `not-found`, `forbidden`
 */
export async function startNotesOf(
  db: Db,
  actor: Actor,
  slug: string,
  version: string,
  entered: Draft,
  notes: string
): Promise<(StartedNotes & { since: string }) | null> {
  const { release } = await draftToEdit(db, actor, slug, version)
  const changed = await whatChanged(db, {
    ...release,
    version: entered.version.text,
    ...detailColumns(entered)
  })
  return changed && { ...startNotes(whatChangedNotes(changed), notes), since: changed.since }
}
