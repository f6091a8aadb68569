import type { Insertable } from 'kysely'
import { addDays } from '~/lib/dates'
import { newId } from '~/lib/new-id'
import type { Schema } from '~db/schema'
import { demoBoards } from './boards'
import { demoConsoles } from './consoles'
import type { Manifest } from './manifests'
import { demoPeople, personByLogin } from './people'
import { randomOf } from './random'
import { demoReleases } from './releases'

type Rows<T extends keyof Schema> = Insertable<Schema[T]>[]

/** A fixed identifier for a thing of the demo world, spelled like every other. */
export const fixedId = (seed: number, name: string): string => {
  const random = randomOf(seed, `id/${name}`)
  return newId((n) => random.bytes(n))
}

export const releaseId = (seed: number, board: string, version: string) => fixedId(seed, `release/${board}/${version}`)
export const revisionId = (seed: number, code: string) => fixedId(seed, `revision/${code}`)

/** People, consoles with their revisions, boards with their maintainers and fit claims. */
export function worldRows(seed: number) {
  const users: Rows<'users'> = demoPeople.map((person) => ({
    id: person.id,
    display_name: person.name,
    email: person.email,
    email_verified_at: '2021-10-01T09:00:00.000Z',
    github_id: person.githubId,
    github_login: person.login,
    is_steward: person.isSteward ? 1 : 0,
    created_at: '2021-10-01T09:00:00.000Z'
  }))
  const consoles: Rows<'consoles'> = demoConsoles.map(({ id, slug, name, maker, kind, builtFrom, builtTo, summary }) => ({
    id,
    slug,
    name,
    maker,
    kind,
    built_from: builtFrom,
    built_to: builtTo,
    summary
  }))
  const console_revisions: Rows<'console_revisions'> = demoConsoles.flatMap(({ id, revisions }) =>
    revisions.map(({ code, builtFrom, recognise }, i) => ({
      id: revisionId(seed, code),
      console_id: id,
      code,
      position: i + 1,
      built_from: builtFrom,
      recognise
    }))
  )
  const boards: Rows<'boards'> = demoBoards.map((board) => ({
    id: board.id,
    slug: board.slug,
    name: board.name,
    summary: board.summary,
    replaces: board.replaces,
    console_id: demoConsoles.find((c) => c.slug === board.console)!.id,
    licence: board.licence,
    description_md: board.description,
    created_at: `${board.openedOn}T09:00:00.000Z`,
    created_by: personByLogin(board.owner).id
  }))
  const board_maintainers: Rows<'board_maintainers'> = demoBoards.flatMap((board) =>
    [board.owner, ...board.maintainers].map((login, i) => ({
      board_id: board.id,
      user_id: personByLogin(login).id,
      role: i === 0 ? ('owner' as const) : ('maintainer' as const),
      added_at: `${addDays(board.openedOn, i * 30)}T09:00:00.000Z`
    }))
  )
  const fit_claims: Rows<'fit_claims'> = demoBoards.flatMap((board) =>
    Object.entries(board.fit).map(([code, { claim, reason }]) => ({
      board_id: board.id,
      console_revision_id: revisionId(seed, code),
      claim,
      reason,
      updated_at: '2024-11-09T09:00:00.000Z',
      updated_by: personByLogin(board.owner).id
    }))
  )
  return { users, consoles, console_revisions, boards, board_maintainers, fit_claims }
}

type PictureColumns =
  'picture_top_sha256' | 'picture_bottom_sha256' | 'thumb_top_sha256' | 'thumb_bottom_sha256' | 'picture_box_json'
export type StoredCheck = {
  isOk: boolean
  factsJson: string
  outlineJson: string | null
  pictures: Pick<Insertable<Schema['releases']>, PictureColumns>
}

/** A published release as it stands after publishing (and withdrawing, where it was). */
export function releaseRow(seed: number, manifest: Manifest, precedenceKey: string, name: string, check: StoredCheck) {
  const words = demoReleases.find((r) => r.board === manifest.board && r.version === manifest.version)!
  const board = demoBoards.find((b) => b.slug === manifest.board)!
  const owner = personByLogin(board.owner).id
  const publishedAt = `${manifest.date}T10:00:00.000Z`
  const row: Insertable<Schema['releases']> = {
    id: releaseId(seed, manifest.board, manifest.version),
    board_id: board.id,
    version: manifest.version,
    precedence_key: precedenceKey,
    board_revision: manifest.boardRevision,
    state: words.withdrawn ? 'withdrawn' : manifest.version.includes('-') ? 'trial' : 'released',
    notes_md: words.notes,
    declared_layers: manifest.declared.copperLayers,
    declared_thickness_mm: manifest.declared.thicknessMm,
    declared_copper_um: manifest.declared.copperUm,
    declared_finish: manifest.declared.finish,
    declared_mask: manifest.declared.solderMask,
    declared_legend: manifest.declared.legend,
    declared_stencil: manifest.declared.stencil,
    order_note: words.orderNote,
    bundle_sha256: manifest.bundle.sha256,
    bundle_bytes: manifest.bundle.bytes,
    bundle_name: name,
    check_state: 'done',
    check_started_at: `${manifest.date}T09:30:00.000Z`,
    is_check_ok: check.isOk ? 1 : 0,
    facts_json: check.factsJson,
    outline_json: check.outlineJson,
    ...check.pictures,
    created_at: `${addDays(manifest.date, -9)}T18:00:00.000Z`,
    created_by: owner,
    updated_at: publishedAt,
    published_at: publishedAt,
    published_by: owner,
    withdrawn_at: words.withdrawn ? `${words.withdrawn.on}T08:30:00.000Z` : null,
    withdrawn_by: words.withdrawn ? personByLogin(words.withdrawn.by).id : null,
    withdrawn_reason: words.withdrawn?.reason ?? null
  }
  return row
}
