import type { BundleFinding, BundleLayer, DeclaredDetails } from './bundle-check.types'
import type { BoardArea } from './board-area'
import type { EdgeExcess } from './edge-watch'
import type { FileKind } from './file-kind'
import type { LayerSums } from './layer-sums'
import type { HoleWatch } from './hole-watch'
import type { Role } from './name-layer'
import type { Outline } from './outline-contours'
import type { PadNames } from './pad-names'
import type { Bom } from './read-bom'
import type { DrillFormat, Hole } from './drill-file.types'
import type { GerberImage } from './read-gerber'
import type { JobFile } from './read-job'
import type { Placement } from './read-placement'

/** One file of the bundle as it was read. */
export type FileReading = {
  layer: BundleLayer
  /** The path in the zip, exactly; `layer.file` is the one to show. */
  path: string
  kind: FileKind
  size: number
  /** What the name says where it contradicts the file's own attribute. */
  conflict: Role | null
  isUndecided: boolean
  image: GerberImage | null
  /** Of a copper layer: what its fingerprint is made of. */
  sums: LayerSums | null
  /** Holes of a drill file of either format, in mm. */
  holes: Hole[] | null
  drillFormat: DrillFormat | null
  /** Of a copper layer: what it draws past the board's edge; null where there is no closed outline. */
  excess: EdgeExcess | null
  /** Of a copper layer: what lies at the rims of the drilled holes; null where there are none. */
  rims: HoleWatch | null
  /** Of an outer copper layer: which component's pads stand where, as far as the file says. */
  names: PadNames | null
  /** The copper layers that a drill file's holes run between, as its attribute says; null for all. */
  span: [number, number] | null
  /** Set once something was found wrong with the file itself, so that checks resting on it are left out. */
  isBroken: boolean
}

/** Everything that was read, for the checks that compare. */
export type BundleReading = {
  files: FileReading[]
  job: JobFile | null
  bom: Bom | null
  bomFile: string | null
  placement: Placement | null
  placementFile: string | null
  /** The files that the placement was put together from, and whom each of them places. */
  placementLists: { file: string; designators: Set<string> }[]
  outline: Outline | null
  outlineFile: FileReading | null
  /** The board's area by the outline, ready to be asked; null without a closed one. */
  area: BoardArea | null
  declared: DeclaredDetails
}

/** A check over what was read: its findings, to be added in order. */
export type ReadingCheck = (reading: BundleReading) => BundleFinding[]
