import type { ReadProblem } from './read-gerber'

export type Plating = 'plated' | 'non-plated' | null

/** One drilled hole or, with a second end, one slot; in mm. */
export type Hole = { x: number; y: number; toX: number | null; toY: number | null; diameter: number; plating: Plating }

/** How coordinates without a decimal point are to be read. `keeps` says which zeros are written. */
export type DrillFormat = { unit: 'mm' | 'inch'; integer: number; decimals: number; keeps: 'leading' | 'trailing' }

export type DrillFile = {
  attributes: Map<string, string[]>
  holes: Hole[]
  problem: ReadProblem | null
  /** The format the coordinates were read by. */
  format: DrillFormat
  /** What the file says itself; null where it is silent. */
  declared: { unit: DrillFormat['unit'] | null; digits: boolean; keeps: DrillFormat['keeps'] | null }
  /** The undeclared parts of the format on which some coordinate's meaning hangs. */
  doubts: Set<'unit' | 'digits' | 'zeros'>
  smallestTool: number | null
  /** The finest step in mm in which it writes coordinates. */
  resolution: number
}
