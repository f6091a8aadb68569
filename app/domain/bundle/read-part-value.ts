import type { PartKind, PartReading } from './part-reading.types'
import { letterTolerance, readDielectric, readEsr, readSize, readVoltage, readWithUnit, valueReaders } from './part-quantities'

export type PartText = { designator: string; value: string; footprint?: string; description?: string; isFitted?: boolean }

/** Longer cells are prose, and are read up to here. */
const longest = 200

const kinds: Record<string, PartKind> = {
  C: 'capacitor',
  CE: 'capacitor',
  CP: 'capacitor',
  R: 'resistor',
  L: 'inductor',
  FB: 'ferrite'
}

/** What a part is by the letters of its designator; null for all whose value is no single quantity. */
export function kindOfDesignator(designator: string): PartKind | null {
  const letters = /^([A-Za-z]+)_?\d/.exec(designator)?.[1]?.toUpperCase() ?? ''
  return Object.hasOwn(kinds, letters) ? kinds[letters]! : null
}

const notFitted = /^(dnp|dnf|dni|dnm|nofit|nopop|unfitted)$/i

type Found = {
  value: number[]
  tolerance: [number, number][]
  voltage: number[]
  dielectric: string[]
  size: string[]
  esr: number[]
  power: number[]
  current: number[]
  isNotFitted: boolean
  isAmbiguous: boolean
}

/**
 * What the value of a part says: kind by the designator, never by the text, then value, tolerance, voltage, dielectric, size, ESR, power and current
 * wherever they stand in the value; what is not there is taken from the description, the size from the footprint too. Two that differ give none.
 * What cannot be read stays null with the reason. Never throws; linear in the text.
 *
 * Source: IEC 60062 for letter and digit codes, EIA-198 for dielectrics (from memory); customs of parts lists: common practice, no source.
 */
export function readPartValue({ designator, value, footprint = '', description = '', isFitted = true }: PartText): PartReading {
  const kind = kindOfDesignator(designator)
  const own = find(value, kind)
  const told = find(description, kind)
  const sizes = tokensOf(footprint).flatMap((token) => readSize(token) ?? readSize(token.replace(/^[A-Za-z]+/, '')) ?? [])
  const troubles: string[] = []
  const one = <T extends number | string | [number, number]>(
    name: string,
    first: T[],
    second: T[],
    third: T[] = []
  ): T | null => {
    const all = [...first, ...second, ...third]
    if (all.length === 0) return null
    if (all.every((each) => isSame(each, all[0]!))) return all[0]!
    troubles.push(`two ${name} that differ`)
    return null
  }
  const read: PartReading = {
    kind,
    value: kind === null ? null : one('values', own.value, told.value),
    tolerance: one('tolerances', own.tolerance, told.tolerance),
    voltage: one('voltages', own.voltage, told.voltage),
    dielectric: kind === 'capacitor' ? one('dielectrics', own.dielectric, told.dielectric) : null,
    size: one('sizes', own.size, told.size, sizes),
    esr: one('ESR values', own.esr, told.esr),
    power: one('powers', own.power, told.power),
    current: one('currents', own.current, told.current),
    isNotFitted: !isFitted || own.isNotFitted,
    unread: null
  }
  if (read.value === null && kind !== null && troubles.length === 0) troubles.push(whyNoValue(kind, value, own))
  // Nothing is told of a part whose value is not known: what its letters mean is all there is, and the reason says the rest.
  return { ...read, kind: read.value === null ? null : kind, unread: reasonOf(designator, kind, troubles) }
}

function reasonOf(designator: string, kind: PartKind | null, troubles: readonly string[]): string | null {
  if (kind === null)
    return `${designator.slice(0, 20) || 'A part without designator'} is no capacitor, resistor, inductor or ferrite by its letters`
  return troubles.length === 0 ? null : troubles.join('; ')
}

function whyNoValue(kind: PartKind, text: string, found: Found): string {
  if (text.trim() === '') return 'no value is given'
  if (found.isNotFitted) return 'it says only that it is not fitted'
  if (found.isAmbiguous) return `${text.trim().slice(0, 40)} can be read in two ways`
  const unit = { capacitor: 'capacitance', resistor: 'resistance', inductor: 'inductance', ferrite: 'impedance' }[kind]
  return `${text.trim().slice(0, 40)} is no ${unit} with a unit`
}

const isSame = (a: number | string | [number, number], b: number | string | [number, number]): boolean =>
  Array.isArray(a) && Array.isArray(b) ? a[0] === b[0] && a[1] === b[1] : a === b

function find(text: string, kind: PartKind | null): Found {
  const found: Found = {
    value: [],
    tolerance: [],
    voltage: [],
    dielectric: [],
    size: [],
    esr: [],
    power: [],
    current: [],
    isNotFitted: false,
    isAmbiguous: false
  }
  for (const token of tokensOf(text)) take(token, kind, found)
  if (/\b(not fitted|do not (populate|fit|place|mount))\b/i.test(text.slice(0, longest))) found.isNotFitted = true
  return found
}

/** One word of a value; the first reading that fits is the one. */
function take(token: string, kind: PartKind | null, found: Found): void {
  if (notFitted.test(token)) found.isNotFitted = true
  else if (/^\d{1,3}(?:,\d{3})+/.test(token)) found.isAmbiguous = true
  else if (put(found.tolerance, readTolerance(token)) || put(found.size, readSize(token))) return
  else if (put(found.voltage, readVoltage(token)) || put(found.dielectric, readDielectric(token))) return
  else if (put(found.power, readWithUnit(token, 'W')) || put(found.current, readWithUnit(token, 'A'))) return
  else if (kind === 'capacitor' && put(found.esr, readEsr(token))) return
  else if (kind !== null) takeValue(token, kind, found)
}

function takeValue(token: string, kind: PartKind, found: Found): void {
  if (put(found.value, valueReaders[kind](token))) return
  const share = letterTolerance(token)
  if (share !== null && found.value.length > 0) found.tolerance.push([-share, share])
  // A tolerance letter behind digits: 104K of a capacitor, 4K7J of a resistor.
  const lettered = /^(.*\d)([FGJKM])$/.exec(token)
  const value = lettered && valueReaders[kind](lettered[1]!)
  if (!lettered || value === null) return
  put(found.value, value)
  const behind = letterTolerance(lettered[2]!)!
  found.tolerance.push([-behind, behind])
}

function put<T>(list: T[], value: T | null): boolean {
  if (value !== null) list.push(value)
  return value !== null
}

/** A tolerance in percent: `10%`, `±5%`, `-20%+80%`. */
function readTolerance(token: string): [number, number] | null {
  const even = /^(?:±|\+-|\+\/-)?(\d{1,3}(?:\.\d{1,3})?)%$/.exec(token)
  if (even) return [-share(even[1]!), share(even[1]!)]
  const uneven = /^([+-])(\d{1,3}(?:\.\d{1,3})?)%?([+-])(\d{1,3}(?:\.\d{1,3})?)%$/.exec(token)
  if (!uneven || uneven[1] === uneven[3]) return null
  const [first, second] = [share(uneven[2]!), share(uneven[4]!)]
  return uneven[1] === '-' ? [-first, second] : [-second, first]
}

/** A percentage as a share, shifted through its digits: 0.1 % is exactly 0.001. */
const share = (percent: string): number => Number(`${percent}e-2`)

/** The words of a value, its signs and units made alike. */
function tokensOf(text: string): string[] {
  return (
    text
      .slice(0, longest)
      .normalize('NFKC')
      .replace(/[\u00b5\u03bc]/g, 'u')
      .replace(/[\u2126\u03a9]/g, 'ohm')
      // 0.5 % and 100 nF with a gap; a fraction of a watt and an uneven tolerance hold a slash of their own.
      .replace(/(\d)\s+(?=(?:[pnumkKM]?(?:F|H|V|A|W|ohms?|Ohms?)|[pnuk]|%)(?:$|[\s/,;)]))/g, '$1')
      .replace(/(%?)\s*\/\s*(?=[+-]\d{1,3}(?:\.\d{1,3})?%)/g, '$1')
      .replace(/\b(\d)\/(\d{1,2}W\b)/g, '$1\u0001$2')
      // A comma between digits is a decimal sign, unless three digits follow: that may be either.
      .replace(/(\d),(?=\d)(?!\d{3}(?!\d))/g, '$1.')
      .split(/[\s/;()[\]|_]+|,(?=\D|$)/)
      .map((token) => token.replace('\u0001', '/'))
      .filter((token) => token !== '')
  )
}
