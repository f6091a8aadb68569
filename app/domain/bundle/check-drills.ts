import { commonShift, holeCentre, isOnFlash, shareOnFlashes, spreadOnFlashes } from './alignment'
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
import type { BundleFinding } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { finding, mm } from './finding'
import { boxOf, isFarOutside } from './geometry'
import { isMisfit } from './hole-watch'
import type { Hole } from './drill-file.types'

/** What coordinates are off by when the unit is wrong, the digits are, or both (2.4 in inches read as 3.3 in millimetres: 2.54). */
const scales = [1, 25.4, 1 / 25.4]
  .flatMap((unit) => [1, 10, 0.1, 100, 0.01, 1000, 0.001].map((digits) => unit * digits))
  .filter((scale) => scale !== 1)
/** A scale is believed when it brings this share of the holes onto pads, more than lie there unscaled by `muchBetter`. */
const wellOnPads = 0.6
const muchBetter = 0.3
/** Scaled holes must fall on pads of their own: on this many different ones, as a share of the holes that fall on any. */
const leastSpread = 0.5
/** Where holes alone tell, not the pads: scaled, they must spread over this share of the board's longer side. */
const leastExtent = 0.3

/** What is wrong with a drill file, and by which scale, where it is one. */
type Told = { found: BundleFinding; scale: number | null }

/**
 * Drill files that miss the pads of every copper layer: wrong units when a scale brings them onto the pads, else misaligned. Files that
 * cannot be told by pads take the scale of those that can, where it brings them onto the board.
 */
export function checkDrills(reading: BundleReading, indices: Indexed[]): BundleFinding[] {
  const files = drillFiles(reading)
  const byPads = files.map((file) => checkPads(indices, file, reading))
  const known = byPads.some((told) => told) ? byPads.flatMap((told) => told?.scale ?? []) : null
  return files.flatMap((file, i) => {
    const told = byPads[i] ?? checkWalls(indices, file) ?? checkHolesOutside(reading, file)
    if (!told) return []
    file.isBroken = true
    const scale = byPads[i] ? null : scaleOntoBoard(reading, file, known)
    return [scale === null ? told.found : unitsFinding(file, scale, 'on the board')]
  })
}

/** Plated holes against the pads of the outer layers. */
function checkPads(indices: Indexed[], file: FileReading, reading: BundleReading): Told | null {
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
    return { found: finding('drill-misaligned', message, details), scale: null }
  }
  const scale = scaleOntoPads(outer, holes, best)
  if (scale !== null) return { found: unitsFinding(file, scale, 'on their pads', best), scale }
  const { index } = outer[shares.indexOf(best)]!
  const off = holes.find((hole) => !isOnFlash(index, ...holeCentre(hole)))
  const message = 'The holes do not fall on the copper pads: the drill file is shifted, mirrored or of another board.'
  const details = { file: name, expected: 'plated holes on pads', found: `${percent(best)} on pads`, place: placeOf(off) }
  return { found: finding('drill-misaligned', message, details), scale: null }
}

/** The scale that brings most holes onto pads, each on one of its own: holes drawn together all fall on whatever lies at the origin. */
function scaleOntoPads(outer: Indexed[], holes: Hole[], unscaled: number): number | null {
  const fits = scales.flatMap((scale) =>
    outer.map(({ index }) => ({
      scale,
      share: shareOnFlashes(index, holes, scale),
      spread: spreadOnFlashes(index, holes, scale)
    }))
  )
  const sound = fits.filter(({ share, spread }) => share >= wellOnPads && share >= unscaled + muchBetter && spread >= leastSpread)
  return sound.sort((a, b) => b.share - a.share)[0]?.scale ?? null
}

/** A scale that brings nearly all holes onto the board: one that another file has or, where no other is wrong, one that spreads them over it. */
function scaleOntoBoard({ outline }: BundleReading, file: FileReading, known: readonly number[] | null): number | null {
  const { contour, box } = outline ?? {}
  if (!contour || !box) return null
  const centres = file.holes!.map(holeCentre)
  const longest = Math.max(box.maxX - box.minX, box.maxY - box.minY)
  const own = boxOf(centres.flat())
  const extent = Math.max(own.maxX - own.minX, own.maxY - own.minY)
  const isOn = (scale: number) =>
    centres.filter(([x, y]) => isFarOutside(contour, box, x * scale, y * scale, 1)).length * 10 <= centres.length
  const spreads = (scale: number) => extent * scale >= leastExtent * longest
  return (known ? known.find(isOn) : [25.4, 1 / 25.4].find((scale) => spreads(scale) && isOn(scale))) ?? null
}

function unitsFinding(file: FileReading, scale: number, where: string, share?: number): BundleFinding {
  const by = Number((scale > 1 ? scale : 1 / scale).toPrecision(4))
  const message = `The holes only fall ${where} when the coordinates are read ${scale > 1 ? 'larger' : 'smaller'} by ${by}: the file states the wrong unit or format.`
  const found = share === undefined ? 'holes outside the board' : `${percent(share)} on pads`
  return finding('drill-units', message, { file: file.layer.file, expected: `holes ${where}`, found })
}

/** Holes whose walls run half in copper: plated ones on every layer, others on one whose plated holes fit. */
function checkWalls(indices: Indexed[], file: FileReading): Told | null {
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
  const details = {
    file: file.layer.file,
    expected: 'holes in pads, or clear of copper',
    found: misfitWords(counts),
    place: counts.first && { x: counts.first.x, y: counts.first.y, side: null }
  }
  return { found: finding('drill-misaligned', message, details), scale: null }
}

/** Most holes of a file beside the board. */
function checkHolesOutside(reading: BundleReading, file: FileReading): Told | null {
  const { contour, box } = reading.outline ?? {}
  if (!contour || !box || reading.outlineFile?.isBroken) return null
  const outside = file.holes!.filter((hole) => isFarOutside(contour, box, ...holeCentre(hole), Math.max(1, hole.diameter)))
  if (outside.length * 2 <= file.holes!.length) return null
  const details = {
    file: file.layer.file,
    expected: 'holes on the board',
    found: `${outside.length} of ${file.holes!.length} outside`,
    place: placeOf(outside[0])
  }
  return { found: finding('drill-misaligned', 'Most holes of this drill file lie outside the board.', details), scale: null }
}
