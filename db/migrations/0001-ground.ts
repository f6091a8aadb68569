import { sql, type Kysely } from 'kysely'

/* Conventions: text primary keys from newId(); `_at` UTC instants and `_on` calendar days as ISO 8601 text; booleans 0 or 1. */
const statements = [
  `create table users (
    id text primary key,
    display_name text not null check (length(display_name) between 1 and 60),
    email text unique,
    email_verified_at text,
    github_id integer unique,
    github_login text,
    is_steward integer not null default 0 check (is_steward in (0, 1)),
    created_at text not null,
    disabled_at text,
    check (email is null or email = lower(email))
  ) strict`,
  `create table sign_in_tokens (
    token_hash text primary key,
    email text not null,
    return_to text not null,
    created_at text not null,
    expires_at text not null,
    used_at text
  ) strict`,
  `create index sign_in_tokens_by_email on sign_in_tokens (email, created_at)`,
  `create index sign_in_tokens_by_expiry on sign_in_tokens (expires_at)`,
  `create table oauth_attempts (
    state_hash text primary key,
    browser_hash text not null,
    code_verifier text not null,
    return_to text not null,
    created_at text not null,
    expires_at text not null
  ) strict`,
  `create index oauth_attempts_by_expiry on oauth_attempts (expires_at)`,
  `create table sessions (
    id_hash text primary key,
    user_id text not null references users (id) on delete cascade,
    created_at text not null,
    last_seen_at text not null,
    expires_at text not null
  ) strict`,
  `create index sessions_by_user on sessions (user_id)`,
  `create index sessions_by_expiry on sessions (expires_at)`,

  `create table consoles (
    id text primary key,
    slug text not null unique,
    name text not null,
    maker text not null,
    kind text not null check (kind in ('home', 'handheld')),
    built_from integer,
    built_to integer,
    summary text not null
  ) strict`,
  `create table console_revisions (
    id text primary key,
    console_id text not null references consoles (id),
    code text not null,
    position integer not null,
    built_from integer,
    recognise text not null,
    unique (console_id, code),
    unique (console_id, position)
  ) strict`,

  `create table boards (
    id text primary key,
    slug text not null unique,
    name text not null,
    summary text not null,
    replaces text not null,
    console_id text not null references consoles (id),
    licence text not null,
    description_md text not null default '',
    created_at text not null,
    created_by text references users (id) on delete set null
  ) strict`,
  `create index boards_by_console on boards (console_id, name)`,
  `create index boards_by_name on boards (name collate nocase, id)`,
  `create table board_maintainers (
    board_id text not null references boards (id),
    user_id text not null references users (id) on delete cascade,
    role text not null check (role in ('owner', 'maintainer')),
    added_at text not null,
    primary key (board_id, user_id)
  ) strict, without rowid`,
  `create index board_maintainers_by_user on board_maintainers (user_id)`,
  `create table fit_claims (
    board_id text not null references boards (id),
    console_revision_id text not null references console_revisions (id),
    claim text not null check (claim in ('fits', 'fits-with-care', 'does-not-fit', 'untested')),
    reason text not null default '',
    updated_at text not null,
    updated_by text references users (id) on delete set null,
    primary key (board_id, console_revision_id)
  ) strict, without rowid`,

  `create table releases (
    id text primary key,
    board_id text not null references boards (id),
    version text not null,
    precedence_key text not null,
    board_revision text not null,
    state text not null check (state in ('draft', 'trial', 'released', 'withdrawn')),
    notes_md text not null default '',
    declared_layers integer,
    declared_thickness_mm real,
    declared_copper_um real,
    declared_finish text,
    declared_mask text,
    declared_legend text,
    declared_stencil text check (declared_stencil in ('none', 'top', 'bottom', 'both')),
    order_note text not null default '',
    bundle_sha256 text,
    bundle_bytes integer,
    bundle_name text,
    check_state text not null default 'none' check (check_state in ('none', 'running', 'done')),
    check_started_at text,
    is_check_ok integer check (is_check_ok in (0, 1)),
    facts_json text,
    picture_top_sha256 text,
    picture_bottom_sha256 text,
    created_at text not null,
    created_by text references users (id) on delete set null,
    updated_at text not null,
    published_at text,
    published_by text references users (id) on delete set null,
    withdrawn_at text,
    withdrawn_by text references users (id) on delete set null,
    withdrawn_reason text,
    unique (board_id, precedence_key),
    check (state = 'draft' or (bundle_sha256 is not null and published_at is not null)),
    check ((state = 'withdrawn') = (withdrawn_at is not null))
  ) strict`,
  `create index releases_by_bundle on releases (bundle_sha256)`,
  `create index releases_by_picture_top on releases (picture_top_sha256)`,
  `create index releases_by_picture_bottom on releases (picture_bottom_sha256)`,
  `create trigger releases_never_change before update of version, precedence_key, board_id, board_revision, notes_md, declared_layers,
      declared_thickness_mm, declared_copper_um, declared_finish, declared_mask, declared_legend, declared_stencil, order_note,
      bundle_sha256, bundle_bytes, bundle_name, facts_json, is_check_ok, published_at on releases
    when old.state <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger releases_state_goes_forward before update of state on releases
    when not (old.state = new.state or (old.state = 'draft' and new.state in ('trial', 'released'))
      or (old.state in ('trial', 'released') and new.state = 'withdrawn'))
    begin select raise(abort, 'a release does not go back to an earlier state'); end`,
  `create trigger releases_are_kept before delete on releases when old.state <> 'draft'
    begin select raise(abort, 'a published release is never deleted'); end`,
  `create table release_files (
    release_id text not null references releases (id) on delete cascade,
    position integer not null,
    file text not null,
    function text not null,
    side text check (side in ('top', 'bottom', 'inner')),
    layer_index integer,
    evidence text not null,
    primary key (release_id, position)
  ) strict, without rowid`,
  `create table findings (
    id text primary key,
    release_id text not null references releases (id) on delete cascade,
    position integer not null,
    code text not null,
    severity text not null check (severity in ('stop', 'caution', 'note')),
    file text,
    message text not null,
    expected text,
    found text,
    answer text,
    answered_at text,
    answered_by text references users (id) on delete set null,
    unique (release_id, position)
  ) strict`,
  `create trigger release_files_never_change before update of file, function, side, layer_index, evidence on release_files
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger release_files_never_go before delete on release_files
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger findings_never_change before update of code, severity, file, message, expected, found, answer, answered_at on findings
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger findings_never_go before delete on findings
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create table downloads (
    release_id text not null references releases (id),
    day text not null,
    count integer not null,
    primary key (release_id, day)
  ) strict, without rowid`,
  `create table staged_objects (
    object_key text primary key,
    staged_at text not null
  ) strict`,
  `create index staged_objects_by_time on staged_objects (staged_at)`,

  `create table batches (
    id text primary key,
    release_id text not null references releases (id),
    code text not null,
    made_on text not null,
    quantity integer not null check (quantity > 0),
    assembled_by text not null,
    note text not null default '',
    created_at text not null,
    created_by text references users (id) on delete set null,
    unique (release_id, code)
  ) strict`,
  `create table units (
    tag text primary key,
    batch_id text not null references batches (id),
    created_at text not null
  ) strict`,
  `create index units_by_batch on units (batch_id)`,
  `create table install_reports (
    id text primary key,
    release_id text not null references releases (id),
    console_revision_id text not null references console_revisions (id),
    unit_tag text references units (tag),
    reporter_id text references users (id) on delete set null,
    installed_on text not null,
    filed_on text not null,
    filed_at text not null,
    evidence text not null check (evidence in ('measured', 'code-read', 'symptom-only', 'none')),
    method text check (method in ('iron', 'hot-air', 'hot-plate', 'several')),
    first_power text not null check (first_power in ('works', 'partly', 'no-change', 'worse')),
    notes text not null default '',
    form_key text unique,
    excluded_at text,
    excluded_by text references users (id) on delete set null,
    exclusion_kind text check (exclusion_kind in ('duplicate', 'other-board', 'not-plausible', 'withdrawn-by-author')),
    exclusion_reason text,
    check ((excluded_at is null) = (exclusion_kind is null))
  ) strict`,
  `create index install_reports_by_release on install_reports (release_id, console_revision_id, filed_at)`,
  `create index install_reports_by_revision on install_reports (console_revision_id)`,
  `create index install_reports_by_reporter on install_reports (reporter_id, filed_at)`,
  `create index install_reports_by_unit on install_reports (unit_tag)`,
  `create table check_ins (
    id text primary key,
    report_id text not null references install_reports (id),
    statement text not null check (statement in ('running', 'failed', 'parted')),
    stated_on text not null,
    filed_at text not null,
    filed_by text references users (id) on delete set null,
    notes text not null default '',
    form_key text unique
  ) strict`,
  `create index check_ins_by_report on check_ins (report_id, stated_on)`,
  `create table failures (
    report_id text primary key references install_reports (id),
    check_in_id text unique references check_ins (id),
    last_running_on text,
    found_on text not null,
    cause text not null check (cause in ('board', 'fitting', 'other-fault', 'wrong-diagnosis', 'accident', 'unknown')),
    notes text not null default '',
    created_at text not null
  ) strict`,

  `create table mail_outbox (
    id text primary key,
    dedupe_key text not null unique,
    to_address text not null,
    subject text not null,
    text_body text not null,
    created_at text not null,
    attempts integer not null default 0,
    next_attempt_at text,
    sent_at text,
    given_up_at text,
    last_error text,
    provider_id text
  ) strict`,
  `create index mail_outbox_due on mail_outbox (next_attempt_at) where sent_at is null and given_up_at is null`,
  `create table rate_counts (
    bucket text not null,
    window_start integer not null,
    count integer not null,
    primary key (bucket, window_start)
  ) strict, without rowid`,
  `create table audit_log (
    id text primary key,
    at text not null,
    actor_id text,
    action text not null,
    subject_kind text not null,
    subject_id text not null,
    detail_json text not null default '{}'
  ) strict`,
  `create index audit_log_by_subject on audit_log (subject_kind, subject_id, at)`,
  `create index audit_log_by_time on audit_log (at)`
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of statements) await sql.raw(statement).execute(db)
}
