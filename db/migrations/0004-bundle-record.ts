import { sql, type Kysely } from 'kysely'

/* What is kept of a bundle beside the check's answer: parts, placements, fingerprints, pictures of single layers, places of findings. */
const statements = [
  'alter table findings add column place_x_mm real',
  'alter table findings add column place_y_mm real',
  "alter table findings add column place_side text check (place_side in ('top', 'bottom'))",
  'alter table releases add column thumb_top_sha256 text',
  'alter table releases add column thumb_bottom_sha256 text',
  'alter table releases add column picture_box_json text',
  'create index releases_by_thumb_top on releases (thumb_top_sha256)',
  'create index releases_by_thumb_bottom on releases (thumb_bottom_sha256)',
  'alter table releases add column outline_json text',
  'create index releases_by_board_revision on releases (board_id, board_revision)',
  `create table bom_lines (
    release_id text not null references releases (id) on delete cascade,
    position integer not null,
    designators_json text not null,
    quantity integer,
    value text not null,
    footprint text not null,
    description text not null,
    is_fitted integer not null check (is_fitted in (0, 1)),
    reading_json text not null,
    primary key (release_id, position)
  ) strict, without rowid`,
  `create table placements (
    release_id text not null references releases (id) on delete cascade,
    position integer not null,
    designator text not null,
    x_mm real not null,
    y_mm real not null,
    rotation_deg real,
    side text not null check (side in ('top', 'bottom')),
    primary key (release_id, position)
  ) strict, without rowid`,
  `create table layer_fingerprints (
    release_id text not null references releases (id) on delete cascade,
    position integer not null,
    function text not null check (function in ('copper', 'outline', 'drill')),
    side text check (side in ('top', 'bottom', 'inner')),
    layer_index integer,
    file text not null,
    fingerprint text not null,
    primary key (release_id, position)
  ) strict, without rowid`,
  `create table layer_pictures (
    release_id text not null references releases (id) on delete cascade,
    position integer not null,
    file text,
    function text not null check (function in ('copper', 'soldermask', 'paste', 'legend', 'outline', 'drill')),
    side text check (side in ('top', 'bottom', 'inner')),
    layer_index integer,
    sha256 text not null,
    primary key (release_id, position)
  ) strict, without rowid`,
  'create index layer_pictures_by_object on layer_pictures (sha256)',
  `create trigger bom_lines_never_change before update on bom_lines
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger bom_lines_never_go before delete on bom_lines
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger placements_never_change before update on placements
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger placements_never_go before delete on placements
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger layer_fingerprints_never_change before update on layer_fingerprints
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger layer_fingerprints_never_go before delete on layer_fingerprints
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger layer_pictures_never_change before update on layer_pictures
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`,
  `create trigger layer_pictures_never_go before delete on layer_pictures
    when (select state from releases where id = old.release_id) <> 'draft'
    begin select raise(abort, 'a published release never changes'); end`
]

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statement of statements) await sql.raw(statement).execute(db)
}
