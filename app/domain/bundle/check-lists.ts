import type { BundleFinding } from './bundle-check.types'
import type { BundleReading } from './bundle-reading.types'
import { offBoard } from './check-edge'
import { readCopperNames, whyNotInBom, whyNotPlaced, type CopperNames } from './check-names'
import { finding, listed, mm } from './finding'
import { nameKey } from './pad-names'
import { otherUnits, spreadOf, type PlacesVerdict } from './pad-places'
import type { Bom } from './read-bom'
import type { Placed } from './read-placement'

/** How far a part's origin may lie past the outline, in mm: connectors hang over the edge. */
const overhang = 2
/** How much of the board's diagonal three parts and more take up: places that shrink to less lie on any board. */
const leastSpread = 0.05

/** The bill of materials and the placement list: each by itself, then against each other, the board and the names on its copper. */
export function checkLists(reading: BundleReading): BundleFinding[] {
  const copper = readCopperNames(reading)
  return [...checkBom(reading), ...checkPlacement(reading, copper?.places ?? null), ...compareLists(reading, copper)]
}

/** The named parts by the placement file that has them. */
function byFile({ placementLists, placementFile }: BundleReading, names: string[]): [file: string | null, names: string[]][] {
  if (placementLists.length < 2) return [[placementFile, names]]
  const groups = new Map<string | null, string[]>()
  for (const name of names) {
    const file = placementLists.findLast(({ designators }) => designators.has(name))?.file ?? placementFile
    const group = groups.get(file)
    if (group) group.push(name)
    else groups.set(file, [name])
  }
  return [...groups]
}

function repeated(names: string[]): string[] {
  const seen = new Set<string>()
  const twice = new Set<string>()
  for (const name of names) (seen.has(name) ? twice : seen).add(name)
  return [...twice]
}

function checkBom({ bom, bomFile: file }: BundleReading): BundleFinding[] {
  if (!bom) return []
  const findings: BundleFinding[] = []
  const all = bom.lines.flatMap((line) => line.designators)
  const twice = repeated(all)
  for (const line of bom.lines) {
    if (line.quantity === null || line.quantity === line.designators.length) continue
    const message = `The quantity of ${listed(line.designators)} is not the number of designators.`
    findings.push(finding('bom-quantity', message, { file, expected: line.designators.length, found: line.quantity }))
  }
  if (twice.length > 0) {
    const message = `${listed(twice)} ${twice.length === 1 ? 'stands' : 'stand'} in the bill of materials more than once.`
    findings.push(finding('bom-designator-repeated', message, { file, expected: 'each designator once', found: listed(twice) }))
  }
  if (bom.unsafeCells.length > 0) {
    const message = `${bom.unsafeCells.length} ${bom.unsafeCells.length === 1 ? 'cell' : 'cells'} would run as a formula when a spreadsheet opens the list.`
    findings.push(finding('bom-cell-unsafe', message, { file, expected: 'plain text', found: listed(bom.unsafeCells, 3) }))
  }
  return findings
}

function checkPlacement(reading: BundleReading, verdict: PlacesVerdict): BundleFinding[] {
  const { placement } = reading
  if (!placement) return []
  const findings: BundleFinding[] = []
  for (const [file, names] of byFile(reading, placement.unreadable)) {
    if (names.length === 0) continue
    const message = `Place or side of ${listed(names)} cannot be read.`
    findings.push(finding('placement-unreadable', message, { file, found: `${names.length} rows` }))
  }
  for (const [file, twice] of byFile(reading, repeated(placement.parts.map((part) => part.designator)))) {
    if (twice.length === 0) continue
    const message = `${listed(twice)} ${twice.length === 1 ? 'is' : 'are'} placed more than once.`
    findings.push(
      finding('placement-designator-repeated', message, { file, expected: 'each designator once', found: listed(twice) })
    )
  }
  if (verdict?.kind === 'unit')
    return [...findings, unitFinding(reading, verdict.is, 'The parts only lie on their pads when the places')]
  return [...findings, ...checkPlaces(reading, verdict)]
}

function unitFinding(reading: BundleReading, is: string, lie: string): BundleFinding {
  const message = `${lie} are read as ${is}.`
  return finding('placement-units', message, {
    file: reading.placementFile,
    expected: 'millimetres, or the unit stated',
    found: is
  })
}

function mirroredFinding(reading: BundleReading, mirrored: Placed[], where: string): BundleFinding {
  const names = mirrored.map((part) => part.designator)
  const isOne = names.length === 1
  const message = `${names.length} ${isOne ? 'part' : 'parts'} of the bottom side only ${isOne ? 'lies' : 'lie'} ${where}: the list was written as seen from below.`
  const [[file]] = byFile(reading, names) as [[string | null, string[]]]
  return finding('placement-mirrored', message, { file, expected: 'both sides seen from the top', found: listed(names) })
}

/** Parts against the outline: all of them off by a unit, the bottom side with X turned round, or single parts beside the board. */
function checkPlaces(reading: BundleReading, verdict: PlacesVerdict): BundleFinding[] {
  const box = reading.outline?.box
  const all = reading.placement?.parts ?? []
  const findings: BundleFinding[] = []
  if (verdict?.kind === 'mirrored') {
    const pads = verdict.parts.length === 1 ? 'its pads' : 'their pads'
    findings.push(mirroredFinding(reading, verdict.parts, `on ${pads} ${verdict.by}`))
  }
  const parts = verdict?.kind === 'mirrored' ? all.filter((part) => part.side === 'top') : all
  const isOff = offBoard(reading)
  if (!isOff || !box || parts.length === 0) return findings
  const isOut = (x: number, y: number) => isOff(x, y, overhang)
  const outsideFrom = (from: { x: number; y: number }) => parts.filter((part) => isOut(part.x + from.x, part.y + from.y))
  // Lists may count from the board's lower left corner, or from an origin that only the pads tell, while the layers count from the page.
  let origin = verdict && verdict.kind !== 'unit' ? verdict : { x: 0, y: 0 }
  let outside = outsideFrom(origin)
  if (!verdict && outside.length * 2 > parts.length) {
    const corner = { x: box.minX, y: box.minY }
    const fromCorner = outsideFrom(corner)
    if (fromCorner.length * 10 <= parts.length) {
      outside = fromCorner
      origin = corner
    }
  }
  if (outside.length === 0) return findings

  const isBottomOut = (part: Placed) => part.side === 'bottom' && isOut(part.x + origin.x, part.y + origin.y)
  const mirrored = parts.filter((part) => isBottomOut(part) && !isOut(origin.x - part.x, part.y + origin.y))
  if (mirrored.length > 0 && mirrored.length === parts.filter(isBottomOut).length) {
    findings.push(mirroredFinding(reading, mirrored, 'on the board with X negated'))
    outside = outside.filter((part) => !mirrored.includes(part))
  }
  if (outside.length * 2 > parts.length) {
    const spread = spreadOf(parts.map(({ x, y }) => [x, y]))
    const least = parts.length < 3 ? 0 : leastSpread * Math.hypot(box.maxX - box.minX, box.maxY - box.minY)
    const unit = otherUnits.find(
      ({ scale }) =>
        spread * scale >= least && parts.filter((part) => isOut(part.x * scale, part.y * scale)).length * 5 <= parts.length
    )
    if (unit) return [...findings, unitFinding(reading, unit.is, 'The places only lie on the board when they')]
  }
  for (const [file, names] of byFile(reading, [...new Set(outside.map((part) => part.designator))])) {
    const here = outside.filter((part) => names.includes(part.designator))
    if (here.length > 0) findings.push(outsideFinding(here, file, origin))
  }
  return findings
}

function outsideFinding(outside: Placed[], file: string | null, origin: { x: number; y: number }): BundleFinding {
  const [first] = outside
  const names = listed(outside.map((part) => part.designator))
  const message = `${names} ${outside.length === 1 ? 'is' : 'are'} placed outside the board; the first at ${mm(first!.x)}, ${mm(first!.y)}.`
  const place = { x: first!.x + origin.x, y: first!.y + origin.y, side: first!.side }
  return finding('placement-outside', message, { file, expected: 'inside the outline', found: names, place })
}

function compareLists(reading: BundleReading, copper: CopperNames | null): BundleFinding[] {
  const { bom, bomFile, placement } = reading
  if (!bom || !placement) return []
  const findings: BundleFinding[] = []
  const inBom = new Set(bom.lines.flatMap((line) => line.designators).map(nameKey))
  const placed = [...new Set([...placement.parts.map((part) => part.designator), ...placement.unreadable])]
  const unlisted = placed.filter((designator) => !inBom.has(nameKey(designator)))
  for (const [file, unknown] of byFile(reading, unlisted)) {
    if (unknown.length === 0) continue
    const message = `${listed(unknown)} ${unknown.length === 1 ? 'is' : 'are'} placed but not in the bill of materials.${whyNotInBom(unknown, copper)}`
    findings.push(
      finding('placement-not-in-bom', message, { file, expected: 'a line in the bill of materials', found: listed(unknown) })
    )
  }
  const isPlaced = new Set(placed.map(nameKey))
  const missing = fittedDesignators(bom).filter((designator) => !isPlaced.has(nameKey(designator)))
  if (missing.length > 0) {
    const message = `${listed(missing)} ${missing.length === 1 ? 'is' : 'are'} in the bill of materials but not placed${whyNotPlaced(missing, copper)}`
    findings.push(
      finding('bom-not-placed', message, { file: bomFile, expected: 'a place, or a not-fitted mark', found: listed(missing) })
    )
  }
  return findings
}

const fittedDesignators = (bom: Bom) => [
  ...new Set(bom.lines.filter((line) => line.isFitted).flatMap((line) => line.designators))
]
