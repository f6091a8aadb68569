import { holeCentre } from './alignment'
import type { BundleFinding } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { finding, mm } from './finding'
import { distanceToEdge } from './geometry'

/** What lies across the board's edge: copper past it, holes cut by it. Both may be meant. */
export function checkEdge(reading: BundleReading, copper: FileReading[]): BundleFinding[] {
  return [...checkCopperEdge(reading, copper), ...checkHolesOnOutline(reading)]
}

const edgeNames = ['left', 'right', 'lower', 'upper'] as const

/** Copper that reaches past the outline, as plated half-holes do on purpose. */
function checkCopperEdge(reading: BundleReading, copper: FileReading[]): BundleFinding[] {
  const board = reading.outline?.box
  if (!board || reading.outlineFile?.isBroken) return []
  const worst = new Map<string, number>()
  const files: string[] = []
  for (const file of copper) {
    const box = file.image?.box
    if (!box || file.isBroken) continue
    const past = [board.minX - box.minX, box.maxX - board.maxX, board.minY - box.minY, box.maxY - board.maxY]
    if (past.every((by) => by <= 0.05)) continue
    files.push(file.layer.file)
    past.forEach((by, i) => {
      if (by > 0.05) worst.set(edgeNames[i]!, Math.max(by, worst.get(edgeNames[i]!) ?? 0))
    })
  }
  if (files.length === 0) return []
  const found = [...worst].map(([edge, by]) => `${mm(by)} past the ${edge} edge`).join(', ')
  const message = `Copper reaches past the outline on ${files.length} ${files.length === 1 ? 'layer' : 'layers'}: plated half-holes on purpose, or a mistake.`
  return [finding('copper-past-outline', message, { file: files[0]!, expected: 'copper inside the outline', found })]
}

/** Holes that the outline cuts through. */
function checkHolesOnOutline(reading: BundleReading): BundleFinding[] {
  const { contour, box } = reading.outline ?? {}
  if (!contour || !box || reading.outlineFile?.isBroken) return []
  return reading.files.flatMap((file) => {
    if (file.isBroken || !file.layer.function.startsWith('drill') || !file.holes) return []
    const cut = file.holes.filter((hole) => distanceToEdge(contour, ...holeCentre(hole)) < hole.diameter / 2 - 0.01)
    if (cut.length === 0) return []
    const [x, y] = holeCentre(cut[0]!)
    const message = `${cut.length} ${cut.length === 1 ? 'hole is' : 'holes are'} cut by the outline, as plated half-holes are; the first at ${mm(x)}, ${mm(y)}.`
    return [finding('hole-on-outline', message, { file: file.layer.file, found: cut.length, place: { x, y, side: null } })]
  })
}
