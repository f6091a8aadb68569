import type { BundlePart, BundleRecord, LayerFingerprint } from './bundle-check.types'
import type { BundleReading } from './bundle-reading.types'
import type { BomLine } from './read-bom'
import { readPartValue } from './read-part-value'

/** No board has more parts or places; lists that run past it are kept up to here. */
const mostParts = 20_000

/** Longer cells are cut: they are prose, or an attempt to fill the database. */
const longestCell = 1000

/**
 * What is kept of a bundle beside the check's answer: the outline's box, the fingerprints, the parts with what their values say, and the
 * placements in mm. What could not be read is left out; lists have at most 20,000 designators and places.
 */
export function bundleRecord(reading: BundleReading, fingerprints: LayerFingerprint[]): BundleRecord {
  const { outline, outlineFile, bom, placement } = reading
  const isClosed = outline?.box && outlineFile && !outlineFile.isBroken
  return {
    outline: isClosed ? outline.box : null,
    fingerprints,
    parts: firstLines(bom?.lines ?? []).map(partOf),
    placements: (placement?.parts ?? []).slice(0, mostParts)
  }
}

function firstLines(lines: readonly BomLine[]): readonly BomLine[] {
  let designators = 0
  const end = lines.findIndex((line) => (designators += line.designators.length) > mostParts)
  return end < 0 ? lines : lines.slice(0, end)
}

function partOf(line: BomLine): BundlePart {
  const [value, footprint, description] = [line.value, line.footprint, line.description].map((text) => text.slice(0, longestCell))
  const { designators, quantity, isFitted } = line
  const part = { designators, quantity, value: value!, footprint: footprint!, description: description!, isFitted }
  return { ...part, reading: readPartValue({ ...part, designator: designators[0] ?? '' }) }
}
