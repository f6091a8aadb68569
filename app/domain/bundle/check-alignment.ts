import { commonShift, holeCentre, indexFlashes, isOnFlash, shareOnFlashes } from './alignment'
import { drillFiles, percent, platedHoles, type Indexed } from './aligned-files'
import type { BundleFinding, FindingPlace } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { checkEdge } from './check-edge'
import { checkOpenings } from './check-openings'
import { finding, mm } from './finding'
import { isMisfit, type RimCounts } from './hole-watch'
import type { Hole } from './read-excellon'
import { boxArea, distanceToEdge, isFarOutside, overlapShare } from './geometry'

/**
 * Below this share of holes on pads a layer or drill file is not this board's. Real sets lie above 0.84; a shift by nearly the pitch of a
 * connector leaves half of the holes on pads.
 */
const poor = 0.65

const leastHoles = 3

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

/** Half-holes on the edge sit off the middle of their pads on purpose. */
function insideHoles(reading: BundleReading, holes: Hole[]): Hole[] {
  const contour = reading.outline?.contour
  if (!contour) return holes
  return holes.filter((hole) => distanceToEdge(contour, ...holeCentre(hole)) > hole.diameter / 2)
}

const placeOf = (hole: Hole | undefined, side: FileReading['layer']['side'] = null): FindingPlace | null => {
  if (!hole) return null
  const [x, y] = holeCentre(hole)
  return { x, y, side: side === 'inner' ? null : side }
}

/** Drill files that miss the pads of every copper layer: wrong units when a scale brings them onto the pads, else misaligned. */
function checkDrills(reading: BundleReading, indices: Indexed[]): BundleFinding[] {
  return drillFiles(reading).flatMap((file) => {
    const found =
      checkPads(reading, indices, file) ?? checkWalls(reading, indices, file) ?? checkHolesOutside(reading, file) ?? null
    if (!found) return []
    file.isBroken = true
    return [found]
  })
}

/** Plated holes against the pads of the outer layers. */
function checkPads(reading: BundleReading, indices: Indexed[], file: FileReading): BundleFinding | null {
  const outer = indices.filter(({ file: layer, index }) => layer.layer.side !== 'inner' && index.count >= leastHoles)
  const holes = platedHoles(file)
  if (holes.length < leastHoles || outer.length === 0) return null
  const shares = outer.map(({ index }) => shareOnFlashes(index, holes))
  const best = Math.max(0, ...shares)
  const name = file.layer.file
  if (best >= poor) {
    const shifts = outer.map(({ index }) => commonShift(index, insideHoles(reading, holes)))
    if (!shifts.every((shift) => shift !== null)) return null
    const found = shifts[0]!.map((by) => mm(by)).join(', ')
    const message = 'All holes are off the middle of their pads by the same way: the drill file is shifted.'
    const details = { file: name, expected: 'holes in the middle of their pads', found, place: placeOf(holes[0]) }
    return finding('drill-misaligned', message, details)
  }
  const scale = [25.4, 1 / 25.4, 10, 0.1, 1000, 0.001].find((s) =>
    outer.some(({ index }) => shareOnFlashes(index, holes, s) >= 0.6)
  )
  const found = `${percent(best)} on pads`
  if (scale !== undefined) {
    const message = `The holes only fall on their pads when the coordinates are read ${scale > 1 ? 'larger' : 'smaller'} by ${scale > 1 ? scale : 1 / scale}: the file states the wrong unit or format.`
    return finding('drill-units', message, { file: name, expected: 'holes on pads', found })
  }
  const { index } = outer[shares.indexOf(best)]!
  const off = holes.find((hole) => !isOnFlash(index, ...holeCentre(hole)))
  const message = 'The holes do not fall on the copper pads: the drill file is shifted, mirrored or of another board.'
  const details = { file: name, expected: 'plated holes on pads', found, place: placeOf(off) }
  return finding('drill-misaligned', message, details)
}

const misfitWords = ({ at }: RimCounts) => `${at.mixed} of ${at.full + at.none + at.mixed} holes half in copper`

/** Holes whose walls run half in copper: plated ones on every layer, others on one whose plated holes fit. */
function checkWalls(reading: BundleReading, indices: Indexed[], file: FileReading): BundleFinding | null {
  const told = indices.flatMap(({ file: layer }) => {
    const counts = layer.rims?.counts(layer.layer.index, ({ path }) => path === file.path)
    if (!counts || counts.at.full + counts.at.none + counts.at.mixed === 0) return []
    const others = layer.rims!.counts(layer.layer.index, ({ path }) => path !== file.path)
    return [{ counts, fitsOthers: !!others && others.at.full >= leastHoles && others.at.mixed * 50 <= others.at.full }]
  })
  const misfits = told.filter(({ counts }) => isMisfit(counts))
  const isPlatedFile = platedHoles(file).length * 2 > file.holes!.length
  const isGuilty = isPlatedFile
    ? misfits.length > 0 &&
      (misfits.length === told.length || (misfits.every(({ fitsOthers }) => fitsOthers) && misfits.length * 2 > told.length))
    : misfits.some(({ fitsOthers }) => fitsOthers)
  if (!isGuilty) return null
  const { counts } = misfits[0]!
  const message = 'The holes cut through the edges of copper: the drill file is shifted, mirrored or of another board.'
  return finding('drill-misaligned', message, {
    file: file.layer.file,
    expected: 'holes in pads, or clear of copper',
    found: misfitWords(counts),
    place: counts.first && { x: counts.first.x, y: counts.first.y, side: null }
  })
}

/** Most holes of a file beside the board. */
function checkHolesOutside(reading: BundleReading, file: FileReading): BundleFinding | null {
  const { contour, box } = reading.outline ?? {}
  if (!contour || !box || reading.outlineFile?.isBroken) return null
  const outside = file.holes!.filter((hole) => isFarOutside(contour, box, ...holeCentre(hole), Math.max(1, hole.diameter)))
  if (outside.length * 2 <= file.holes!.length) return null
  return finding('drill-misaligned', 'Most holes of this drill file lie outside the board.', {
    file: file.layer.file,
    expected: 'holes on the board',
    found: `${outside.length} of ${file.holes!.length} outside`,
    place: placeOf(outside[0])
  })
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
