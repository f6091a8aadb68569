import { inEngineeringUnits } from '~/lib/engineering'
import { isDescriptionNotFitted, isValueNotFitted, withoutNotFittedMark } from './not-fitted'
import { designatorLetters, partKind } from './part-kind'
import type { Tolerance } from './part-quantity'
import type { PartKind, PartReading } from './part-reading.types'
import { readFootprintSizes } from './part-size'
import { readPartStatement, type PartStatement } from './part-statement'
import { longestPartText } from './part-text'

/** What a line of a bill of materials says about a part. */
export type PartText = { designator: string; value: string; footprint?: string; description?: string; isFitted?: boolean }

/**
 * Reads what a part's value and description say, in SI units (F, ohm, H, V, A, W) and shares for tolerances; the size also by the
 * footprint's name. The kind comes from the designator's letters, never from the text. The value goes first, the description fills what it
 * lacks; where they contradict each other, or a text says two things, the field stays null with the reason in `unread`. Never throws.
 * Without a value the kind is null too, as nothing is known but the letters (`partKind`).
 *
 * Letter and digit codes after IEC 60062; R is the point of ohms, and of picofarads on capacitors; three digits are a code on capacitors
 * only, a bare figure of a resistor or ferrite is ohms.
 */
export function readPartValue({ designator, value, footprint = '', description = '', isFitted = true }: PartText): PartReading {
  const isNotFitted = !isFitted || isValueNotFitted(value) || isDescriptionNotFitted(description)
  const kind = partKind(designator)
  if (!kind) return { ...nothingRead, isNotFitted, unread: otherKind(designator) }
  const doubts: string[] = []
  const statements: PartStatement[] = []
  for (const [text, name] of [
    [withoutNotFittedMark(value.slice(0, longestPartText + 1)), 'value'],
    [description, 'description']
  ] as const) {
    if (text.length > longestPartText) doubts.push(`The ${name} is longer than ${longestPartText} characters.`)
    else statements.push(readPartStatement(text, kind))
  }
  const settle = <T>(name: string, unit: string, lists: T[][]): T | null => {
    const all = unique(lists.flat())
    if (all.length <= 1) return all[0] ?? null
    doubts.push(
      `Two things are said about the ${name}: ${all
        .slice(0, 4)
        .map((item) => spoken(item, unit))
        .join(' and ')}.`
    )
    return null
  }
  const pick = <K extends keyof PartStatement>(key: K) => statements.map((statement) => statement[key])
  const amount = settle(nameOf[kind], unitOf[kind], pick('value') as number[][])
  const reading: PartReading = {
    kind: amount === null ? null : kind,
    value: amount,
    tolerance: settle('tolerance', '', [toShares(pick('tolerance').flat() as Tolerance[], amount)]),
    voltage: settle('voltage', 'V', pick('voltage') as number[][]),
    dielectric: settle('dielectric', '', pick('dielectric') as string[][]),
    size: settle('size', '', [...(pick('size') as string[][]), readFootprintSizes(footprint)]),
    esr: settle('series resistance', 'Ω', pick('esr') as number[][]),
    power: settle('power', 'W', pick('power') as number[][]),
    current: settle('current', 'A', pick('current') as number[][]),
    isNotFitted,
    unread: null
  }
  if (amount === null && doubts.length === 0) doubts.push(...unique(statements.flatMap((statement) => statement.doubts)))
  if (amount === null && doubts.length === 0) doubts.push(noValue(value, description, kind, isNotFitted))
  return { ...reading, unread: doubts.length === 0 ? null : doubts.join(' ').slice(0, 400) }
}

const nothingRead: PartReading = {
  kind: null,
  value: null,
  tolerance: null,
  voltage: null,
  dielectric: null,
  size: null,
  esr: null,
  power: null,
  current: null,
  isNotFitted: false,
  unread: null
}

const nameOf: Record<PartKind, string> = {
  capacitor: 'capacitance',
  resistor: 'resistance',
  inductor: 'inductance',
  ferrite: 'impedance'
}

/** The unit of the value of each kind. */
export const unitOf: Record<PartKind, string> = { capacitor: 'F', resistor: 'Ω', inductor: 'H', ferrite: 'Ω' }

function otherKind(designator: string): string {
  const letters = designatorLetters(designator)
  return letters === ''
    ? 'The designator has no letters that tell what the part is.'
    : `${letters} names no single capacitor, resistor, inductor or ferrite: only their values are read.`
}

function noValue(value: string, description: string, kind: PartKind, isNotFitted: boolean): string {
  const written = withoutNotFittedMark(value)
    .replace(/[\s()[\]{}<>*/_-]+/g, ' ')
    .trim()
  if (written === '' && description.trim() === '')
    return isNotFitted ? 'Marked as not fitted, without a value.' : 'No value is given.'
  return `No ${nameOf[kind]} can be told from ${written === '' ? 'the description' : `“${written.slice(0, 60)}”`} without guessing.`
}

function toShares(tolerances: Tolerance[], value: number | null): [number, number][] {
  return tolerances.flatMap(({ low, high, isAbsolute }): [number, number][] => {
    if (!isAbsolute) return [[low, high]]
    return value === null || value === 0 ? [] : [[low / value, high / value]]
  })
}

function unique<T>(items: T[]): T[] {
  return [...new Map(items.map((item) => [JSON.stringify(item), item])).values()]
}

function spoken(item: unknown, unit: string): string {
  if (Array.isArray(item)) return item.map((share: number) => `${Number((share * 100).toPrecision(4))} %`).join(' to ')
  return typeof item === 'number' ? inEngineeringUnits(item, unit) : String(item)
}
