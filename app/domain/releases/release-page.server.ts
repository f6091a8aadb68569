import type { Db } from '~db/client.server'
import { can, type Actor } from '~/domain/accounts/can'
import { claimsOf } from '~/domain/boards/board-page.server'
import type { BundleFacts } from '~/domain/bundle/bundle-check.types'
import type { Box } from '~/domain/bundle/geometry'
import { dayOf } from '~/lib/dates'
import { renderMarkdown } from '~/server/markdown.server'
import { runOf } from './check-runs.server'
import { declaredBesideMeasured } from './declared-beside-measured'
import { declaredOf } from './declared-of.server'
import * as downloads from './downloads.repo.server'
import * as findingsRepo from './findings.repo.server'
import * as layerPicturesRepo from './layer-pictures.repo.server'
import { obstacles } from './publish-rules'
import { partsTable } from './part-rows'
import { listParts } from './record.repo.server'
import * as repo from './releases.repo.server'
import { bundleFileName, layerPicturePath, picturePath, releasePath, thumbnailPath } from './release-path'
import { findRelease } from './releases.server'
import { mustReadVersion, newestOf, stateWhenPublished } from './version'
import { changesShown } from './what-changed.server'

export type ReleasePage = Awaited<ReturnType<typeof releasePage>>

const day = (at: string | null) => (at === null ? null : dayOf(at))

function checkStateOf(release: repo.ReleaseRow): 'none' | 'running' | 'interrupted' | 'done' {
  if (runOf(release.id)) return 'running'
  if (release.check_state === 'running') return 'interrupted'
  return release.check_state
}

/**
 * Everything that the page of a release prints, for this reader; a draft for its maintainers only.
 * @throws DomainError `not-found`
 */
export async function releasePage(db: Db, actor: Actor, slug: string, version: string) {
  const { board, release } = await findRelease(db, actor, slug, version)
  const [files, layers, findings, siblings, fit, downloaded, changes, parts] = await Promise.all([
    findingsRepo.listFiles(db, release.id),
    layerPicturesRepo.listByRelease(db, release.id),
    findingsRepo.listFindings(db, release.id),
    repo.listByBoard(db, board.id),
    claimsOf(db, board),
    downloads.total(db, release.id),
    changesShown(db, release),
    listParts(db, release.id)
  ])
  const subject = { boardId: board.id, state: release.state }
  const published = siblings.filter((r) => r.state !== 'draft')
  const newest = newestOf(siblings.map((r) => ({ ...r, precedenceKey: r.precedence_key })))
  const facts = release.facts_json === null ? null : (JSON.parse(release.facts_json) as BundleFacts)
  const checkState = checkStateOf(release)
  return {
    board: {
      slug: board.slug,
      name: board.name,
      summary: board.summary,
      replaces: board.replaces,
      licence: board.licence,
      consoleName: board.console_name,
      consoleSlug: board.console_slug,
      consoleKind: board.console_kind
    },
    release: {
      version: release.version,
      state: release.state,
      boardRevision: release.board_revision,
      thicknessMm: release.declared_thickness_mm,
      copperUm: release.declared_copper_um,
      publishedOn: day(release.published_at),
      withdrawnOn: day(release.withdrawn_at),
      withdrawnReason: release.withdrawn_reason,
      updatedAt: release.updated_at,
      willBe: stateWhenPublished(mustReadVersion(release.version)),
      orderNote: release.order_note,
      notes: release.notes_md === '' ? null : renderMarkdown(release.notes_md)
    },
    bundle:
      release.bundle_sha256 === null
        ? null
        : {
            sha256: release.bundle_sha256,
            bytes: release.bundle_bytes!,
            sentAs: release.bundle_name,
            fileName: bundleFileName(board.slug, release.version)
          },
    /** What was sent last, where the check refused it: only its findings are kept. */
    refused:
      release.bundle_sha256 === null && release.bundle_name !== null
        ? { sentAs: release.bundle_name, bytes: release.bundle_bytes! }
        : null,
    checkState,
    /** What is going on with its bundle now. */
    run: runOf(release.id),
    facts,
    factRows: declaredBesideMeasured(declaredOf(release), facts, new Set(findings.map((f) => f.code))),
    pictures: {
      top: pictureOf(release.picture_top_sha256, slug, version, 'top'),
      bottom: pictureOf(release.picture_bottom_sha256, slug, version, 'bottom')
    },
    thumbnails: {
      top: thumbnailOf(release.thumb_top_sha256, slug, version, 'top'),
      bottom: thumbnailOf(release.thumb_bottom_sha256, slug, version, 'bottom')
    },
    /** What every picture shows, in mm as the layers count. */
    pictureBox: release.picture_box_json === null ? null : (JSON.parse(release.picture_box_json) as Box),
    /** Single layers, seen from the top; all drilled holes are one, without a file. */
    layerPictures: layers.map(({ file, function: fn, side, layer_index, position, sha256 }) => ({
      file,
      src: layerPicturePath(slug, version, position, sha256),
      function: fn,
      side,
      index: layer_index
    })),
    files,
    changes,
    parts: partsTable(parts),
    findings: findings.map((f) => ({ ...f, answeredOn: day(f.answered_at) })),
    obstacles: obstacles(
      {
        hasBundle: release.bundle_sha256 !== null,
        checkState: checkState === 'interrupted' ? 'none' : checkState,
        isCheckOk: release.is_check_ok === null ? null : release.is_check_ok === 1
      },
      findings
    ),
    fit,
    line: published.map((r) => ({
      version: r.version,
      state: r.state as 'trial' | 'released' | 'withdrawn',
      on: dayOf(r.published_at!),
      boardRevision: r.board_revision,
      href: releasePath(slug, r.version)
    })),
    newer:
      newest && newest.version !== release.version && newest.precedence_key > release.precedence_key
        ? { version: newest.version, isSameRevision: newest.board_revision === release.board_revision }
        : null,
    downloaded,
    rights: {
      canEdit: can(actor, 'release.edit', subject),
      canPublish: can(actor, 'release.publish', subject),
      canWithdraw: can(actor, 'release.withdraw', subject)
    }
  }
}

const pictureOf = (sha256: string | null, slug: string, version: string, side: 'top' | 'bottom') =>
  sha256 === null ? null : picturePath(slug, version, side, sha256)

const thumbnailOf = (sha256: string | null, slug: string, version: string, side: 'top' | 'bottom') =>
  sha256 === null ? null : thumbnailPath(slug, version, side, sha256)
