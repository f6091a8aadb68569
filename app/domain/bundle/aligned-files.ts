import { isPlated, type FlashIndex } from './alignment'
import type { BundleReading, FileReading } from './bundle-reading.types'

/** A copper layer with its flashes, ready to be asked what they cover. */
export type Indexed = { file: FileReading; index: FlashIndex }

export const percent = (share: number) => `${Math.round(share * 100)} %`

/** The plated holes of a drill file. */
export const platedHoles = (file: FileReading) => (file.holes ?? []).filter((hole) => isPlated(hole, file.layer.function))

/** The drill files that hold holes and in which nothing wrong was found so far. */
export const drillFiles = (reading: BundleReading) =>
  reading.files.filter((file) => file.layer.function.startsWith('drill') && !file.isBroken && (file.holes?.length ?? 0) > 0)
