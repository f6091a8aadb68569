import type { BundlePart, BundleRecord, LayerFingerprint } from './bundle-check.types'
import type { BundleReading } from './bundle-reading.types'
import type { PartReading } from './part-reading.types'

const unread: PartReading = {
  kind: null,
  value: null,
  tolerance: null,
  voltage: null,
  dielectric: null,
  size: null,
  esr: null,
  power: null,
  current: null,
  isNotFitted: false,
  unread: 'Values are not read yet.'
}

/**
 * What is kept of a bundle beside the check's answer: the outline's box, the fingerprints, the parts with what their values say, and the
 * placements in mm. What could not be read is left out.
 */
export function bundleRecord(reading: BundleReading, fingerprints: LayerFingerprint[]): BundleRecord {
  const { outline, outlineFile, bom, placement } = reading
  const isClosed = outline?.box && outlineFile && !outlineFile.isBroken
  return {
    outline: isClosed ? outline.box : null,
    fingerprints,
    parts: (bom?.lines ?? []).map(({ designators, quantity, value, footprint, description, isFitted }): BundlePart => ({
      designators,
      quantity,
      value,
      footprint,
      description,
      isFitted,
      reading: unread
    })),
    placements: placement?.parts ?? []
  }
}
