import { parse } from 'csv-parse/sync'
import type { CheckLimits } from './limits'

export type Table = { rows: string[][]; delimiter: string }

const strictUtf8 = new TextDecoder('utf-8', { fatal: true })

/** Text of a list file: by its mark, else UTF-16 where every other byte is 0, else UTF-8 where valid, else Windows-1252. */
export function decodeText(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return new TextDecoder('utf-16le').decode(bytes)
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return new TextDecoder('utf-16be').decode(bytes)
  const sample = bytes.subarray(0, 400)
  let even = 0
  let odd = 0
  sample.forEach((byte, i) => {
    if (byte === 0 && i % 2 === 0) even++
    else if (byte === 0) odd++
  })
  if (odd > sample.length / 4) return new TextDecoder('utf-16le').decode(bytes)
  if (even > sample.length / 4) return new TextDecoder('utf-16be').decode(bytes)
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

/** A heading without case, marks and units: `Reference(s)` is `references`, `Mid X (mm)` is `midx`. */
export const headingKey = (cell: string): string =>
  cell
    .toLowerCase()
    .replace(/[([{]\s*(mm|mils?|inch(es)?|in|deg(rees)?|°)\s*[)\]}]/g, '')
    .replace(/[^\p{L}\p{N}]/gu, '')

export type Columns<K extends string> = Partial<Record<K, number>>

/**
 * The row that heads a table, by the meaning of its headings, with the columns it names; null when there is none in the first rows.
 * The first column that fits a meaning is taken.
 */
export function findHeader<K extends string>(
  table: Table,
  meanings: Record<K, RegExp>,
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
      const at = keys.findIndex((key, i) => meanings[meaning].test(key) && !Object.values(columns).includes(i))
      if (at >= 0) {
        columns[meaning] = at
        score++
      }
    }
    if (isEnough(columns) && (!best || score > best.score)) best = { row, columns, score }
  }
  return best
}
