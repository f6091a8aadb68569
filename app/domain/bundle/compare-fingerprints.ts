import type { LayerFingerprint } from './bundle-check.types'
import { macroWave } from './aperture-mark'
import { waveCount, waveNumbers } from './geometry-sums'

type Kind = { objects: number; points: number; waves: number[] }
type Print = { step: number; corner: string; middle: [number, number] | null; kinds: Map<string, Kind> }

/**
 * What an unchanged layer's waves may differ by: the rounding of the sums themselves, in all and for each root of the points. A lost object
 * differs by 1, one moved by 0.05 mm by 0.5 and more.
 */
const slack = 0.06
const tableSlack = 5e-4

/** An outline's ends may be joined in another order, each by a few µm. */
const outlineSlack = 0.3

/**
 * How far, in units of its standard deviation, rounding may carry a sum: about one in 10,000 goes farther. Corners of regions stand in rows and
 * circles, and are rounded alike in many places.
 */
const sureness = 3.2
const regionSureness = 6

/**
 * Files in the same step were rounded alike where 0, 0 lies at the same place of the board, and above this step, in mm, wherever it lies: nobody
 * puts it between the steps of so coarse a grid.
 */
const coarseStep = 1.5e-3

/**
 * Whether two layers have the same geometry, to within what rounding does.
 *
 * Two exports of one layer in units of different fineness differ by up to half a step in each coordinate, which adds up as a random walk over
 * the points; so much is allowed for, and no more: with 1 µm that hides a hole moved by 0.05 mm among 500, with 1 nm nothing. Two in the same
 * step and with the same 0, 0 are rounded alike, and nothing is allowed for. The number of objects is always compared.
 */
export function isSameGeometry(a: LayerFingerprint, b: LayerFingerprint, { withPlace = true } = {}): boolean {
  if (a.function !== b.function) return false
  if (a.fingerprint === b.fingerprint) return true
  const [one, other] = [parse(a.fingerprint), parse(b.fingerprint)]
  if (!one || !other) return false
  if (withPlace && one.middle && other.middle) {
    const allowed = 0.003 + one.step + other.step
    if (Math.abs(one.middle[0] - other.middle[0]) > allowed || Math.abs(one.middle[1] - other.middle[1]) > allowed) return false
  }
  const hasSameOrigin = one.corner !== '-' && one.corner === other.corner
  const isAlike = Math.abs(one.step - other.step) < 1e-7 && (one.step > coarseStep || hasSameOrigin)
  const rounding = isAlike ? 0 : Math.sqrt((one.step ** 2 + other.step ** 2) / 12)
  const base = a.function === 'outline' ? outlineSlack : slack
  return pairs(one, other).every(([p, q]) => isSameKind(p, q, base, rounding))
}

const none: Kind = { objects: 0, points: 0, waves: new Array<number>(2 * waveCount).fill(0) }

/** What is to be compared with what: each kind with its like; holes all together where one side does not tell whether they are plated. */
function pairs(one: Print, other: Print): [Kind, Kind][] {
  const isUntold = [one, other].some((print) => (print.kinds.get('u')?.objects ?? 0) > 0)
  if (isUntold) return [[total(one), total(other)]]
  const names = new Set([...one.kinds.keys(), ...other.kinds.keys()])
  return [...names].map((name) => [one.kinds.get(name) ?? none, other.kinds.get(name) ?? none])
}

function total({ kinds }: Print): Kind {
  const sum = { objects: 0, points: 0, waves: [...none.waves] }
  for (const kind of kinds.values()) {
    sum.objects += kind.objects
    sum.points += kind.points
    kind.waves.forEach((value, i) => (sum.waves[i]! += value))
  }
  return sum
}

function isSameKind(p: Kind, q: Kind, base: number, rounding: number): boolean {
  if (p.objects !== q.objects) return false
  const root = Math.sqrt(Math.max(p.points, q.points))
  const sure = p.points > 4 * p.objects ? regionSureness : sureness
  // The flashes of one macro share the rounding of its eight or so lengths.
  const shared = p.points === p.objects ? p.objects * Math.sqrt(8) * ((2 * Math.PI * 1e6) / macroWave) * 0.75 : 0
  for (let k = 0; k < waveCount; k++) {
    const off = Math.hypot(p.waves[2 * k]! - q.waves[2 * k]!, p.waves[2 * k + 1]! - q.waves[2 * k + 1]!)
    if (off > base + tableSlack * root + (sure * waveNumbers[k]! * root + shared) * rounding) return false
  }
  return true
}

/** Reads a fingerprint's text; null where it is none of this version. */
function parse(text: string): Print | null {
  const [version, step, corner, middle, ...rest] = text.split(' ')
  if (version !== '1' || step === undefined || corner === undefined || middle === undefined) return null
  const place = middle === '-' ? null : middle.split(',').map((value) => Number(value) / 1000)
  const kinds = new Map<string, Kind>()
  for (const part of rest) {
    const [name, objects, points, waves] = part.split(':')
    if (name === undefined || waves === undefined) return null
    kinds.set(name, { objects: Number(objects), points: Number(points), waves: waves.split(',').map(Number) })
    if (kinds.get(name)!.waves.length !== 2 * waveCount) return null
  }
  return { step: Number(step) / 1e6, corner, middle: place && [place[0]!, place[1]!], kinds }
}

/** A layer that two bundles do not have alike: `changed`, or in one of them only (`added` to the later, `removed` from the earlier). */
export type LayerDifference = {
  kind: 'changed' | 'added' | 'removed'
  layer: Pick<LayerFingerprint, 'function' | 'side' | 'index'>
  /** The file in the later bundle; in the earlier where it was removed. */
  file: string
}

/** What a layer is in both bundles: outer copper by its side, since the bottom's number changes with the number of layers. */
export const layerKey = ({ function: fn, side, index }: Pick<LayerFingerprint, 'function' | 'side' | 'index'>): string =>
  fn !== 'copper' ? fn : side === 'top' || side === 'bottom' ? `copper ${side}` : `copper inner ${index ?? ''}`

/** The layer's name for people, in the middle of a sentence. */
export function layerName({ function: fn, side, index }: Pick<LayerFingerprint, 'function' | 'side' | 'index'>): string {
  if (fn === 'outline') return 'the outline'
  if (fn === 'drill') return 'the drilled holes'
  return side === 'top' || side === 'bottom' ? `copper ${side}` : `copper layer ${index ?? 'inside'}`
}

/**
 * The layers in which two bundles differ, in the order of the later one. With another outline the layers' places on the board are not compared:
 * they are counted from its corner.
 */
export function compareFingerprints(earlier: readonly LayerFingerprint[], later: readonly LayerFingerprint[]): LayerDifference[] {
  const before = new Map(earlier.map((print) => [layerKey(print), print]))
  const after = new Map(later.map((print) => [layerKey(print), print]))
  const [edge, edgeBefore] = [after.get('outline'), before.get('outline')]
  const withPlace = Boolean(edge && edgeBefore && isSameGeometry(edgeBefore, edge))
  const differences: LayerDifference[] = []
  for (const [key, print] of after) {
    const other = before.get(key)
    if (!other) differences.push({ kind: 'added', layer: print, file: print.file })
    else if (!isSameGeometry(other, print, { withPlace })) differences.push({ kind: 'changed', layer: print, file: print.file })
  }
  for (const [key, print] of before) if (!after.has(key)) differences.push({ kind: 'removed', layer: print, file: print.file })
  return differences
}
