import { commonShift, holeCentre, indexFlashes, isOnFlash, shareOnFlashes } from './alignment'
import {
  drillFiles,
  insideHoles,
  leastHoles,
  misfitWords,
  percent,
  placeOf,
  platedHoles,
  poor,
  type Indexed
} from './aligned-files'
import { checkDrills } from './check-drills'
import type { BundleFinding } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { checkEdge } from './check-edge'
import { checkOpenings } from './check-openings'
import { finding, mm } from './finding'
import { isMisfit, type RimCounts } from './hole-watch'
import type { Hole } from './drill-file.types'
import { boxArea, overlapShare } from './geometry'

/** Layers whose extents share less than this with the board's, both ways, lie beside it. */
const leastOverlap = 0.1

/**
 * Whether copper, drill and outline belong to the same board and lie over each other.
 *
 * Alignment is told in two ways: by the share of plated holes whose middle falls on a copper flash, and by whether the holes' walls run
 * half in copper, which needs no flashes and so judges planes and inner layers, too. When every copper layer misses the holes the drill
 * file is blamed, otherwise the layer that misses. Files already found broken are left out.
 */
export function checkAlignment(reading: BundleReading): BundleFinding[] {
  const copper = reading.files.filter(
    (file) => file.layer.function === 'copper' && file.image && !file.isBroken && file.image.objects > 0
  )
  const indices = copper.map((file) => ({ file, index: indexFlashes(file.image!.flashes) }))
  const foreign = checkForeignOutline(reading, copper)
  const findings = [...foreign, ...checkDrills(reading, indices), ...checkOutside(reading, copper)]
  findings.push(...checkLayers(reading, indices))
  findings.push(...checkOpenings(reading, indices))
  findings.push(...checkEdge(reading, copper))
  return findings
}

/** Whether a layer's extents lie beside the board's. */
function isElsewhere(file: FileReading, board: NonNullable<BundleReading['outline']>['box']): boolean {
  const box = file.image?.box
  if (!box || !board) return false
  return overlapShare(box, board) < leastOverlap || (file.layer.function === 'copper' && boxArea(box) > 100 * boxArea(board))
}

/** When every copper layer lies beside the outline, or most plated holes and as much copper outside it, the outline is foreign. */
function checkForeignOutline(reading: BundleReading, copper: FileReading[]): BundleFinding[] {
  const { outline, outlineFile } = reading
  if (!outline?.box || !outlineFile || outlineFile.isBroken) return []
  const away = copper.filter((file) => isElsewhere(file, outline.box))
  const isAway = copper.length > 1 && away.length === copper.length
  const { outside, most } = outsideTogether(reading, copper)
  if (!isAway && !most) return []
  outlineFile.isBroken = true
  const message = isAway
    ? 'The outline lies beside all copper layers: it is shifted or of another board.'
    : 'Copper and holes agree with each other, but many lie outside the outline: it is shifted, turned or of another board.'
  return [
    finding('layer-misaligned', message, {
      file: outlineFile.layer.file,
      expected: 'copper and holes inside the outline',
      found: isAway ? null : `${outside.length} holes outside`,
      place: placeOf(outside[0])
    })
  ]
}

/** Holes that lie outside the outline with their pads around them: when there are many, drill and copper are right. */
function outsideTogether(reading: BundleReading, copper: FileReading[]): { outside: Hole[]; most: boolean } {
  const { area } = reading
  if (!area) return { outside: [], most: false }
  const holes = drillFiles(reading).flatMap(platedHoles)
  const outside = holes.filter((hole) => {
    const [x, y] = holeCentre(hole)
    return !area.contains(x, y) && area.nearest(x, y, Math.max(1, hole.diameter)).segment < 0
  })
  if (outside.length < leastHoles || outside.length < 0.03 * holes.length) return { outside, most: false }
  const indices = copper.map((file) => indexFlashes(file.image!.flashes))
  return { outside, most: indices.some((index) => shareOnFlashes(index, outside) >= 0.9) }
}

/** Layers that do not lie on the board at all. */
function checkOutside(reading: BundleReading, copper: FileReading[]): BundleFinding[] {
  const { outline, outlineFile } = reading
  const board = outline?.box
  if (!board || !outlineFile || outlineFile.isBroken) return []
  const others = reading.files.filter((file) => ['soldermask', 'paste', 'legend'].includes(file.layer.function))
  const away = [...copper, ...others].filter((file) => !file.isBroken && isElsewhere(file, board))
  return away.map((file) => {
    file.isBroken = true
    const box = file.image!.box!
    const found = `from ${mm(box.minX)}, ${mm(box.minY)} to ${mm(box.maxX)}, ${mm(box.maxY)}`
    const expected = `within ${mm(board.minX)}, ${mm(board.minY)} to ${mm(board.maxX)}, ${mm(board.maxY)}`
    const message = 'The layer does not lie on the board: it is shifted or of another board.'
    return finding('layer-misaligned', message, { file: file.layer.file, expected, found })
  })
}

/** Copper layers that miss the holes which another copper layer meets. */
function checkLayers(reading: BundleReading, indices: Indexed[]): BundleFinding[] {
  const drills = drillFiles(reading).filter((file) => !file.isBroken)
  const paths = new Set(drills.map((file) => file.path))
  // Blind and buried holes only meet the layers between which they run.
  const holesThrough = (layer: number | null) =>
    drills.filter(({ span }) => span === null || layer === null || (span[0] <= layer && layer <= span[1])).flatMap(platedHoles)
  const judged = indices
    .filter(({ file }) => !file.isBroken)
    .map(({ file, index }) => {
      const holes = holesThrough(file.layer.index)
      const rims = file.rims?.counts(file.layer.index, (hole) => hole.isPlated && paths.has(hole.path)) ?? null
      return { file, index, holes, share: shareOnFlashes(index, holes), rims }
    })
    .filter(({ holes }) => holes.length >= leastHoles)
  const best = Math.max(0, ...judged.map(({ share }) => share))
  const isSound = best >= poor || judged.some(({ rims }) => rims && rims.at.full >= leastHoles && !isMisfit(rims))
  if (!isSound) return []
  return judged.flatMap(({ file, share, index, holes, rims }) => {
    const isInner = file.layer.side === 'inner'
    // Without about as many pads as holes a layer cannot be judged by them: planes, and pads drawn as areas.
    const hasPads = index.count >= Math.max(leastHoles, holes.length * (isInner ? 0.3 : 0.5))
    const isPoor = hasPads && best >= poor && (isInner ? share * holes.length < index.count * 0.2 : share < poor)
    const misfit = rims && isMisfit(rims) ? rims : null
    const shift = isPoor ? null : hasPads || isInner ? commonShift(index, insideHoles(reading, holes), isInner) : null
    if (!isPoor && !misfit && !shift) return []
    file.isBroken = true
    return [
      layerFinding(reading, file, { shift, misfit, share, best, off: holes.find((h) => !isOnFlash(index, ...holeCentre(h))) })
    ]
  })
}

type Misaligned = {
  shift: [number, number] | null
  misfit: RimCounts | null
  share: number
  best: number
  off: Hole | undefined
}

function layerFinding(reading: BundleReading, file: FileReading, { shift, misfit, share, best, off }: Misaligned): BundleFinding {
  const project = file.image?.attributes.get('.ProjectId')?.[0]
  const others = new Set(reading.files.map((f) => f.image?.attributes.get('.ProjectId')?.[0]).filter(Boolean))
  const foreign = project && others.size > 1 ? ` It names the project "${project.slice(0, 60)}".` : ''
  const message = shift
    ? "The drilled holes are off the middle of this layer's pads, all by the same way: it is shifted."
    : `The drilled holes do not fall on this layer's pads: it is shifted, mirrored or of another board.${foreign}`
  const first = misfit?.first
  const side = file.layer.side === 'inner' ? null : file.layer.side
  return finding('layer-misaligned', message, {
    file: file.layer.file,
    expected: shift || !misfit ? `${percent(best)} of holes on pads` : 'holes in pads, or clear of copper',
    found: shift ? `off by ${shift.map((by) => mm(-by)).join(', ')}` : misfit ? misfitWords(misfit) : percent(share),
    place: first ? { x: first.x, y: first.y, side } : placeOf(off, file.layer.side)
  })
}
