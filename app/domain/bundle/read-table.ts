import { parse } from 'csv-parse/sync'
import type { CheckLimits } from './limits'

export type Table = { rows: string[][]; delimiter: string }

const strictUtf8 = new TextDecoder('utf-8', { fatal: true })

/** The order of UTF-16 without a mark, told by every other byte being 0; null for text of single bytes. */
export function wideOrder(bytes: Uint8Array): 'utf-16le' | 'utf-16be' | null {
  const sample = bytes.subarray(0, 400)
  let even = 0
  let odd = 0
  sample.forEach((byte, i) => {
    if (byte === 0 && i % 2 === 0) even++
    else if (byte === 0) odd++
  })
  if (odd > sample.length / 4 && even <= odd / 8) return 'utf-16le'
  return even > sample.length / 4 && odd <= even / 8 ? 'utf-16be' : null
}

/** Text of a list file: by its mark, else UTF-16 where every other byte is 0, else UTF-8 where valid, else Windows-1252. */
export function decodeText(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return new TextDecoder('utf-16le').decode(bytes)
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return new TextDecoder('utf-16be').decode(bytes)
  const wide = wideOrder(bytes)
  if (wide) return new TextDecoder(wide).decode(bytes)
  try {
    return strictUtf8.decode(bytes)
  } catch {
    return new TextDecoder('windows-1252').decode(bytes)
  }
}

/** The text as a table for each delimiter that could be meant; tables that exceed the limits or cannot be parsed are left out. */
export function readTables(bytes: Uint8Array, limits: CheckLimits): Table[] {
  // Files put together by hand mix line ends.
  const text = decodeText(bytes).replace(/\r\n?/g, '\n')
  const tables: Table[] = []
  for (const delimiter of [',', ';', '\t', '|']) {
    if (!text.includes(delimiter)) continue
    for (const quote of ['"', null] as const) {
      try {
        const rows: string[][] = parse(text, {
          delimiter,
          quote,
          relax_column_count: true,
          relax_quotes: true,
          skip_empty_lines: true,
          trim: true,
          bom: true,
          to: limits.listRows + 1,
          max_record_size: 1024 * 1024
        })
        let cells = 0
        for (const row of rows) cells += row.length
        if (rows.length <= limits.listRows && cells <= limits.listCells) tables.push({ rows, delimiter })
        break
      } catch (error) {
        // A stray quote breaks the quoted reading; the second round reads quotes as letters.
        if (!(error instanceof Error) || !('code' in error)) throw error
      }
    }
  }
  return tables
}

/**
 * The text as tables whose columns are parted by blanks: by two or more of them, and by any. A row behind comment marks keeps one in front
 * of its first cell. Tables that exceed the limits are left out.
 */
export function readAlignedTables(bytes: Uint8Array, limits: CheckLimits): Table[] {
  const lines = decodeText(bytes)
    .replace(/^\ufeff/, '')
    .split(/\r\n|\r|\n/)
  if (lines.length > limits.listRows) return []
  return [/ {2,}|\t/, /[ \t]+/].flatMap((gap) => {
    let cells = 0
    const rows: string[][] = []
    for (const line of lines) {
      const whole = line.slice(0, 4000).trim()
      const text = whole.replace(/^[#*;!]+/, '')
      if (text.trim() === '') continue
      const row = text
        .trim()
        .split(gap)
        .map((cell) => cell.replace(/^"(.*)"$/, '$1'))
      if (text !== whole) row[0] = `#${row[0]}`
      cells += row.length
      rows.push(row)
    }
    return cells <= limits.listCells ? [{ rows, delimiter: ' ' }] : []
  })
}

export type HeadedTable<K extends string> = { rows: string[][]; row: number; columns: Columns<K>; isAligned: boolean }

/** The table whose heading says most: with delimiters, or, where none of those has a heading, in columns parted by blanks. */
export function findTable<K extends string>(
  bytes: Uint8Array,
  limits: CheckLimits,
  meanings: Meanings<K>,
  isEnough: (columns: Columns<K>) => boolean
): HeadedTable<K> | null {
  for (const read of [readTables, readAlignedTables]) {
    let best: (HeadedTable<K> & { score: number }) | null = null
    for (const table of read(bytes, limits)) {
      const header = findHeader(table, meanings, isEnough)
      if (header && (!best || header.score > best.score))
        best = { rows: table.rows, isAligned: read === readAlignedTables, ...header }
    }
    if (best) return best
  }
  return null
}

/** A heading without case, accents, marks and units: `Reference(s)` is `references`, `Mid X (mm)` is `midx`. */
export const headingKey = (cell: string): string =>
  cell
    .slice(0, 200)
    .toLowerCase()
    .normalize('NFD')
    .replace(/\p{M}/gu, '')
    .replace(/[([{]\s*(mm|mils?|inch(es)?|in|deg(rees)?|°)\s*[)\]}]/g, '')
    .replace(/[^\p{L}\p{N}]/gu, '')

/** Per meaning the headings that bear it, the telling ones first: a later one counts only where no earlier one stands in the row. */
export type Meanings<K extends string> = Record<K, readonly RegExp[]>

export type Columns<K extends string> = Partial<Record<K, number>>

/**
 * The row that heads a table, by the meaning of its headings, with the columns it names; null when there is none in the first rows.
 * Of the headings with one meaning the most telling is taken, of equal ones the first.
 */
export function findHeader<K extends string>(
  table: Table,
  meanings: Meanings<K>,
  isEnough: (columns: Columns<K>) => boolean
): { row: number; columns: Columns<K>; score: number } | null {
  let best: { row: number; columns: Columns<K>; score: number } | null = null
  const most = Math.min(table.rows.length, 60)
  for (let row = 0; row < most; row++) {
    const columns: Columns<K> = {}
    let score = 0
    // A heading behind a comment mark counts too: `# RefDes, Description, …`.
    const keys = table.rows[row]!.map(headingKey)
    for (const meaning of Object.keys(meanings) as K[]) {
      for (const pattern of meanings[meaning]) {
        const at = keys.findIndex((key, i) => pattern.test(key) && !Object.values(columns).includes(i))
        if (at < 0) continue
        columns[meaning] = at
        score++
        break
      }
    }
    if (isEnough(columns) && (!best || score > best.score)) best = { row, columns, score }
  }
  return best
}
