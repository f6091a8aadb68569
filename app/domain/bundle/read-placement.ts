import type { CheckLimits } from './limits'
import { decodeText, findTable, headingKey, type Columns } from './read-table'

/** One placed part; mm and degrees, as in the file. */
export type Placed = { designator: string; x: number; y: number; rotation: number | null; side: 'top' | 'bottom' }

export type Placement = {
  parts: Placed[]
  /** Unit that the file states in its headings, cells or preamble; null when it is silent (then millimetres were read). */
  unit: 'mm' | 'mil' | 'inch' | null
  /** Rows with a designator whose place or side cannot be read. */
  unreadable: string[]
}

// Headings of the trade's tools in English, German and French; common practice, no source. The body's middle goes before a pin's place.
const unitEnd = '(mm|mils?|inch|in)?$'
const axis = (letter: 'x' | 'y') => [
  new RegExp(`^(mid${letter}|cent(er|re)${letter}|${letter}cent(er|re)|body${letter})${unitEnd}`),
  new RegExp(
    `^(${letter}|pos${letter}|${letter}pos|position${letter}|${letter}position|loc(ation)?${letter}|${letter}loc(ation)?|coord(inate)?s?${letter}|${letter}coord(inate)?s?|koordinate${letter}|${letter}koordinate|${letter}coordonnee|coordonnee${letter}|sym${letter}|comp(onent)?${letter}|part${letter}|place(ment)?${letter}|origin${letter}|abs${letter}|${letter}abs)${unitEnd}`
  ),
  new RegExp(`^ref${letter}${unitEnd}`)
]

const meanings = {
  designator: [
    /^(refs?|references?|designators?|refdes|refdesignators?|refdesig|referencedesignators?|partreference|componentreference|componentdesignator|referenz|referenzbezeichner|bauteilreferenz|bezeichner|reperes?|designateurs?)$/,
    /^(parts?|components?|bauteile?|bauteilname|composants?|name|partname|componentname)$/
  ],
  x: axis('x'),
  y: axis('y'),
  rotation: [
    /^(rot|rotation|rotationdeg|rotationdegrees|rotate|symrotate|angle|angledeg|theta|orientation|orient|degrees|deg|winkel|drehung|drehwinkel)$/
  ],
  side: [
    /^(side|layer|tb|topbottom|topbot|boardside|pcbside|mountside|mountingside|surface|placementside|placementlayer|componentside|componentlayer|seite|lage|bestuckungsseite|cote|face|couche)$/
  ],
  mirror: [/^(mirror|mirrored|symmirror|gespiegelt)$/]
}

const toMm = { mm: 1, mil: 0.0254, inch: 25.4 }

/** A length with an optional unit; a comma is taken as the decimal sign where there is no point. Null when it is none. */
export function readLength(cell: string): { value: number; unit: keyof typeof toMm | null } | null {
  const match = /^ ?([+-]?) ?(\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE]([+-]?\d{1,2}))? ?(mm|mils?|thou|inch|in|"|''|[uµμ]m)? ?$/i.exec(
    cell
      .slice(0, 60)
      .replace(/\s+/g, ' ')
      .replace(/\u2212/g, '-')
      .replace(/[\u2033\u201d]/g, '"')
  )
  if (!match) return null
  const value = Number(`${match[1]}${match[2]!.replace(',', '.')}${match[3] === undefined ? '' : `e${match[3]}`}`)
  const suffix = match[4]?.toLowerCase()
  if (suffix && /^[uµμ]m$/.test(suffix)) return { value: value / 1000, unit: 'mm' }
  const unit =
    suffix === undefined ? null : suffix === 'mm' ? 'mm' : suffix.startsWith('mil') || suffix === 'thou' ? 'mil' : 'inch'
  return Number.isFinite(value) ? { value, unit } : null
}

/** The side that a cell names: `top`, `T`, `TopLayer`, `F.Cu` and the like. Null when it names none; bare numbers name none. */
export function readSide(cell: string): 'top' | 'bottom' | null {
  const key = headingKey(cell)
  if (
    /^(t|top|toplayer|topside|topcopper|f|front|fcu|frontside|frontlayer|component|componentside|compside|primary|primaryside|oben|oberseite|vorderseite|bestuckungsseite|dessus|haut)$/.test(
      key
    )
  )
    return 'top'
  if (
    /^(b|bot|bottom|bottomlayer|bottomside|bottomcopper|botlayer|botside|back|bcu|backside|backlayer|solder|solderside|secondary|secondaryside|unten|unterseite|ruckseite|lotseite|dessous|bas)$/.test(
      key
    )
  )
    return 'bottom'
  return null
}

/** A placement list from its bytes; null when no row heads it by meaning. `fallback` is the side where the file has no such column. */
export function readPlacement(bytes: Uint8Array, limits: CheckLimits, fallback: 'top' | 'bottom' = 'top'): Placement | null {
  const isEnough = (c: Columns<keyof typeof meanings>) => c.designator !== undefined && c.x !== undefined && c.y !== undefined
  const table = findTable(bytes, limits, meanings, isEnough)
  if (!table) return null
  const { columns, row, rows } = table
  const preamble = decodeText(bytes.subarray(0, 20_000))
  let unit = unitOfHeading(rows[row]![columns.x!]!) ?? unitOfPreamble(preamble)
  const side = sideReader(columns, sideOfPreamble(preamble) ?? fallback)
  const parts: Placed[] = []
  const unreadable: string[] = []
  for (const cells of rows.slice(row + 1)) {
    const designator = (cells[columns.designator!] ?? '').trim()
    if (designator === '' || designator.startsWith('#') || (table.isAligned && cells[0]!.startsWith('#'))) continue
    // Lists by side may stand below each other, each with its heading.
    if (meanings.x.some((heading) => heading.test(headingKey(cells[columns.x!] ?? '')))) continue
    const x = readLength(cells[columns.x!] ?? '')
    const y = readLength(cells[columns.y!] ?? '')
    const on = side(cells)
    if (!x || !y || !on) {
      unreadable.push(designator)
      continue
    }
    unit ??= x.unit
    const turn = columns.rotation === undefined ? null : readLength((cells[columns.rotation] ?? '').replace(/°|deg(rees)?/i, ''))
    const scale = (length: { value: number; unit: keyof typeof toMm | null }) => length.value * toMm[length.unit ?? unit ?? 'mm']
    parts.push({ designator, x: scale(x), y: scale(y), rotation: turn?.value ?? null, side: on })
  }
  return { parts, unit, unreadable }
}

/** The side of a row: its own column, else whether it is mirrored, else the one that the whole list has. */
function sideReader(columns: Columns<keyof typeof meanings>, fallback: 'top' | 'bottom') {
  return (cells: string[]): 'top' | 'bottom' | null => {
    if (columns.side !== undefined) return readSide(cells[columns.side] ?? '')
    if (columns.mirror === undefined) return fallback
    const key = headingKey(cells[columns.mirror] ?? '')
    if (/^(y|yes|true|1|m|ja|oui)$/.test(key)) return 'bottom'
    return /^(n|no|false|0|nein|non|)$/.test(key) ? 'top' : null
  }
}

function sideOfPreamble(text: string): 'top' | 'bottom' | null {
  const match = /^[#*;! ]*(?:side|board side|layer) ?[:=] ?"?([a-z.]{1,20})"?[ ,;]*$/im.exec(text)
  return match ? readSide(match[1]!) : null
}

function unitOfHeading(heading: string): Placement['unit'] {
  const match = /(?:^|[^a-z]|[xy])(mm|mils?|inch(?:es)?|in)(?:$|[^a-z])/i.exec(heading)
  return match ? unitOfWord(match[1]!) : null
}

function unitOfPreamble(text: string): Placement['unit'] {
  const match = /(?:units?\s*(?:used)?\s*[:=,]?\s*|\bx\s*,\s*y\s+in\s+)"?(mm|millimet(?:er|re)s?|mils?|inch(?:es)?|in)\b/i.exec(
    text
  )
  return match ? unitOfWord(match[1]!) : null
}

function unitOfWord(word: string): 'mm' | 'mil' | 'inch' {
  const key = word.toLowerCase()
  if (key === 'mm' || key.startsWith('millim')) return 'mm'
  return key.startsWith('mil') ? 'mil' : 'inch'
}
