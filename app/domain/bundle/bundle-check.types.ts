import type { FindingCode, Severity } from './finding-codes'

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

export type BundleFinding = {
  code: FindingCode
  severity: Severity
  file: string | null
  message: string
  expected: string | null
  found: string | null
}

/** The answer of the bundle check. `ok` is false exactly when a `stop` stands among the findings. */
export type BundleCheck = {
  layers: BundleLayer[]
  facts: BundleFacts
  findings: BundleFinding[]
  ok: boolean
}

/** Both sides drawn as sanitised SVG, or null where they could not be drawn. They stand beside the answer, not in it. */
export type BundlePictures = { top: string; bottom: string }

/** What the release form says about the board, to compare the files with. */
export type DeclaredDetails = { declaredLayers?: number; thicknessMm?: number }

/** The steps of a check, in order, as they are reported while it runs. */
export const checkSteps = ['read-zip', 'tell-layers', 'measure', 'compare-lists', 'draw'] as const
export type CheckStep = (typeof checkSteps)[number]

/** The steps' names for people. */
export const checkStepNames: Record<CheckStep, string> = {
  'read-zip': 'Read the zip',
  'tell-layers': 'Tell the layers',
  measure: 'Measure',
  'compare-lists': 'Compare the parts lists',
  draw: 'Draw both sides'
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
