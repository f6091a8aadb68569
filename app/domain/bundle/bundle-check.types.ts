import type { FindingCode, Severity } from './finding-codes'
import type { Box } from './geometry'
import type { PartReading } from './part-reading.types'
import type { BomLine } from './read-bom'
import type { Placed } from './read-placement'

/** What a file of a bundle is for. The drill kinds say whether the holes are plated; `drill` when the file does not tell. */
export type LayerFunction =
  | 'copper'
  | 'soldermask'
  | 'paste'
  | 'legend'
  | 'outline'
  | 'drill-plated'
  | 'drill-nonplated'
  | 'drill'
  | 'fabrication'
  | 'assembly'
  | 'bom'
  | 'placement'
  | 'job'
  | 'netlist'
  | 'source'
  | 'licence'
  | 'document'
  | 'other'

export type LayerSide = 'top' | 'bottom' | 'inner'

/** One file of the bundle. `index` is the copper layer's number, 1 at the top; `evidence` is what told its function. */
export type BundleLayer = {
  file: string
  function: LayerFunction
  side: LayerSide | null
  index: number | null
  evidence: 'attribute' | 'name' | 'content'
}

/**
 * What was measured; lengths in mm. A value that was not or could not be measured is null, never made up.
 * `minTrack` is the smallest round aperture whose function is conductor; where the files carry no such attribute it is null and
 * `smallestStroke`, the smallest round aperture drawn with on copper, stands instead. `holes` counts slots as holes;
 * `bom.parts` counts designators, the not fitted among them.
 */
export type BundleFacts = {
  width: number | null
  height: number | null
  copperLayers: number | null
  minTrack: number | null
  smallestStroke: number | null
  minHole: number | null
  holes: { plated: number | null; nonPlated: number | null; unknown: number | null }
  slots: number | null
  placements: { top: number | null; bottom: number | null }
  bom: { lines: number | null; parts: number | null; notFitted: number | null }
  files: number | null
  bytes: number | null
  sha256: string | null
}

/** Where on the board a finding points, in mm as the layers count; the side is null where it concerns both or all layers. */
export type FindingPlace = { x: number; y: number; side: 'top' | 'bottom' | null }

/** `place` is kept for the pages and is no part of the public answer (see `publicAnswer`). */
export type BundleFinding = {
  code: FindingCode
  severity: Severity
  file: string | null
  message: string
  expected: string | null
  found: string | null
  place: FindingPlace | null
}

/** The answer of the bundle check. `ok` is false exactly when a `stop` stands among the findings. */
export type BundleCheck = {
  layers: BundleLayer[]
  facts: BundleFacts
  findings: BundleFinding[]
  ok: boolean
}

/** The answer as the API and the command line give it. */
export function publicAnswer({ layers, facts, findings, ok }: BundleCheck) {
  return {
    layers,
    facts,
    findings: findings.map(({ code, severity, file, message, expected, found }) => ({
      code,
      severity,
      file,
      message,
      expected,
      found
    })),
    ok
  }
}

/**
 * What stands for the geometry of one layer, or of all drilled holes, however the file was written: order, comments, dates, attributes, units and
 * where 0, 0 lies do not count. Two releases of one board revision have the same. To be compared by `compareFingerprints`, not as texts: the
 * rounding of another unit may leave a trace.
 */
export type LayerFingerprint = {
  function: 'copper' | 'outline' | 'drill'
  side: LayerSide | null
  index: number | null
  file: string
  fingerprint: string
}

/** One line of the bill of materials with what could be read out of its value. */
export type BundlePart = BomLine & { reading: PartReading }

/** What is kept of a bundle beside the answer: to compare releases, and for everything that is computed from the parts. */
export type BundleRecord = {
  /** The outline's box in mm, as the layers count; null without a closed outline. */
  outline: Box | null
  fingerprints: LayerFingerprint[]
  parts: BundlePart[]
  placements: Placed[]
}

/**
 * One single layer drawn as sanitised SVG in one ink on nothing, seen from the top, its viewBox the same as that of both sides.
 * All drilled holes together are one picture, with the function `drill` and no file.
 */
export type LayerPicture = {
  file: string | null
  function: 'copper' | 'soldermask' | 'paste' | 'legend' | 'outline' | 'drill'
  side: LayerSide | null
  index: number | null
  svg: string
}

/**
 * Both sides drawn as sanitised SVG with their thumbnails as PNG, and each single layer. They stand beside the answer, not in it. Both
 * sides are null where one could not be drawn, and a layer that could not be drawn is left out.
 */
export type BundlePictures = {
  /** What every picture shows, in mm as the layers count: the outline's box, or without a closed outline that of what is drawn. */
  box: Box
  top: string | null
  bottom: string | null
  thumbnails: { top: Uint8Array; bottom: Uint8Array } | null
  layers: LayerPicture[]
}

/** An earlier published release of the same board revision, to compare with. */
export type EarlierRelease = { version: string; fingerprints: LayerFingerprint[] }

/** What the release form says about the board, and what was published of its revision before, to compare the files with. */
export type DeclaredDetails = {
  declaredLayers?: number
  thicknessMm?: number
  boardRevision?: string
  earlier?: EarlierRelease[]
}

/** The steps of a check, in order, as they are reported while it runs. */
export const checkSteps = ['read-zip', 'tell-layers', 'measure', 'compare-lists', 'draw'] as const
export type CheckStep = (typeof checkSteps)[number]

/** The steps' names for people. */
export const checkStepNames: Record<CheckStep, string> = {
  'read-zip': 'Read the zip',
  'tell-layers': 'Tell the layers',
  measure: 'Measure',
  'compare-lists': 'Compare the parts lists',
  draw: 'Draw both sides and every layer'
}

/** Facts of which nothing is known yet. */
export function unknownFacts(): BundleFacts {
  return {
    width: null,
    height: null,
    copperLayers: null,
    minTrack: null,
    smallestStroke: null,
    minHole: null,
    holes: { plated: null, nonPlated: null, unknown: null },
    slots: null,
    placements: { top: null, bottom: null },
    bom: { lines: null, parts: null, notFitted: null },
    files: null,
    bytes: null,
    sha256: null
  }
}
