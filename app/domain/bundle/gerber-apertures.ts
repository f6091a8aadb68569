import { MacroMark, sizedMark } from './aperture-mark'
import type { Box } from './geometry'
import { GerberNonsense, macroExtents, TooComplex, type Macro } from './gerber-macro'
import type { Mark } from './geometry-sums'
import type { CheckLimits } from './limits'

/** What is drawn inside a block aperture or a step-and-repeat, to be drawn again at other places. */
export type Recorded =
  | { kind: 'path'; points: number[]; aperture: Aperture; isDark: boolean }
  | { kind: 'region'; points: number[]; isDark: boolean }
  | { kind: 'flash'; x: number; y: number; aperture: Aperture; placing: Placing; isDark: boolean }

/** How a flash is turned: mirrored first, then rotated (degrees counter-clockwise) and scaled. */
export type Placing = { mirrorX: boolean; mirrorY: boolean; rotation: number; scale: number }

export const upright: Placing = { mirrorX: false, mirrorY: false, rotation: 0, scale: 1 }

/** An aperture with its extents around its origin in mm; `diameter` for round ones without a hole drawn from other shapes. */
export type Aperture = {
  shape: 'circle' | 'rectangle' | 'obround' | 'polygon' | 'macro' | 'block'
  box: Box
  diameter: number | null
  /** The short and long side in mm of circles, rectangles and obrounds. */
  size: [number, number] | null
  aperFunction: string | null
  /** Tells its form apart in a fingerprint. */
  mark: Mark
  /** Of a macro: x, y and radius in mm of its corners and rounds. */
  dots?: number[]
  /** Primitives that one flash draws. */
  primitives: number
  /** Of a block: what it holds, and how many objects one flash of it comes to. */
  block: Recorded[] | null
  objects: number
}

const around = (halfX: number, halfY: number): Box => ({ minX: -halfX, minY: -halfY, maxX: halfX, maxY: halfY })

/**
 * An aperture from its definition without `AD`, for instance `D10C,0.25X0.1`.
 *
 * @param unit mm per unit of the file
 * @throws GerberNonsense where it cannot be read; TooComplex where its macro goes past the budget
 */
export function defineAperture(
  text: string,
  unit: number,
  macros: ReadonlyMap<string, Macro>,
  aperFunction: string | null,
  limits: CheckLimits
): { code: number; aperture: Aperture } {
  const match = /^D0*(\d{1,9})([A-Za-z_.$][\w.$-]*)(?:,(.*))?$/s.exec(text.trim())
  if (!match) throw new GerberNonsense(`an aperture cannot be read: ${text.slice(0, 40)}`)
  const code = Number(match[1])
  if (code < 10) throw new GerberNonsense(`aperture D${code} has a number below 10`)
  const name = match[2]!
  const values = (match[3] ?? '')
    .split(/[xX]/)
    .filter((value) => value.trim() !== '')
    .map(Number)
  if (values.some((value) => !Number.isFinite(value)) || values.length > 1000) {
    throw new GerberNonsense(`aperture D${code} has a size that is no number`)
  }
  const base = { aperFunction, primitives: 1, block: null, objects: 1, diameter: null, size: null }
  const mm = values.map((value) => value * unit)
  const need = (count: number) => {
    if (values.length < count || values.slice(0, count).some((value) => value < 0 || value * unit > 10_000)) {
      throw new GerberNonsense(`aperture D${code} has an impossible size`)
    }
  }
  if (name === 'C') {
    need(1)
    const d = values[0]! * unit
    const mark = sizedMark(1, mm)
    return { code, aperture: { ...base, shape: 'circle', box: around(d / 2, d / 2), diameter: d, size: [d, d], mark } }
  }
  if (name === 'R' || name === 'O') {
    // Older tools leave out the second side of a square.
    need(1)
    const [w, h] = [values[0]! * unit, (values[1] ?? values[0]!) * unit]
    if (h < 0) throw new GerberNonsense(`aperture D${code} has an impossible size`)
    const size: [number, number] = w < h ? [w, h] : [h, w]
    const mark = sizedMark(name === 'R' ? 2 : 3, mm)
    return { code, aperture: { ...base, shape: name === 'R' ? 'rectangle' : 'obround', box: around(w / 2, h / 2), size, mark } }
  }
  if (name === 'P') {
    need(2)
    if (!Number.isInteger(values[1]) || values[1]! < 3 || values[1]! > 12) {
      throw new GerberNonsense(`aperture D${code} is a polygon of ${values[1]} corners`)
    }
    const r = (values[0]! * unit) / 2
    const mark = sizedMark(4, [mm[0]!, ...mm.slice(3)], [values[1]!, values[2] ?? 0])
    return { code, aperture: { ...base, shape: 'polygon', box: around(r, r), mark } }
  }
  const macro = macros.get(name)
  if (!macro) throw new GerberNonsense(`aperture D${code} uses the undefined macro ${name.slice(0, 40)}`)
  if (macro.statements.length > limits.macroPrimitives) throw new TooComplex(`aperture macro ${name.slice(0, 40)}`)
  const marks = new MacroMark()
  const { box, primitives, dots } = macroExtents(macro, values, (code, given) => marks.add(code, given, unit))
  const scaled =
    primitives === 0
      ? around(0, 0)
      : { minX: box.minX * unit, minY: box.minY * unit, maxX: box.maxX * unit, maxY: box.maxY * unit }
  const inMm = dots.map((value) => value * unit)
  return { code, aperture: { ...base, shape: 'macro', box: scaled, primitives, dots: inMm, mark: marks.mark } }
}

/** Where a point of a flashed aperture comes to lie, relative to the flash. */
export function place(placing: Placing, x: number, y: number): [number, number] {
  const mx = (placing.mirrorX ? -x : x) * placing.scale
  const my = (placing.mirrorY ? -y : y) * placing.scale
  if (placing.rotation === 0) return [mx, my]
  const angle = (placing.rotation * Math.PI) / 180
  return [mx * Math.cos(angle) - my * Math.sin(angle), mx * Math.sin(angle) + my * Math.cos(angle)]
}
