import { holeCentre, isPlated, type FlashIndex } from './alignment'
import type { FindingPlace } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { distanceToEdge } from './geometry'
import type { RimCounts } from './hole-watch'
import type { Hole } from './drill-file.types'

/** A copper layer with its flashes, ready to be asked what they cover. */
export type Indexed = { file: FileReading; index: FlashIndex }

export const percent = (share: number) => `${Math.round(share * 100)} %`

/** The plated holes of a drill file. */
export const platedHoles = (file: FileReading) => (file.holes ?? []).filter((hole) => isPlated(hole, file.layer.function))

/** The drill files that hold holes and in which nothing wrong was found so far. */
export const drillFiles = (reading: BundleReading) =>
  reading.files.filter((file) => file.layer.function.startsWith('drill') && !file.isBroken && (file.holes?.length ?? 0) > 0)

/**
 * Below this share of holes on pads a layer or drill file is not this board's. Real sets lie above 0.84; a shift by nearly the pitch of a
 * connector leaves half of the holes on pads.
 */
export const poor = 0.65

export const leastHoles = 3

/** Half-holes on the edge sit off the middle of their pads on purpose. */
export function insideHoles(reading: BundleReading, holes: Hole[]): Hole[] {
  const contour = reading.outline?.contour
  if (!contour) return holes
  return holes.filter((hole) => distanceToEdge(contour, ...holeCentre(hole)) > hole.diameter / 2)
}

export const placeOf = (hole: Hole | undefined, side: FileReading['layer']['side'] = null): FindingPlace | null => {
  if (!hole) return null
  const [x, y] = holeCentre(hole)
  return { x, y, side: side === 'inner' ? null : side }
}

export const misfitWords = ({ at }: RimCounts) => `${at.mixed} of ${at.full + at.none + at.mixed} holes half in copper`
