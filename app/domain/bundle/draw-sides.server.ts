import pcbStackup from 'pcb-stackup'
import { cleanSvg, type SvgPaint } from './clean-svg'
import { drawLayer, markOf, type LayerDrawing } from './draw-layer.server'
import type { Box, Path } from './geometry'
import type { Hole } from './drill-file.types'
import { gerberOfContours, gerberOfHoles } from './write-gerber'

/** Mask in petrol at 80 %, finish and legend as every board picture of Fettle's has them. */
const paints: Record<string, SvgPaint> = {
  fr4: { color: '#6f6a4a' },
  cu: { color: '#c9a961' },
  cf: { color: '#dcbf78' },
  sm: { color: '#0b5566', opacity: '0.8' },
  ss: { color: '#f5f0e4' }
}

/** A layer that shows on a side. */
export type SideLayer = { drawing: LayerDrawing; type: 'copper' | 'soldermask' | 'silkscreen'; side: 'top' | 'bottom' }

export type Sides = { top: string; bottom: string }

/**
 * Both sides as cleaned SVG, clipped by the contours (the board's edge and its cut-outs, mm) and drilled through.
 *
 * @param box what the pictures show, in mm: the box of the board's edge
 * @returns null where anything is in them that a picture does not hold
 */
export async function drawSides(
  layers: readonly SideLayer[],
  contours: readonly Path[],
  holes: readonly Hole[],
  box: Box
): Promise<Sides | null> {
  const edge = await drawLayer(gerberOfContours(contours), 'edge', true)
  const inputs: pcbStackup.InputLayer[] = [
    { converter: edge, type: 'outline', side: 'all' },
    ...layers.map(({ drawing, type, side }) => ({ converter: drawing, type, side }))
  ]
  if (holes.length > 0) inputs.push({ converter: await drawLayer(gerberOfHoles(holes), 'holes'), type: 'drill', side: 'all' })

  const stackup = await pcbStackup(inputs, { id: 'board', useOutline: true })
  const mark = markOf(stackup.top.svg, stackup.bottom.svg)
  const draw = (side: 'top' | 'bottom') => cleanSvg(stackup[side].svg, `${side[0]}${mark}-`, paints, box)
  const [top, bottom] = [draw('top'), draw('bottom')]
  return top && bottom ? { top, bottom } : null
}
