import { holeCentre, indexFlashes, isPlated } from './alignment'
import { BoardArea } from './board-area'
import type { BundleFinding, CheckStep, DeclaredDetails } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { EdgeWatch } from './edge-watch'
import { finding } from './finding'
import { holesOfGerber } from './gerber-drill'
import { LayerSums } from './layer-sums'
import { HoleRims, HoleWatch } from './hole-watch'
import type { CheckLimits } from './limits'
import { listOrNull } from './list-or-null'
import { findOutline } from './outline-contours'
import { settleDrillFormat } from './drill-format'
import { PadNames } from './pad-names'
import { readBom } from './read-bom'
import type { DrillFile } from './drill-file.types'
import { readExcellon } from './read-excellon'
import { noImage, readGerber, type GerberImage } from './read-gerber'
import { readJob } from './read-job'
import { readPlacement, type Placement } from './read-placement'
import type { BundleSource } from './tell-layers'

const isLayerRole = (fn: string) =>
  ['copper', 'soldermask', 'paste', 'legend', 'outline', 'fabrication', 'assembly', 'other'].includes(fn) ||
  fn.startsWith('drill')

/** Reads layers, drill files and lists; what is wrong with a list as a whole becomes a finding here. */
export async function readBundle(
  source: BundleSource,
  files: FileReading[],
  declared: DeclaredDetails,
  limits: CheckLimits,
  onStep: (step: CheckStep) => void
): Promise<{ reading: BundleReading; findings: BundleFinding[] }> {
  const reading: BundleReading = {
    files,
    job: null,
    bom: null,
    bomFile: null,
    placement: null,
    placementFile: null,
    placementLists: [],
    outline: null,
    outlineFile: null,
    area: null,
    declared
  }
  const findings: BundleFinding[] = []
  const byPath = new Map(source.entries.map((entry) => [entry.path, entry]))
  const bytesOf = (file: FileReading) => source.read(byPath.get(file.path)!)

  onStep('measure')
  const readLayer = async (file: FileReading, rims: HoleRims | null = null) => {
    const bytes = await bytesOf(file)
    const fn = file.layer.function
    const isDrill = fn.startsWith('drill')
    if (file.kind !== 'gerber') {
      file.image = noImage({ kind: 'unreadable', message: `it is no ${isDrill ? 'drill' : 'Gerber'} file`, found: file.kind })
      return
    }
    const edge = fn === 'copper' && reading.area ? new EdgeWatch(reading.area) : null
    const holes = fn === 'copper' && rims ? new HoleWatch(rims) : null
    file.sums = fn === 'copper' ? new LayerSums() : null
    file.names = fn === 'copper' && file.layer.side !== 'inner' ? new PadNames() : null
    file.image = safely(() =>
      readGerber(bytes, limits, {
        strokes: isDrill || fn === 'outline',
        flashes: isDrill || fn === 'copper' || fn === 'soldermask' || fn === 'paste',
        watches: [edge, holes, file.sums, file.names].filter((watch) => watch !== null)
      })
    )
    file.excess = edge
    file.rims = holes
    if (isDrill && !file.image.problem) file.holes = holesOfGerber(file.image)
  }
  const layers = files.filter(
    (file) =>
      file.kind !== 'empty' &&
      file.kind !== 'drill' &&
      isLayerRole(file.layer.function) &&
      (file.layer.function !== 'other' || file.kind === 'gerber')
  )
  // The outline goes first, then the holes: copper is compared with both while it is drawn.
  const isCopper = (file: FileReading) => file.layer.function === 'copper'
  for (const file of layers) if (file.layer.function === 'outline') await readLayer(file)
  chooseOutline(reading, limits)
  for (const file of layers) if (file.layer.function !== 'outline' && !isCopper(file)) await readLayer(file)
  const drills: { file: FileReading; bytes: Uint8Array; first: DrillFile | null }[] = []
  for (const file of files) {
    if (file.kind !== 'drill') continue
    const bytes = await bytesOf(file)
    let first: DrillFile | null = null
    file.image = safely(() => {
      first = readExcellon(bytes, limits)
      return takeDrill(file, first)
    })
    drills.push({ file, bytes, first })
  }
  const unsettled = drills.filter(({ first }) => first && first.doubts.size > 0 && first.holes.length > 0 && !first.problem)
  const rims = unsettled.length === 0 ? holeRims(reading) : null
  for (const file of layers) if (isCopper(file)) await readLayer(file, rims)
  if (unsettled.length > 0) {
    const pads = files
      .filter((file) => isCopper(file) && file.image && !file.image.problem && file.image.flashes.x.length > 0)
      .map((file) => indexFlashes(file.image!.flashes))
    for (const { file, bytes, first } of unsettled) {
      const settle = () => {
        const settled = settleDrillFormat(bytes, first!, pads, limits)
        const image = takeDrill(file, settled.file)
        if (settled.assumed && !settled.file.problem) findings.push(formatFinding(file))
        return image
      }
      file.image = safely(settle)
    }
    const settledRims = holeRims(reading)
    for (const file of layers) {
      if (!settledRims || !isCopper(file) || file.image?.problem) continue
      const holes = new HoleWatch(settledRims)
      const bytes = await bytesOf(file)
      const image = safely(() => readGerber(bytes, limits, { strokes: false, flashes: false, watches: [holes] }))
      if (!image.problem) file.rims = holes
    }
  }
  for (const file of files) {
    if (file.layer.function === 'job' && !reading.job) reading.job = readJob(await bytesOf(file))
  }
  onStep('compare-lists')
  findings.push(...(await readLists(reading, bytesOf, limits)))
  return { reading, findings }
}

function takeDrill(file: FileReading, drill: DrillFile): GerberImage {
  file.holes = drill.holes
  file.drillFormat = drill.format
  return {
    ...noImage(drill.problem ?? { kind: 'unreadable', message: '', found: null }),
    problem: drill.problem,
    resolution: drill.resolution
  }
}

/** The rims of all drilled holes but those that the board's edge cuts, where copper ends on purpose. */
function holeRims({ files, area }: BundleReading): HoleRims | null {
  const holes = files.flatMap((file) =>
    file.image?.problem || !file.layer.function.startsWith('drill')
      ? []
      : (file.holes ?? []).map((hole) => {
          const [x, y] = holeCentre(hole)
          const isOwn = isPlated(hole, file.layer.function)
          return { x, y, radius: hole.diameter / 2, path: file.path, isPlated: isOwn, span: file.span }
        })
  )
  return HoleRims.of(
    holes.filter(({ x, y, radius }) => radius > 0 && (!area || area.nearest(x, y, radius + 0.1).segment < 0)),
    area
  )
}

/** A defect of ours in one file's reader must not take the whole check along: the file counts as unreadable. */
function safely(read: () => FileReading['image'] & object): FileReading['image'] & object {
  try {
    return read()
  } catch (error) {
    const found = error instanceof Error ? error.message.slice(0, 100) : null
    return noImage({ kind: 'unreadable', message: 'the check could not make sense of it', found })
  }
}

function formatFinding(file: FileReading): BundleFinding {
  const { unit, integer, decimals, keeps } = file.drillFormat!
  const found = `${unit}, ${integer}.${decimals} digits, ${keeps} zeros kept`
  const message =
    'The drill file does not say how its coordinates are to be read; the format was taken from how the holes fall on the pads.'
  return finding('drill-format-assumed', message, { file: file.layer.file, expected: 'unit and digits in the header', found })
}

/** Of several outline files the one with the largest closed contour; an attribute goes before a name. */
function chooseOutline(reading: BundleReading, limits: CheckLimits): void {
  const candidates = reading.files.filter(
    (file) => file.layer.function === 'outline' && file.image && !file.image.problem && file.image.objects > 0
  )
  const told = candidates.filter((file) => file.layer.evidence === 'attribute')
  let best = 0
  for (const file of told.length > 0 ? told : candidates) {
    if (file.image!.strokes.length > limits.outlinePaths) {
      const message = `an outline of ${file.image!.strokes.length} strokes`
      file.image = { ...file.image!, problem: { kind: 'too-complex', message, found: null } }
      continue
    }
    const outline = findOutline(file.image!.strokes, file.image!.regions)
    const area = outline.box ? (outline.box.maxX - outline.box.minX) * (outline.box.maxY - outline.box.minY) : 0
    if (reading.outline && area <= best) continue
    best = area
    reading.outline = outline
    reading.outlineFile = file
  }
  reading.area = BoardArea.of(reading.outline)
}

async function readLists(
  reading: BundleReading,
  bytesOf: (file: FileReading) => Promise<Uint8Array>,
  limits: CheckLimits
): Promise<BundleFinding[]> {
  const boms = reading.files.filter((file) => file.layer.function === 'bom')
  for (const file of boms) {
    const bytes = await bytesOf(file)
    const bom = file.kind === 'text' ? listOrNull(bytes, () => readBom(bytes, limits)) : null
    if (bom && (!reading.bom || bom.lines.length > reading.bom.lines.length)) {
      reading.bom = bom
      reading.bomFile = file.layer.file
    }
  }
  const lists = reading.files.filter((file) => file.layer.function === 'placement')
  const unreadable: FileReading[] = []
  const read = new Set<string>()
  for (const file of lists) {
    const base = file.path.toLowerCase()
    const fallback = /bot(tom)?|back/.test(base) && !/top|front/.test(base) ? 'bottom' : 'top'
    const bytes = await bytesOf(file)
    const placement = file.kind === 'text' ? listOrNull(bytes, () => readPlacement(bytes, limits, fallback)) : null
    if (!placement) {
      unreadable.push(file)
      continue
    }
    read.add(withoutExtension(file.path))
    reading.placement = merged(reading.placement, placement)
    reading.placementFile ??= file.layer.file
    const designators = new Set([...placement.parts.map((part) => part.designator), ...placement.unreadable])
    reading.placementLists.push({ file: file.layer.file, designators })
  }
  // The same list once more in another form, as some tools write it beside, need not be read twice.
  return [
    ...bomFindings(reading, boms),
    ...placementFindings(
      lists,
      unreadable.filter((file) => !read.has(withoutExtension(file.path)))
    )
  ]
}

const withoutExtension = (path: string) => path.replace(/\.\w+$/, '').toLowerCase()

function bomFindings(reading: BundleReading, boms: FileReading[]): BundleFinding[] {
  if (boms.length === 0) return [finding('bom-missing', 'There is no bill of materials.', { expected: 'a list of parts as CSV' })]
  // Headings alone are a right list only for a board without parts, which places none either.
  const isWithoutParts = reading.placement?.parts.length === 0
  if (reading.bom && (reading.bom.lines.length > 0 || isWithoutParts)) return []
  reading.bom = null
  const message = 'The bill of materials cannot be read: no heading names the designators and the parts.'
  const expected = 'columns such as Reference, Value, Footprint, Quantity'
  return [finding('bom-unreadable', message, { file: boms[0]!.layer.file, expected })]
}

function placementFindings(lists: FileReading[], unreadable: FileReading[]): BundleFinding[] {
  if (lists.length === 0)
    return [finding('placement-missing', 'There is no placement list.', { expected: 'a list of places as CSV' })]
  const message = 'The placement list cannot be read: no heading names designator, X and Y.'
  const expected = 'columns such as Designator, Mid X, Mid Y, Rotation, Layer'
  return unreadable.map((file) => finding('placement-unreadable', message, { file: file.layer.file, expected }))
}

/** Lists by side are one list; a list that only repeats another (whole board beside one side) adds nothing. */
function merged(first: Placement | null, second: Placement): Placement {
  if (!first) return second
  const known = new Set(first.parts.map((part) => `${part.designator} ${part.x} ${part.y} ${part.side}`))
  const parts = second.parts.filter((part) => !known.has(`${part.designator} ${part.x} ${part.y} ${part.side}`))
  return {
    unit: first.unit ?? second.unit,
    parts: [...first.parts, ...parts],
    unreadable: [...first.unreadable, ...second.unreadable]
  }
}
