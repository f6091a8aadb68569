/**
 * A cell of a CSV file (RFC 4180). Text that a spreadsheet would run as a formula is kept text by a leading apostrophe; numbers stay
 * numbers; null is empty.
 */
export function csvCell(value: string | number | null): string {
  if (value === null) return ''
  if (typeof value === 'number') return String(value)
  const text = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text
}

/** Rows as a CSV file with its head. */
export const csvFile = (head: string[], rows: (string | number | null)[][]): string =>
  [head, ...rows].map((row) => row.map(csvCell).join(',') + '\r\n').join('')
