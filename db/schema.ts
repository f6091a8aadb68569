/* One type a table, in the order of the migrations. Nullable columns are `T | null`; `Generated` ones have a default. */
import type { Generated } from 'kysely'

export type UsersTable = {
  id: string
  display_name: string
  email: string | null
  email_verified_at: string | null
  github_id: number | null
  github_login: string | null
  is_steward: Generated<0 | 1>
  created_at: string
  disabled_at: string | null
}

export type SignInTokensTable = {
  token_hash: string
  email: string
  return_to: string
  created_at: string
  expires_at: string
  used_at: string | null
}

export type OauthAttemptsTable = {
  state_hash: string
  browser_hash: string
  code_verifier: string
  return_to: string
  created_at: string
  expires_at: string
}

export type SessionsTable = {
  id_hash: string
  user_id: string
  created_at: string
  last_seen_at: string
  expires_at: string
}

export type ConsolesTable = {
  id: string
  slug: string
  name: string
  maker: string
  kind: 'home' | 'handheld'
  built_from: number | null
  built_to: number | null
  summary: string
}

export type ConsoleRevisionsTable = {
  id: string
  console_id: string
  code: string
  position: number
  built_from: number | null
  recognise: string
}

export type BoardsTable = {
  id: string
  slug: string
  name: string
  summary: string
  replaces: string
  console_id: string
  licence: string
  description_md: Generated<string>
  created_at: string
  created_by: string | null
}

export type BoardMaintainersTable = {
  board_id: string
  user_id: string
  role: 'owner' | 'maintainer'
  added_at: string
}

export type FitClaimsTable = {
  board_id: string
  console_revision_id: string
  claim: 'fits' | 'fits-with-care' | 'does-not-fit' | 'untested'
  reason: Generated<string>
  updated_at: string
  updated_by: string | null
}

export type ReleasesTable = {
  id: string
  board_id: string
  version: string
  precedence_key: string
  board_revision: string
  state: 'draft' | 'trial' | 'released' | 'withdrawn'
  notes_md: Generated<string>
  declared_layers: number | null
  declared_thickness_mm: number | null
  declared_copper_um: number | null
  declared_finish: string | null
  declared_mask: string | null
  declared_legend: string | null
  declared_stencil: 'none' | 'top' | 'bottom' | 'both' | null
  order_note: Generated<string>
  bundle_sha256: string | null
  bundle_bytes: number | null
  bundle_name: string | null
  check_state: Generated<'none' | 'running' | 'done'>
  check_started_at: string | null
  is_check_ok: 0 | 1 | null
  facts_json: string | null
  picture_top_sha256: string | null
  picture_bottom_sha256: string | null
  thumb_top_sha256: string | null
  thumb_bottom_sha256: string | null
  picture_box_json: string | null
  /** The outline's box in mm as the layers count: minX, minY, maxX, maxY. */
  outline_json: string | null
  created_at: string
  created_by: string | null
  updated_at: string
  published_at: string | null
  published_by: string | null
  withdrawn_at: string | null
  withdrawn_by: string | null
  withdrawn_reason: string | null
}

export type ReleaseFilesTable = {
  release_id: string
  position: number
  file: string
  function: string
  side: 'top' | 'bottom' | 'inner' | null
  layer_index: number | null
  evidence: string
}

export type FindingsTable = {
  id: string
  release_id: string
  position: number
  code: string
  severity: 'stop' | 'caution' | 'note'
  file: string | null
  message: string
  expected: string | null
  found: string | null
  answer: string | null
  answered_at: string | null
  answered_by: string | null
  place_x_mm: number | null
  place_y_mm: number | null
  place_side: 'top' | 'bottom' | null
}

export type BomLinesTable = {
  release_id: string
  position: number
  designators_json: string
  quantity: number | null
  value: string
  footprint: string
  description: string
  is_fitted: 0 | 1
  reading_json: string
}

export type PlacementsTable = {
  release_id: string
  position: number
  designator: string
  x_mm: number
  y_mm: number
  rotation_deg: number | null
  side: 'top' | 'bottom'
}

export type LayerFingerprintsTable = {
  release_id: string
  position: number
  function: 'copper' | 'outline' | 'drill'
  side: 'top' | 'bottom' | 'inner' | null
  layer_index: number | null
  file: string
  fingerprint: string
}

export type LayerPicturesTable = {
  release_id: string
  position: number
  file: string | null
  function: 'copper' | 'soldermask' | 'paste' | 'legend' | 'outline' | 'drill'
  side: 'top' | 'bottom' | 'inner' | null
  layer_index: number | null
  sha256: string
}

export type DownloadsTable = {
  release_id: string
  day: string
  count: number
}

export type StagedObjectsTable = {
  object_key: string
  staged_at: string
}

export type BatchesTable = {
  id: string
  release_id: string
  code: string
  made_on: string
  quantity: number
  assembled_by: string
  note: Generated<string>
  created_at: string
  created_by: string | null
}

export type UnitsTable = {
  tag: string
  batch_id: string
  created_at: string
}

export type InstallReportsTable = {
  id: string
  release_id: string
  console_revision_id: string
  unit_tag: string | null
  reporter_id: string | null
  installed_on: string
  filed_on: string
  filed_at: string
  evidence: 'measured' | 'code-read' | 'symptom-only' | 'none'
  method: 'iron' | 'hot-air' | 'hot-plate' | 'several' | null
  first_power: 'works' | 'partly' | 'no-change' | 'worse'
  notes: Generated<string>
  form_key: string | null
  excluded_at: string | null
  excluded_by: string | null
  exclusion_kind: 'duplicate' | 'other-board' | 'not-plausible' | 'withdrawn-by-author' | null
  exclusion_reason: string | null
}

export type CheckInsTable = {
  id: string
  report_id: string
  statement: 'running' | 'failed' | 'parted'
  stated_on: string
  filed_at: string
  filed_by: string | null
  notes: Generated<string>
  form_key: string | null
}

export type FailuresTable = {
  report_id: string
  check_in_id: string | null
  last_running_on: string | null
  found_on: string
  cause: 'board' | 'fitting' | 'other-fault' | 'wrong-diagnosis' | 'accident' | 'unknown'
  notes: Generated<string>
  created_at: string
}

export type MailOutboxTable = {
  id: string
  dedupe_key: string
  to_address: string
  subject: string
  text_body: string
  created_at: string
  attempts: Generated<number>
  next_attempt_at: string | null
  sent_at: string | null
  given_up_at: string | null
  last_error: string | null
  provider_id: string | null
}

export type RateCountsTable = {
  bucket: string
  window_start: number
  count: number
}

export type AuditLogTable = {
  id: string
  at: string
  actor_id: string | null
  action: string
  subject_kind: string
  subject_id: string
  detail_json: Generated<string>
}

/** Bumped by triggers whenever a board's reports or the state of its releases change. */
export type ReportVersionsTable = {
  board_id: string
  version: number
}

/** One group of counted reports: a release's or batch's units on a console revision, all of them (`*`) or those of one kind. */
export type GroupTotalsTable = {
  id: Generated<number>
  board_id: string
  /** A release or a batch. */
  scope_id: string
  /** A grade, or `*`. */
  evidence: string
  /** A method, `untold`, or `*`. */
  method: string
  first_power: 'works' | '*'
  console_revision_id: string
  totals_json: string
}

export type DayCountsTable = {
  group_id: number
  block: number
  counts: Uint8Array
}

export type LifeCountsTable = {
  group_id: number
  grain: 1 | 14
  entry: number
  lower: number
  /** -1: none. */
  upper: number
  /** Empty: none. */
  cause: string
  count: number
}

export type CountedBoardsTable = {
  board_id: string
  rules: number
  last_filed_on: string | null
  /** The report written since the counts were, `*` for several; set by triggers. */
  uncounted: string | null
}

export type Schema = {
  users: UsersTable
  sign_in_tokens: SignInTokensTable
  oauth_attempts: OauthAttemptsTable
  sessions: SessionsTable
  consoles: ConsolesTable
  console_revisions: ConsoleRevisionsTable
  boards: BoardsTable
  board_maintainers: BoardMaintainersTable
  fit_claims: FitClaimsTable
  releases: ReleasesTable
  release_files: ReleaseFilesTable
  findings: FindingsTable
  bom_lines: BomLinesTable
  placements: PlacementsTable
  layer_fingerprints: LayerFingerprintsTable
  layer_pictures: LayerPicturesTable
  downloads: DownloadsTable
  staged_objects: StagedObjectsTable
  batches: BatchesTable
  units: UnitsTable
  install_reports: InstallReportsTable
  check_ins: CheckInsTable
  failures: FailuresTable
  mail_outbox: MailOutboxTable
  rate_counts: RateCountsTable
  audit_log: AuditLogTable
  report_versions: ReportVersionsTable
  group_totals: GroupTotalsTable
  day_counts: DayCountsTable
  life_counts: LifeCountsTable
  counted_boards: CountedBoardsTable
}
