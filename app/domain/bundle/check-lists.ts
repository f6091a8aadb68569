import type { BundleFinding } from './bundle-check.types'
import type { BundleReading } from './bundle-reading.types'
import { offBoard } from './check-edge'
import { finding, listed, mm } from './finding'
import type { Bom } from './read-bom'
import type { Placed } from './read-placement'

/** How far a part's origin may lie past the outline, in mm: connectors hang over the edge. */
const overhang = 2

/** The bill of materials and the placement list: each by itself, then against each other and the board. */
export function checkLists(reading: BundleReading): BundleFinding[] {
  return [...checkBom(reading), ...checkPlacement(reading), ...compareLists(reading)]
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

function checkPlacement(reading: BundleReading): BundleFinding[] {
  const { placement, placementFile: file } = reading
  if (!placement) return []
  const findings: BundleFinding[] = []
  if (placement.unreadable.length > 0) {
    const message = `Place or side of ${listed(placement.unreadable)} cannot be read.`
    findings.push(finding('placement-unreadable', message, { file, found: `${placement.unreadable.length} rows` }))
  }
  const twice = repeated(placement.parts.map((part) => part.designator))
  if (twice.length > 0) {
    const message = `${listed(twice)} ${twice.length === 1 ? 'is' : 'are'} placed more than once.`
    findings.push(
      finding('placement-designator-repeated', message, { file, expected: 'each designator once', found: listed(twice) })
    )
  }
  return [...findings, ...checkPlaces(reading)]
}

/** Parts against the outline: all of them off by a unit, the bottom side with X turned round, or single parts beside the board. */
function checkPlaces(reading: BundleReading): BundleFinding[] {
  const { placement, placementFile: file, outline } = reading
  const box = outline?.box
  const parts = placement?.parts ?? []
  const isOff = offBoard(reading)
  if (!isOff || !box || parts.length === 0) return []
  const isOut = (x: number, y: number) => isOff(x, y, overhang)
  let outside = parts.filter((part) => isOut(part.x, part.y))
  if (outside.length === 0) return []

  // Lists may count from the board's lower left corner while the layers count from the page.
  const fromCorner = parts.filter((part) => isOut(part.x + box.minX, part.y + box.minY))
  const countsFromCorner = outside.length * 2 > parts.length && fromCorner.length * 10 <= parts.length
  if (countsFromCorner) outside = fromCorner
  if (outside.length === 0) return []

  const findings: BundleFinding[] = []
  const mirrored = parts.filter((part) => part.side === 'bottom' && isOut(part.x, part.y) && !isOut(-part.x, part.y))
  if (mirrored.length > 0 && mirrored.length === parts.filter((part) => part.side === 'bottom' && isOut(part.x, part.y)).length) {
    const message = `${mirrored.length} ${mirrored.length === 1 ? 'part' : 'parts'} of the bottom side only ${mirrored.length === 1 ? 'lies' : 'lie'} on the board with X negated: the list was written as seen from below.`
    findings.push(
      finding('placement-mirrored', message, {
        file,
        expected: 'both sides seen from the top',
        found: listed(mirrored.map((p) => p.designator))
      })
    )
    outside = outside.filter((part) => !mirrored.includes(part))
  }
  if (outside.length * 2 > parts.length) {
    const unit = [
      { scale: 0.0254, is: 'mils' },
      { scale: 25.4, is: 'inches' },
      { scale: 1 / 0.0254, is: 'millimetres, though it says mils' },
      { scale: 1 / 25.4, is: 'millimetres, though it says inches' }
    ].find(({ scale }) => parts.filter((part) => isOut(part.x * scale, part.y * scale)).length * 5 <= parts.length)
    if (unit) {
      const message = `The places only lie on the board when they are read as ${unit.is}.`
      findings.push(finding('placement-units', message, { file, expected: 'millimetres, or the unit stated', found: unit.is }))
      return findings
    }
  }
  const origin = countsFromCorner ? { x: box.minX, y: box.minY } : { x: 0, y: 0 }
  if (outside.length > 0) findings.push(outsideFinding(outside, file, origin))
  return findings
}

function outsideFinding(outside: Placed[], file: string | null, origin: { x: number; y: number }): BundleFinding {
  const [first] = outside
  const names = listed(outside.map((part) => part.designator))
  const message = `${names} ${outside.length === 1 ? 'is' : 'are'} placed outside the board; the first at ${mm(first!.x)}, ${mm(first!.y)}.`
  const place = { x: first!.x + origin.x, y: first!.y + origin.y, side: first!.side }
  return finding('placement-outside', message, { file, expected: 'inside the outline', found: names, place })
}

function compareLists({ bom, bomFile, placement, placementFile }: BundleReading): BundleFinding[] {
  if (!bom || !placement) return []
  const findings: BundleFinding[] = []
  const inBom = new Set(bom.lines.flatMap((line) => line.designators))
  const placed = new Set([...placement.parts.map((part) => part.designator), ...placement.unreadable])
  const unknown = [...placed].filter((designator) => !inBom.has(designator))
  if (unknown.length > 0) {
    const message = `${listed(unknown)} ${unknown.length === 1 ? 'is' : 'are'} placed but not in the bill of materials.`
    findings.push(
      finding('placement-not-in-bom', message, {
        file: placementFile,
        expected: 'a line in the bill of materials',
        found: listed(unknown)
      })
    )
  }
  const missing = fittedDesignators(bom).filter((designator) => !placed.has(designator))
  if (missing.length > 0) {
    const message = `${listed(missing)} ${missing.length === 1 ? 'is' : 'are'} in the bill of materials but not placed: fitted by hand, or forgotten.`
    findings.push(
      finding('bom-not-placed', message, { file: bomFile, expected: 'a place, or a not-fitted mark', found: listed(missing) })
    )
  }
  return findings
}

const fittedDesignators = (bom: Bom) => [
  ...new Set(bom.lines.filter((line) => line.isFitted).flatMap((line) => line.designators))
]
