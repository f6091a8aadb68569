import { emptyBox, type Box, type Path } from './geometry'
import type { Flashes, Keeping, Stroke } from './gerber-canvas'
import { GerberInterpreter } from './gerber-interpreter'
import { GerberNonsense, TooComplex } from './gerber-macro'
import type { CheckLimits } from './limits'

/** Why a file could not be read to its end. */
export type ReadProblem = { kind: 'unreadable' | 'truncated' | 'too-complex'; message: string; found: string | null }

/** What a check needs to know of a Gerber file; lengths in mm. */
export type GerberImage = {
  attributes: Map<string, string[]>
  problem: ReadProblem | null
  /** Deprecated commands that were met, for instance `G54`. */
  deprecated: string[]
  /** The first attribute or comment that holds markup. */
  markup: string | null
  /** Objects drawn dark, copies of blocks and steps counted out. */
  objects: number
  /** Extents of what is drawn dark, line widths included; null when nothing is. */
  box: Box | null
  smallestConductor: number | null
  smallestStroke: number | null
  flashes: Flashes
  strokes: Stroke[]
  regions: Path[]
  /** The step in mm in which the file writes coordinates; 0 where unknown. */
  resolution: number
}

/**
 * Reads a Gerber layer within the limits. Nothing is thrown for what the file holds: `problem` says why reading stopped, and what was
 * read up to there stands.
 *
 * Source: Gerber Layer Format Specification 2024.05, with the deprecated commands of its chapter 8.
 *
 * @param keep which objects to keep besides counting them: strokes and regions for an outline, flashes for alignment
 */
export function readGerber(bytes: Uint8Array, limits: CheckLimits, keep: Keeping): GerberImage {
  const interpreter = new GerberInterpreter(limits, keep)
  let problem: ReadProblem | null = null
  try {
    problem = interpreter.run(bytes)
  } catch (error) {
    if (error instanceof GerberNonsense) problem = { kind: 'unreadable', message: error.message, found: null }
    else if (error instanceof TooComplex) problem = { kind: 'too-complex', message: error.message, found: null }
    else throw error
  }
  const { canvas } = interpreter
  return {
    attributes: interpreter.attributes.file,
    problem,
    deprecated: [...interpreter.deprecated],
    markup: interpreter.attributes.markup,
    objects: canvas.objects,
    box: canvas.objects > 0 && canvas.box.minX <= canvas.box.maxX ? canvas.box : null,
    smallestConductor: canvas.smallestConductor,
    smallestStroke: canvas.smallestStroke,
    flashes: canvas.flashes,
    strokes: canvas.strokes,
    regions: canvas.regions,
    resolution: interpreter.resolution
  }
}

/** The image of a file of which nothing could be read. */
export const noImage = (problem: ReadProblem): GerberImage => ({
  attributes: new Map(),
  problem,
  deprecated: [],
  markup: null,
  objects: 0,
  box: emptyBox(),
  smallestConductor: null,
  smallestStroke: null,
  flashes: { x: [], y: [], halfX: [], halfY: [], aperture: [] },
  strokes: [],
  regions: [],
  resolution: 0
})
