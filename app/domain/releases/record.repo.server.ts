import type { Insertable } from 'kysely'
import type { DbOrTx, Tx } from '~db/client.server'
import type { Schema } from '~db/schema'
import type { BundlePart, BundleRecord, EarlierRelease, LayerFingerprint } from '~/domain/bundle/bundle-check.types'
import type { PartReading } from '~/domain/bundle/part-reading.types'
import type { Placed } from '~/domain/bundle/read-placement'
import { recordRows } from './record-rows'

/** Rows of one insert, well below SQLite's limit of bound values. */
const chunk = 200

/** Lists longer than this are not a board's; the check reads no more rows of a file either. */
const mostRows = 20_000

/** Published releases of one board revision to compare with: all of them have the same copper, so a few say it all. */
const mostEarlier = 20

const tables = ['bom_lines', 'placements', 'layer_fingerprints'] as const

/** Puts what is kept of a bundle in place of what was kept before; nothing stays where there is no record. */
export async function replaceRecord(tx: Tx, releaseId: string, record: BundleRecord | null): Promise<void> {
  for (const table of tables) await tx.deleteFrom(table).where('release_id', '=', releaseId).execute()
  if (!record) return
  const rows = recordRows(releaseId, record)
  await insertAll(tx, 'bom_lines', rows.bom_lines)
  await insertAll(tx, 'placements', rows.placements)
  await insertAll(tx, 'layer_fingerprints', rows.layer_fingerprints)
}

async function insertAll<T extends (typeof tables)[number]>(tx: Tx, table: T, rows: readonly Insertable<Schema[T]>[]) {
  for (let i = 0; i < Math.min(rows.length, mostRows); i += chunk)
    await tx
      .insertInto(table)
      .values(rows.slice(i, Math.min(i + chunk, mostRows)) as never)
      .execute()
}

/** The bill of materials as it was read, in its order. */
export async function listParts(db: DbOrTx, releaseId: string): Promise<BundlePart[]> {
  const rows = await db
    .selectFrom('bom_lines')
    .selectAll()
    .where('release_id', '=', releaseId)
    .orderBy('position')
    .limit(mostRows)
    .execute()
  return rows.map((row) => ({
    designators: JSON.parse(row.designators_json) as string[],
    quantity: row.quantity,
    value: row.value,
    footprint: row.footprint,
    description: row.description,
    isFitted: row.is_fitted === 1,
    reading: JSON.parse(row.reading_json) as PartReading
  }))
}

/** Where the parts are placed, mm as the layers count, in the order of the file. */
export async function listPlacements(db: DbOrTx, releaseId: string): Promise<Placed[]> {
  const rows = await db
    .selectFrom('placements')
    .selectAll()
    .where('release_id', '=', releaseId)
    .orderBy('position')
    .limit(mostRows)
    .execute()
  return rows.map((row) => ({
    designator: row.designator,
    x: row.x_mm,
    y: row.y_mm,
    rotation: row.rotation_deg,
    side: row.side
  }))
}

/** What stands for the geometry of copper, outline and holes; to be compared by `compareFingerprints`. */
export async function listFingerprints(db: DbOrTx, releaseId: string): Promise<LayerFingerprint[]> {
  const rows = await db
    .selectFrom('layer_fingerprints')
    .selectAll()
    .where('release_id', '=', releaseId)
    .orderBy('position')
    .limit(1000)
    .execute()
  return rows.map(printOf)
}

/** The published releases of a board's revision but one, newest version first, with their fingerprints. */
export async function listEarlier(
  db: DbOrTx,
  release: { id: string; board_id: string; board_revision: string }
): Promise<EarlierRelease[]> {
  const releases = await db
    .selectFrom('releases')
    .select(['id', 'version'])
    .where('board_id', '=', release.board_id)
    .where('board_revision', '=', release.board_revision)
    .where('state', '<>', 'draft')
    .where('id', '<>', release.id)
    .orderBy('precedence_key', 'desc')
    .limit(mostEarlier)
    .execute()
  const earlier: EarlierRelease[] = []
  for (const { id, version } of releases) earlier.push({ version, fingerprints: await listFingerprints(db, id) })
  return earlier
}

const printOf = (row: {
  function: LayerFingerprint['function']
  side: LayerFingerprint['side']
  layer_index: number | null
  file: string
  fingerprint: string
}): LayerFingerprint => ({
  function: row.function,
  side: row.side,
  index: row.layer_index,
  file: row.file,
  fingerprint: row.fingerprint
})
