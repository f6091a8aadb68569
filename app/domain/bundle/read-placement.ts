import type { CheckLimits } from './limits'
import { decodeText, findHeader, readTables, type Columns } from './read-table'

/** One placed part; mm and degrees, as in the file. */
export type Placed = { designator: string; x: number; y: number; rotation: number | null; side: 'top' | 'bottom' }

export type Placement = {
  parts: Placed[]
  /** Unit that the file states in its headings, cells or preamble; null when it is silent (then millimetres were read). */
  unit: 'mm' | 'mil' | 'inch' | null
  /** Rows with a designator whose place or side cannot be read. */
  unreadable: string[]
}

const meanings = {
  designator: /^(ref|refs|reference|references|designators?|refdes|refdesignators?|part|component|name)$/,
  x: /^(x|midx|posx|xpos|centerx|centrex|xcenter|xcentre|locationx|xlocation|xcoord|coordx|xcoordinate|refx|xmm|midxmm|posxmm)$/,
  y: /^(y|midy|posy|ypos|centery|centrey|ycenter|ycentre|locationy|ylocation|ycoord|coordy|ycoordinate|refy|ymm|midymm|posymm)$/,
  rotation: /^(rot|rotation|rotationdeg|angle|theta|orientation|degrees)$/,
  side: /^(side|layer|tb|topbottom|boardside|mountside|surface|placementside)$/
}

const toMm = { mm: 1, mil: 0.0254, inch: 25.4 }

/** A length with an optional unit; a comma is taken as the decimal sign where there is no point. Null when it is none. */
export function readLength(cell: string): { value: number; unit: keyof typeof toMm | null } | null {
  const match = /^\s*([+-]?)\s*(\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE]([+-]?\d{1,2}))?\s*(mm|mils?|thou|inch|in|")?\s*$/i.exec(cell)
  if (!match) return null
  const value = Number(`${match[1]}${match[2]!.replace(',', '.')}${match[3] === undefined ? '' : `e${match[3]}`}`)
  const suffix = match[4]?.toLowerCase()
  const unit =
    suffix === undefined ? null : suffix === 'mm' ? 'mm' : suffix.startsWith('mil') || suffix === 'thou' ? 'mil' : 'inch'
  return Number.isFinite(value) ? { value, unit } : null
}

/** The side that a cell names: `top`, `T`, `TopLayer`, `F.Cu` and the like. Null when it names none. */
export function readSide(cell: string): 'top' | 'bottom' | null {
  const key = cell.toLowerCase().replace(/[^a-z0-9]/g, '')
  if (/^(t|top|toplayer|topside|f|front|fcu|frontside|component|componentside|primary)$/.test(key)) return 'top'
  if (/^(b|bot|bottom|bottomlayer|bottomside|back|bcu|backside|solder|solderside|secondary)$/.test(key)) return 'bottom'
  return null
}

/** A placement list from its bytes; null when no row heads it by meaning. `fallback` is the side where the file has no such column. */
export function readPlacement(bytes: Uint8Array, limits: CheckLimits, fallback: 'top' | 'bottom' = 'top'): Placement | null {
  const isEnough = (c: Columns<keyof typeof meanings>) => c.designator !== undefined && c.x !== undefined && c.y !== undefined
  let best: { rows: string[][]; header: { row: number; columns: Columns<keyof typeof meanings>; score: number } } | null = null
  for (const table of readTables(bytes, limits)) {
    const header = findHeader(table, meanings, isEnough)
    if (header && (!best || header.score > best.header.score)) best = { rows: table.rows, header }
  }
  if (!best) return null
  const { columns, row } = best.header
  let unit = unitOfHeading(best.rows[row]![columns.x!]!) ?? unitOfPreamble(decodeText(bytes.subarray(0, 20_000)))
  const parts: Placed[] = []
  const unreadable: string[] = []
  for (const cells of best.rows.slice(row + 1)) {
    const designator = (cells[columns.designator!] ?? '').trim()
    if (designator === '' || designator.startsWith('#')) continue
    const x = readLength(cells[columns.x!] ?? '')
    const y = readLength(cells[columns.y!] ?? '')
    const side = columns.side === undefined ? fallback : readSide(cells[columns.side] ?? '')
    if (!x || !y || !side) {
      unreadable.push(designator)
      continue
    }
    unit ??= x.unit
    const turn = columns.rotation === undefined ? null : readLength((cells[columns.rotation] ?? '').replace(/°|deg(rees)?/i, ''))
    const scale = (length: { value: number; unit: keyof typeof toMm | null }) => length.value * toMm[length.unit ?? unit ?? 'mm']
    parts.push({ designator, x: scale(x), y: scale(y), rotation: turn?.value ?? null, side })
  }
  return { parts, unit, unreadable }
}

function unitOfHeading(heading: string): Placement['unit'] {
  const match = /(?:^|[^a-z])(mm|mils?|inch(?:es)?|in)(?:$|[^a-z])/i.exec(heading)
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
