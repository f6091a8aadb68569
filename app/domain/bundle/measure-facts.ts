import { unknownFacts, type BundleFacts } from './bundle-check.types'
import type { BundleReading } from './bundle-reading.types'
import { distinctCopper } from './check-presence'

/** Hides the noise of converting inches: lengths to 0.1 µm. */
const rounded = (value: number) => Math.round(value * 1e4) / 1e4

const least = (values: (number | null | undefined)[]): number | null => {
  let smallest: number | null = null
  for (const value of values)
    if (value !== null && value !== undefined && (smallest === null || value < smallest)) smallest = value
  return smallest === null ? null : rounded(smallest)
}

/** The numbers that follow from what was read; what rests on a broken file stays null. */
export function measureFacts(reading: BundleReading): BundleFacts {
  const facts = unknownFacts()
  const { outline, outlineFile, placement, bom } = reading
  if (outline?.box && !outlineFile?.image?.problem) {
    facts.width = rounded(outline.box.maxX - outline.box.minX)
    facts.height = rounded(outline.box.maxY - outline.box.minY)
  }
  const copper = distinctCopper(reading)
  if (copper.length > 0) facts.copperLayers = copper.length
  const readable = copper.filter((file) => file.image && !file.image.problem)
  if (readable.length === copper.length) {
    facts.minTrack = least(readable.map((file) => file.image!.smallestConductor))
    // Strokes of text on copper count among the strokes: they are etched like tracks, and nothing but an attribute tells them apart.
    // Attributes that name no conductor at all (planes only) leave nothing to measure; files without attributes leave strokes.
    const hasAttributes = readable.some((file) => file.image!.attributes.size > 0)
    if (facts.minTrack === null && !hasAttributes)
      facts.smallestStroke = least(readable.map((file) => file.image!.smallestStroke))
  }
  measureHoles(reading, facts)
  if (placement) {
    facts.placements = { top: 0, bottom: 0 }
    for (const part of placement.parts) facts.placements[part.side]!++
  }
  if (bom) {
    const parts = bom.lines.reduce((sum, line) => sum + line.designators.length, 0)
    const notFitted = bom.lines.reduce((sum, line) => sum + (line.isFitted ? 0 : line.designators.length), 0)
    facts.bom = { lines: bom.distinctLines, parts, notFitted }
  }
  return facts
}

function measureHoles(reading: BundleReading, facts: BundleFacts): void {
  const drills = reading.files.filter((file) => file.layer.function.startsWith('drill'))
  if (drills.length === 0 || drills.some((file) => file.holes === null || file.image?.problem)) return
  const holes = { plated: 0, nonPlated: 0, unknown: 0 }
  let slots = 0
  const sizes: number[] = []
  for (const file of drills) {
    const fn = file.layer.function
    for (const hole of file.holes!) {
      const plating = hole.plating ?? (fn === 'drill-plated' ? 'plated' : fn === 'drill-nonplated' ? 'non-plated' : null)
      if (plating === 'plated') holes.plated++
      else if (plating === 'non-plated') holes.nonPlated++
      else holes.unknown++
      if (hole.toX !== null) slots++
      sizes.push(hole.diameter)
    }
  }
  facts.holes = holes
  facts.slots = slots
  facts.minHole = least(sizes)
}
