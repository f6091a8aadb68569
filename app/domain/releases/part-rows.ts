import type { BundlePart } from '~/domain/bundle/bundle-check.types'
import { designatorLetters, partKind } from '~/domain/bundle/part-kind'
import { unitOf } from '~/domain/bundle/read-part-value'
import { inEngineeringUnits } from '~/lib/engineering'

/** One line of the bill of materials for the page. */
export type PartRow = {
  /** Counted from 1, in the order of the file. */
  line: number
  designators: string
  quantity: number
  value: string
  /** What was read, in words; null where nothing was. */
  read: string | null
  /** Why something could not be read; null for kinds whose values are not read at all. */
  unread: string | null
  footprint: string
  isFitted: boolean
}

export type PartsTable = {
  rows: PartRow[]
  /** Lines that the rows leave out. */
  left: number
  lines: number
  parts: number
  notFitted: number
  /** Parts by kind, the largest group first. */
  kinds: { kind: string; count: number }[]
}

/** Most lines that a page prints. */
const mostRows = 400
const longestNames = 400

const share = (value: number) => `${Number((value * 100).toPrecision(3))}`

/** The bill of materials as a table: what is written, what was read out of it, and counts. A line without a quantity has its designators'. */
export function partsTable(parts: readonly BundlePart[]): PartsTable {
  const kinds = new Map<string, number>()
  let all = 0
  let notFitted = 0
  for (const part of parts) {
    all += part.designators.length
    if (!part.isFitted) notFitted += part.designators.length
    for (const designator of part.designators) {
      const kind = partKind(designator) ?? 'other'
      kinds.set(kind, (kinds.get(kind) ?? 0) + 1)
    }
  }
  return {
    rows: parts.slice(0, mostRows).map(partRow),
    left: Math.max(0, parts.length - mostRows),
    lines: parts.length,
    parts: all,
    notFitted,
    kinds: [...kinds].map(([kind, count]) => ({ kind, count })).sort((a, b) => b.count - a.count)
  }
}

function partRow({ designators, quantity, value, footprint, isFitted, reading }: BundlePart, index: number): PartRow {
  const names = designators.join(', ')
  const isRead = partKind(designators[0] ?? '') !== null
  return {
    line: index + 1,
    designators: names.length > longestNames ? `${names.slice(0, longestNames)} …` : names,
    quantity: quantity ?? designators.length,
    value: value.slice(0, 200),
    read: readingInWords(reading),
    unread: isRead || designatorLetters(designators[0] ?? '') === '' ? reading.unread : null,
    footprint: footprint.slice(0, 200),
    isFitted
  }
}

/** A reading as one line: `capacitor, 4.7 µF ±20 %, 6.3 V, X5R, 0603`; null where nothing was read. */
export function readingInWords(reading: BundlePart['reading']): string | null {
  const { kind, value, tolerance, voltage, dielectric, size, esr, power, current } = reading
  const amount = kind !== null && value !== null ? inEngineeringUnits(value, unitOf[kind]) : null
  const around =
    tolerance === null
      ? null
      : -tolerance[0] === tolerance[1]
        ? `±${share(tolerance[1])}\u00a0%`
        : `\u2212${share(-tolerance[0])}/+${share(tolerance[1])}\u00a0%`
  const said = [
    kind,
    [amount, around].filter((text) => text !== null).join(' ') || null,
    voltage === null ? null : inEngineeringUnits(voltage, 'V'),
    dielectric,
    power === null ? null : inEngineeringUnits(power, 'W'),
    current === null ? null : inEngineeringUnits(current, 'A'),
    esr === null ? null : `ESR ${inEngineeringUnits(esr, 'Ω')}`,
    size
  ].filter((text) => text !== null)
  return said.length === 0 ? null : said.join(', ')
}
