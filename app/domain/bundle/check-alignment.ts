import { commonShift, indexFlashes, shareOnFlashes, shareCentred, holeCentre, type FlashIndex } from './alignment'
import type { BundleFinding } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { checkEdge } from './check-edge'
import { finding, mm } from './finding'
import type { Hole } from './read-excellon'
import { boxArea, boxesTouch, distanceToEdge, isFarOutside } from './geometry'

const percent = (share: number) => `${Math.round(share * 100)} %`

/**
 * Below this share of holes on pads a layer or drill file is not this board's. Real sets lie above 0.84; a shift by nearly the pitch of a
 * connector leaves half of the holes on pads.
 */
const poor = 0.65

const leastHoles = 3

/**
 * Whether copper, drill and outline belong to the same board and lie over each other.
 *
 * Alignment is the share of plated holes whose middle falls on a copper flash. When every copper layer misses the holes the drill file is
 * blamed, otherwise the layer that misses. Files already found broken are left out.
 */
export function checkAlignment(reading: BundleReading): BundleFinding[] {
  const copper = reading.files.filter(
    (file) => file.layer.function === 'copper' && file.image && !file.isBroken && file.image.objects > 0
  )
  const indices = copper.map((file) => ({ file, index: indexFlashes(file.image!.flashes) }))
  const findings = [...checkDrills(reading, indices), ...checkOutside(reading, copper)]
  findings.push(...checkLayers(reading, indices))
  findings.push(...checkMasks(reading, indices))
  findings.push(...checkEdge(reading, copper))
  return findings
}

type Indexed = { file: FileReading; index: FlashIndex }

const platedHoles = (file: FileReading) => {
  const isPlatedFile = file.layer.function !== 'drill-nonplated'
  return (file.holes ?? []).filter((hole) => (hole.plating === null ? isPlatedFile : hole.plating === 'plated'))
}

/** Half-holes on the edge sit off the middle of their pads on purpose. */
function insideHoles(reading: BundleReading, holes: Hole[]): Hole[] {
  const contour = reading.outline?.contour
  if (!contour) return holes
  return holes.filter((hole) => distanceToEdge(contour, ...holeCentre(hole)) > hole.diameter / 2)
}

export const drillFiles = (reading: BundleReading) =>
  reading.files.filter((file) => file.layer.function.startsWith('drill') && !file.isBroken && (file.holes?.length ?? 0) > 0)

/** Drill files that miss the pads of every copper layer: wrong units when a scale brings them onto the pads, else misaligned. */
function checkDrills(reading: BundleReading, indices: Indexed[]): BundleFinding[] {
  const findings: BundleFinding[] = []
  const outer = indices.filter(({ file, index }) => file.layer.side !== 'inner' && index.count >= leastHoles)
  for (const file of drillFiles(reading)) {
    const holes = platedHoles(file)
    const name = file.layer.file
    const best = Math.max(0, ...outer.map(({ index }) => shareOnFlashes(index, holes)))
    if (holes.length >= leastHoles && outer.length > 0) {
      if (best >= poor) {
        const shifts = outer.map(({ index }) => commonShift(index, insideHoles(reading, holes)))
        if (!shifts.every((shift) => shift !== null)) continue
        file.isBroken = true
        const found = shifts[0]!.map((by) => mm(by)).join(', ')
        const message = 'All holes are off the middle of their pads by the same way: the drill file is shifted.'
        findings.push(finding('drill-misaligned', message, { file: name, expected: 'holes in the middle of their pads', found }))
        continue
      }
      const scale = [25.4, 1 / 25.4, 10, 0.1, 1000, 0.001].find((s) =>
        outer.some(({ index }) => shareOnFlashes(index, holes, s) >= 0.6)
      )
      file.isBroken = true
      if (scale !== undefined) {
        const message = `The holes only fall on their pads when the coordinates are read ${scale > 1 ? 'larger' : 'smaller'} by ${scale > 1 ? scale : 1 / scale}: the file states the wrong unit or format.`
        findings.push(
          finding('drill-units', message, { file: name, expected: 'holes on pads', found: `${percent(best)} on pads` })
        )
      } else {
        const message = 'The holes do not fall on the copper pads: the drill file is shifted, mirrored or of another board.'
        findings.push(
          finding('drill-misaligned', message, {
            file: name,
            expected: 'plated holes on pads',
            found: `${percent(best)} on pads`
          })
        )
      }
      continue
    }
    const { contour, box } = reading.outline ?? {}
    if (!contour || !box || reading.outlineFile?.isBroken) continue
    const outside = file.holes!.filter((hole) => isFarOutside(contour, box, ...holeCentre(hole), Math.max(1, hole.diameter)))
    if (outside.length * 2 > file.holes!.length) {
      file.isBroken = true
      const message = 'Most holes of this drill file lie outside the board.'
      findings.push(
        finding('drill-misaligned', message, {
          file: name,
          expected: 'holes on the board',
          found: `${outside.length} of ${file.holes!.length} outside`
        })
      )
    }
  }
  return findings
}

/** Layers that do not lie on the board at all. When every copper layer lies elsewhere it is the outline that is foreign. */
function checkOutside(reading: BundleReading, copper: FileReading[]): BundleFinding[] {
  const { outline, outlineFile } = reading
  const board = outline?.box
  if (!board || !outlineFile || outlineFile.isBroken) return []
  const isElsewhere = (file: FileReading) => {
    const box = file.image?.box
    if (!box) return false
    const isFar = !boxesTouch(box, board)
    return isFar || (file.layer.function === 'copper' && boxArea(box) > 100 * boxArea(board))
  }
  const away = copper.filter(isElsewhere)
  if (copper.length > 1 && away.length === copper.length) {
    outlineFile.isBroken = true
    const message = 'The outline lies beside all copper layers: it is shifted or of another board.'
    return [finding('layer-misaligned', message, { file: outlineFile.layer.file, expected: 'copper inside the outline' })]
  }
  const others = reading.files.filter(
    (file) => ['soldermask', 'paste'].includes(file.layer.function) && !file.isBroken && isElsewhere(file)
  )
  return [...away, ...others].map((file) => {
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
  // Blind and buried holes only meet the layers between which they run.
  const holesThrough = (layer: number | null) =>
    drills.filter(({ span }) => span === null || layer === null || (span[0] <= layer && layer <= span[1])).flatMap(platedHoles)
  const judged = indices
    .filter(({ file }) => !file.isBroken)
    .map(({ file, index }) => ({ file, index, holes: holesThrough(file.layer.index) }))
    .map(({ file, index, holes }) => ({ file, index, holes, share: shareOnFlashes(index, holes) }))
    .filter(({ holes }) => holes.length >= leastHoles)
    // Without about as many pads as holes a layer cannot be judged: planes, and pads drawn as areas.
    .filter(
      ({ index, file, holes }) => index.count >= Math.max(leastHoles, holes.length * (file.layer.side === 'inner' ? 0.3 : 0.5))
    )
  const best = Math.max(0, ...judged.map(({ share }) => share))
  if (best < poor) return []
  return judged.flatMap(({ file, share, index, holes }) => {
    const isPoor = file.layer.side === 'inner' ? share * holes.length < index.count * 0.2 : share < poor
    const shift = isPoor || file.layer.side === 'inner' ? null : commonShift(index, insideHoles(reading, holes))
    if (!isPoor && shift === null) return []
    file.isBroken = true
    const project = file.image?.attributes.get('.ProjectId')?.[0]
    const others = new Set(reading.files.map((f) => f.image?.attributes.get('.ProjectId')?.[0]).filter(Boolean))
    const foreign = project && others.size > 1 ? ` It names the project "${project.slice(0, 60)}".` : ''
    const message = shift
      ? "The drilled holes are off the middle of this layer's pads, all by the same way: it is shifted."
      : `The drilled holes do not fall on this layer's pads: it is shifted, mirrored or of another board.${foreign}`
    return [
      finding('layer-misaligned', message, {
        file: file.layer.file,
        expected: `${percent(best)} of holes on pads`,
        found: shift ? `off by ${shift.map((by) => mm(-by)).join(', ')}` : percent(share)
      })
    ]
  })
}

/** Solder masks whose openings do not lie over the copper of their side. */
function checkMasks(reading: BundleReading, indices: Indexed[]): BundleFinding[] {
  return reading.files.flatMap((file) => {
    if (file.layer.function !== 'soldermask' || file.isBroken || file.conflict || !file.image) return []
    const copper = indices.find((other) => other.file.layer.side === file.layer.side && !other.file.isBroken)
    const { flashes } = file.image
    if (!copper || copper.index.count < 10 || flashes.x.length < 10) return []
    const share = shareCentred(copper.index, flashes)
    if (share >= 0.25) return []
    file.isBroken = true
    const message = "The mask's openings do not lie over the pads of its side: it is shifted, mirrored or of another board."
    return [
      finding('layer-misaligned', message, {
        file: file.layer.file,
        expected: 'openings over pads',
        found: `${percent(share)} over pads`
      })
    ]
  })
}
