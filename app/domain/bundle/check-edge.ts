import { holeCentre } from './alignment'
import type { BoardArea } from './board-area'
import type { BundleFinding } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import type { EdgeSpot } from './edge-watch'
import { finding, listed, mm } from './finding'
import { distanceToEdge, isInside } from './geometry'
import type { Hole } from './drill-file.types'

/** A pad of a half-hole reaches this far past its hole, in mm. */
const halfHolePad = 1.2

/** What lies across the board's edge: copper past it, holes cut by it. Both may be meant. */
export function checkEdge(reading: BundleReading, copper: FileReading[]): BundleFinding[] {
  return [...checkCopperEdge(reading, copper), ...checkHolesOnOutline(reading)]
}

const drilled = (reading: BundleReading) =>
  reading.files.filter((file) => file.layer.function.startsWith('drill') && !file.isBroken && file.holes)

/** Copper that reaches past the outline or into a cut-out, as plated half-holes do on purpose. */
function checkCopperEdge(reading: BundleReading, copper: FileReading[]): BundleFinding[] {
  const { area } = reading
  if (!area || reading.outlineFile?.isBroken) return []
  const layers = copper.filter((file) => !file.isBroken && file.excess)
  const passed = notMilled(reading, area, layers)
  const found = layers
    .map((file) => ({ file, spots: file.excess!.spots.filter(({ contour }) => !passed.has(contour)) }))
    .filter(({ spots }) => spots.length > 0)
  if (found.length === 0) return []
  const half = halfHoles(reading, area)
  const isAtHalfHole = ({ x, y }: EdgeSpot) => half.some((hole) => distanceToHole(hole, x, y) <= hole.diameter / 2 + halfHolePad)
  const all = found.flatMap(({ file, spots }) => spots.map((spot) => ({ ...spot, file })))
  const others = all.filter((spot) => !isAtHalfHole(spot))
  const worst = byPlace(others.length > 0 ? others : all)
  const first = worst[0]!
  const { side } = first.file.layer
  const place = { x: first.x, y: first.y, side: side === 'inner' ? null : side }
  const count = `on ${found.length} ${found.length === 1 ? 'layer' : 'layers'}`
  const at = `, the farthest at ${mm(first.x)}, ${mm(first.y)}`
  const message =
    others.length === 0
      ? `Copper reaches past the outline ${count} where plated holes are cut by it: plated half-holes on purpose, or a mistake.`
      : others.length < all.length
        ? `Copper reaches past the outline ${count}, beside plated half-holes also where there are none${at}.`
        : `Copper reaches past the outline ${count}${at}: edge plating on purpose, or a mistake.`
  const details = {
    file: first.file.layer.file,
    expected: 'copper inside the outline',
    found: listed(
      worst.map((spot) => wording(spot, area)),
      6
    ),
    place
  }
  return [finding('copper-past-outline', message, details)]
}

type Spot = EdgeSpot & { file: FileReading }

/** The worst place of each side and cut-out, the worst of all first. */
function byPlace(spots: Spot[]): Spot[] {
  const worst = new Map<string, Spot>()
  for (const spot of spots) {
    const key = `${spot.contour} ${spot.side}`
    const known = worst.get(key)
    if (!known || known.by < spot.by) worst.set(key, spot)
  }
  return [...worst.values()].sort((a, b) => b.by - a.by)
}

function wording({ by, side, contour, x, y }: EdgeSpot, area: BoardArea): string {
  if (side === 'cut-out')
    return `${mm(by)} into the cut-out at ${mm(area.contours[contour]!.x)}, ${mm(area.contours[contour]!.y)}`
  if (side === 'edge') return `${mm(by)} past the edge at ${mm(x)}, ${mm(y)}`
  return `${mm(by)} past the ${side} edge`
}

/**
 * Closed contours inside the board that are not milled out of the copper: what a single pad covers whole is a plated slot, what a drilled
 * hole fills is drawn twice, and what many holes lie in is a board of a panel or a drawing of a part.
 */
function notMilled(reading: BundleReading, area: BoardArea, layers: FileReading[]): Set<number> {
  const passed = new Set<number>(layers.flatMap((file) => [...file.excess!.covered]))
  const holes = drilled(reading).flatMap((file) => file.holes!)
  area.contours.forEach(({ isCutout, path, box, depth }, index) => {
    if (!isCutout || passed.has(index)) return
    let count = 0
    for (const hole of holes) {
      const [x, y] = holeCentre(hole)
      if (x < box.minX || x > box.maxX || y < box.minY || y > box.maxY || !isInside(path, x, y)) continue
      count++
      if (count > 2 || hole.diameter / 2 >= depth * 0.7) passed.add(index)
    }
  })
  return passed
}

/**
 * Whether a place lies off the board by more than `by` mm: outside the outline, in a notch of it, or in a cut-out that copper keeps clear
 * of. What copper runs through, too, may be a drawing.
 */
export function offBoard(reading: BundleReading): ((x: number, y: number, by: number) => boolean) | null {
  const { area } = reading
  if (!area || reading.outlineFile?.isBroken) return null
  const layers = reading.files.filter((file) => file.excess)
  const passed = notMilled(reading, area, layers)
  for (const file of layers) for (const { contour, side } of file.excess!.spots) if (side === 'cut-out') passed.add(contour)
  return (x, y, by) =>
    !area.contains(x, y) && area.nearest(x, y, by).segment < 0 && !passed.has(area.nearest(x, y, Infinity).contour)
}

/** Plated holes that the edge cuts. */
function halfHoles(reading: BundleReading, area: BoardArea): Hole[] {
  return drilled(reading).flatMap((file) =>
    file.holes!.filter((hole) => {
      if ((hole.plating ?? (file.layer.function === 'drill-nonplated' ? 'non-plated' : 'plated')) !== 'plated') return false
      return area.nearest(...holeCentre(hole), hole.diameter / 2).segment >= 0
    })
  )
}

function distanceToHole({ x, y, toX, toY }: Hole, px: number, py: number): number {
  if (toX === null || toY === null) return Math.hypot(px - x, py - y)
  return distanceToEdge([x, y, toX, toY], px, py)
}

/** Holes that the outline or a cut-out cuts through, and single ones beside the board: whole files of them are misaligned. */
function checkHolesOnOutline(reading: BundleReading): BundleFinding[] {
  const { area } = reading
  if (!area || reading.outlineFile?.isBroken) return []
  const passed = notMilled(reading, area, [])
  const isEdge = (contour: number) => !passed.has(contour)
  return drilled(reading).flatMap((file) => {
    const cut: Hole[] = []
    const beside: Hole[] = []
    for (const hole of file.holes!) {
      const [x, y] = holeCentre(hole)
      const near = area.nearest(x, y, hole.diameter / 2 - 0.01)
      if (near.segment >= 0) {
        if (isEdge(near.contour)) cut.push(hole)
      } else if (!area.contains(x, y) && isEdge(area.nearest(x, y, Infinity).contour)) beside.push(hole)
    }
    if (cut.length + beside.length === 0) return []
    const [x, y] = holeCentre(cut[0] ?? beside[0]!)
    const words = [
      cut.length > 0 &&
        `${cut.length} ${cut.length === 1 ? 'hole is' : 'holes are'} cut by the outline, as plated half-holes are`,
      beside.length > 0 && `${beside.length} ${beside.length === 1 ? 'hole lies' : 'holes lie'} outside the board or in a cut-out`
    ].filter(Boolean)
    const message = `${words.join('; ')}; the first at ${mm(x)}, ${mm(y)}.`
    const found = cut.length + beside.length
    return [finding('hole-on-outline', message, { file: file.layer.file, found, place: { x, y, side: null } })]
  })
}
