import type { BundleFinding, LayerSide } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { finding, listed } from './finding'

const sides = ['top', 'bottom'] as const
const sideName: Record<LayerSide, string> = { top: 'top', bottom: 'bottom', inner: 'inner' }
const ofKind = (reading: BundleReading, fn: string) => reading.files.filter((file) => file.layer.function === fn)

/** Whether the bundle holds anything that a board could be made from. */
const isFabrication = (file: FileReading) =>
  ['copper', 'soldermask', 'paste', 'legend', 'outline', 'drill', 'drill-plated', 'drill-nonplated'].includes(file.layer.function)

/** Copper layers that stand for different layers of the board. */
export function distinctCopper(reading: BundleReading, foreign: ReadonlySet<FileReading> = new Set()): FileReading[] {
  const seen = new Set<string>()
  return ofKind(reading, 'copper').filter((file) => {
    if (foreign.has(file)) return true
    const key = file.layer.index === null ? `file ${file.layer.file}` : `layer ${file.layer.index}`
    if (seen.has(key)) return false
    seen.add(key)
    return true
  })
}

/**
 * Layers that are missing, told twice, or numbered with gaps, and a layer count that differs from what is stated.
 *
 * @param foreign copper layers found to be of another board: their numbers tell nothing, each may stand for any layer
 */
export function checkPresence(reading: BundleReading, foreign: ReadonlySet<FileReading> = new Set()): BundleFinding[] {
  if (!reading.files.some(isFabrication)) {
    const expected = 'Gerber layers and drill files'
    return [finding('copper-missing', 'The zip holds no fabrication files that can be read.', { expected, found: 'none' })]
  }
  const clashes = checkClashes(reading, foreign)
  const findings = [...clashes, ...checkCopper(reading, clashes, foreign)]
  const hasCopperOn = (side: LayerSide) => ofKind(reading, 'copper').some((file) => file.layer.side === side)
  for (const side of sides) {
    const hasMask = ofKind(reading, 'soldermask').some((file) => file.layer.side === side)
    if (!hasMask && hasCopperOn(side)) {
      findings.push(
        finding('mask-missing', `There is no solder mask for the ${sideName[side]} side.`, { expected: `solder mask, ${side}` })
      )
    }
  }
  if (ofKind(reading, 'outline').length === 0) {
    findings.push(finding('outline-missing', "No file holds the board's outline.", { expected: 'a profile layer' }))
  }
  if (!reading.files.some((file) => file.layer.function.startsWith('drill'))) {
    findings.push(finding('drill-missing', 'There is no drill file.', { expected: 'at least one drill file' }))
  }
  findings.push(...checkAssemblyLayers(reading))
  return findings
}

function checkClashes(reading: BundleReading, foreign: ReadonlySet<FileReading>): BundleFinding[] {
  const groups = new Map<string, FileReading[]>()
  for (const file of reading.files) {
    if (foreign.has(file)) continue
    const { function: fn, side, index, evidence } = file.layer
    if (!['copper', 'soldermask', 'paste', 'legend', 'outline'].includes(fn)) continue
    if (fn !== 'outline' && side === null && index === null) continue
    // Several files named like outlines are customary (mechanical layers); only their own word makes them a clash.
    if (fn === 'outline' && evidence !== 'attribute') continue
    const key = fn === 'copper' && index !== null ? `copper layer ${index}` : [fn, side].filter(Boolean).join(', ')
    groups.set(key, [...(groups.get(key) ?? []), file])
  }
  return [...groups].flatMap(([key, files]) => {
    if (files.length < 2) return []
    const names = files.map((file) => file.layer.file)
    const message = `${files.length} files say they are the same layer (${key}): ${listed(names)}.`
    return [finding('layer-clash', message, { file: names[1]!, expected: `one file for ${key}`, found: `${files.length} files` })]
  })
}

function checkCopper(reading: BundleReading, clashes: BundleFinding[], foreign: ReadonlySet<FileReading>): BundleFinding[] {
  const copper = distinctCopper(reading, foreign)
  const own = copper.filter((file) => !foreign.has(file))
  const stated = [
    { by: 'the job file', count: reading.job?.copperLayers ?? null },
    { by: 'the release form', count: reading.declared.declaredLayers ?? null }
  ].filter((s): s is { by: string; count: number } => s.count !== null)
  const isSingle = stated.some((s) => s.count === 1)
  const absent = sides.filter((side) => !own.some((file) => file.layer.side === side))
  const missing = absent.length <= copper.length - own.length ? [] : absent
  if (missing.length === 2 || (missing.length === 1 && !isSingle)) {
    const message =
      missing.length === 2 ? 'There is no copper layer for either side.' : `There is no copper layer for the ${missing[0]} side.`
    return [finding('copper-missing', message, { expected: missing.map((side) => `copper, ${side}`).join('; ') })]
  }
  if (clashes.some((clash) => clash.message.includes('copper'))) return []
  const indices = own.map((file) => file.layer.index).filter((index): index is number => index !== null)
  const highest = Math.max(0, ...indices)
  const gaps = Array.from({ length: highest }, (_, i) => i + 1).filter((index) => !indices.includes(index))
  if (gaps.length > copper.length - own.length && gaps.length < 100 && indices.length === own.length) {
    const message = `The copper layers are not numbered through: ${gaps.map((index) => `L${index}`).join(', ')} is missing.`
    return [finding('layer-gap', message, { expected: `layers 1 to ${highest}`, found: `${copper.length} layers` })]
  }
  return stated
    .filter((s) => s.count !== copper.length)
    .slice(0, 1)
    .map((s) => {
      const message = `The number of copper layers differs from what ${s.by} states.`
      return finding('layer-count', message, { expected: `${s.count} (${s.by})`, found: copper.length })
    })
}

/** Paste and legend where parts are placed. */
function checkAssemblyLayers(reading: BundleReading): BundleFinding[] {
  const findings: BundleFinding[] = []
  const parts = reading.placement?.parts ?? []
  for (const side of sides) {
    const count = parts.filter((part) => part.side === side).length
    if (count === 0 || ofKind(reading, 'paste').some((file) => file.layer.side === side)) continue
    const message = `${count} ${count === 1 ? 'part is' : 'parts are'} placed on the ${side} side, but there is no paste layer for its stencil.`
    findings.push(finding('paste-missing', message, { expected: `paste, ${side}` }))
  }
  const legends = ofKind(reading, 'legend')
  if (legends.length === 0) {
    findings.push(
      finding('legend-missing', 'There is no legend: parts and polarity are not printed on the board.', { expected: 'legend' })
    )
    return findings
  }
  for (const side of sides) {
    if (!parts.some((part) => part.side === side) || legends.some((file) => file.layer.side === side)) continue
    const message = `Parts are placed on the ${side} side, but there is no legend for it.`
    findings.push(finding('legend-missing', message, { expected: `legend, ${side}` }))
  }
  return findings
}
