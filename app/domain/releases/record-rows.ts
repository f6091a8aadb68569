import type { BundleFinding, BundleRecord, FindingPlace } from '~/domain/bundle/bundle-check.types'

/** What is kept of a bundle as rows of the database, in the order of the bundle. */
export function recordRows(releaseId: string, { parts, placements, fingerprints }: BundleRecord) {
  const bomLines = parts.map((part, position) => ({
    release_id: releaseId,
    position,
    designators_json: JSON.stringify(part.designators),
    quantity: part.quantity,
    value: part.value,
    footprint: part.footprint,
    description: part.description,
    is_fitted: part.isFitted ? (1 as const) : (0 as const),
    reading_json: JSON.stringify(part.reading)
  }))
  const placed = placements.map(({ designator, x, y, rotation, side }, position) => ({
    release_id: releaseId,
    position,
    designator,
    x_mm: x,
    y_mm: y,
    rotation_deg: rotation,
    side
  }))
  const prints = fingerprints.map((print, position) => ({
    release_id: releaseId,
    position,
    function: print.function,
    side: print.side,
    layer_index: print.index,
    file: print.file,
    fingerprint: print.fingerprint
  }))
  return { bom_lines: bomLines, placements: placed, layer_fingerprints: prints }
}

/** The outline's box for its column. */
export const outlineJson = (record: BundleRecord | null): string | null =>
  record?.outline ? JSON.stringify(record.outline) : null

type PlaceColumns = { place_x_mm: number | null; place_y_mm: number | null; place_side: 'top' | 'bottom' | null }

export const placeColumns = ({ place }: Pick<BundleFinding, 'place'>): PlaceColumns => ({
  place_x_mm: place?.x ?? null,
  place_y_mm: place?.y ?? null,
  place_side: place?.side ?? null
})

export const placeOf = (row: PlaceColumns): FindingPlace | null =>
  row.place_x_mm === null || row.place_y_mm === null ? null : { x: row.place_x_mm, y: row.place_y_mm, side: row.place_side }
