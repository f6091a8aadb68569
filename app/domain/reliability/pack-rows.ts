/*
 * Thousands of objects take long to pass between threads; a few typed arrays do not. What a thread answers is packed, and unpacked where it is used.
 */

const packed = 'packed-rows'
/** Shorter lists cost less as they are. */
const enough = 32

type PackedRows = { [packed]: number; columns: { name: string; values: Float64Array; texts: string[] | null }[] }

/**
 * Packs every long list of like rows in a value of plain objects, lists, numbers, texts, booleans and nulls: rows that have the same members, each a finite
 * number, a text or null. `unpackRows` gives an equal value.
 */
export function packRows(value: unknown): unknown {
  if (Array.isArray(value)) return packedList(value) ?? value.map(packRows)
  if (typeof value !== 'object' || value === null) return value
  return Object.fromEntries(Object.entries(value).map(([name, member]) => [name, packRows(member)]))
}

export function unpackRows(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(unpackRows)
  if (typeof value !== 'object' || value === null) return value
  if (packed in value) return unpackedList(value as PackedRows)
  return Object.fromEntries(Object.entries(value).map(([name, member]) => [name, unpackRows(member)]))
}

function packedList(rows: readonly unknown[]): PackedRows | null {
  if (rows.length < enough || !rows.every(isRow)) return null
  const names = Object.keys(rows[0]!)
  if (names.length === 0 || rows.some((row) => Object.keys(row).join() !== names.join())) return null
  const columns: PackedRows['columns'] = []
  for (const name of names) {
    const column = packedColumn(rows.map((row) => row[name]))
    if (column === null) return null
    columns.push({ name, ...column })
  }
  return { [packed]: rows.length, columns }
}

const isRow = (row: unknown): row is Record<string, unknown> => typeof row === 'object' && row !== null && !Array.isArray(row)

/** Numbers as they are, or texts by their place among the different ones; NaN is null. */
function packedColumn(cells: readonly unknown[]): { values: Float64Array; texts: string[] | null } | null {
  const texts = new Map<string, number>()
  let hasNumber = false
  const values = new Float64Array(cells.length)
  for (const [i, cell] of cells.entries()) {
    if (cell === null) values[i] = NaN
    else if (typeof cell === 'number' && Number.isFinite(cell)) {
      hasNumber = true
      values[i] = cell
    } else if (typeof cell === 'string') {
      if (!texts.has(cell)) texts.set(cell, texts.size)
      values[i] = texts.get(cell)!
    } else return null
  }
  if (hasNumber && texts.size > 0) return null
  return { values, texts: texts.size > 0 ? [...texts.keys()] : null }
}

function unpackedList({ [packed]: length, columns }: PackedRows): Record<string, unknown>[] {
  return Array.from({ length }, (_, i) => {
    const row: Record<string, unknown> = {}
    for (const { name, values, texts } of columns) {
      const value = values[i]!
      row[name] = Number.isNaN(value) ? null : texts === null ? value : texts[value]
    }
    return row
  })
}
