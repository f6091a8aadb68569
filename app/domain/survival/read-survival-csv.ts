import { parse } from 'csv-parse/sync'
import { DomainError, type FieldError } from '~/lib/domain-error'
import { maxBytes, maxRows } from './compute-survival.schema'
import { readCells, sureOf, type CsvRow, type Separators } from './csv-cells'
import { readHeadings, type CsvColumns } from './csv-columns'

/** `lines[i]` is the line on which row i ends. */
export type SurvivalCsv = { rows: CsvRow[]; lines: number[]; columns: CsvColumns; hasHeadings: boolean; headings: string[] }

const maxErrors = 20
const maxRecordCharacters = 64 * 1024

/**
 * Reads a table of lives: one row a unit, parted by commas, semicolons or tabs (then numbers may have a decimal comma), columns by the meaning of
 * their headings in any order; without headings two columns, time and event. `event` is 0, 1, yes, no or the name of a cause. An upper end that
 * is empty, NA or Inf: no failure was seen; an empty lower end: from 0. What can be read in two ways is refused, never guessed.
 *
 * @throws DomainError `invalid` with messages that begin `line 7:`, at paths `data.7`; `too-large` past 16 MiB or 200,000 rows
 */
export function readSurvivalCsv(text: string): SurvivalCsv {
  if (text.length > maxBytes) throw tooLarge(`The table is larger than ${maxBytes / 1024 / 1024} MiB.`)
  const records = recordsOf(text)
  const first = records[0]
  if (first === undefined) throw refusal([{ path: 'data', message: 'There is no row: paste a table or choose a file.' }])
  const hasHeadings = !/^[+-]?[.,]?\d/.test(first.cells[0]!)
  const columns = hasHeadings ? readHeadings(first.cells) : withoutHeadings(first.cells)
  if (typeof columns === 'string') throw refusal([at(first.line, columns)])
  const body = hasHeadings ? records.slice(1) : records
  if (body.length === 0) throw refusal([at(first.line, 'There are headings and no row below them.')])
  if (body.length > maxRows)
    throw tooLarge(`There are more than ${maxRows} rows. Rows that are alike may share one with a weight.`)
  const separators: Separators = { allowsComma: delimiterOf(text) !== ',', seen: null, unsure: null }
  const errors: FieldError[] = []
  const rows: CsvRow[] = []
  for (const { cells, line } of body) {
    if (errors.length >= maxErrors) break
    const messages: string[] = []
    rows.push(rowOf(cells, columns, separators, line, messages))
    if (messages.length > 0) errors.push(at(line, messages.join(' ')))
  }
  if (errors.length === 0 && !sureOf(separators)) errors.push(at(separators.unsure!.line, separators.unsure!.message))
  if (errors.length > 0) throw refusal(errors)
  return {
    rows,
    lines: body.map(({ line }) => line),
    columns,
    hasHeadings,
    headings: first.cells.map((cell) => cell.slice(0, 40))
  }
}

/** The errors of `parseSurvivalRequest` at the lines that the rows came from. */
export function atLines(error: DomainError, lines: readonly number[]): DomainError {
  const errors = error.errors.map(({ path, message }) => {
    const row = /^observations\.(\d+)/.exec(path)
    return row === null ? { path: path === 'observations' ? 'data' : path, message } : at(lines[Number(row[1])]!, message)
  })
  return new DomainError(error.kind, error.message, onePerPath(errors).slice(0, maxErrors))
}

type CsvRecord = { cells: string[]; line: number }

const at = (line: number, message: string): FieldError => ({ path: `data.${line}`, message: `line ${line}: ${message}` })
const tooLarge = (message: string) => new DomainError('too-large', message, [{ path: 'data', message }])
const refusal = (errors: FieldError[]) =>
  new DomainError('invalid', errors.length === 1 ? errors[0]!.message : 'Some lines cannot be read.', errors)

const onePerPath = (errors: FieldError[]): FieldError[] =>
  [...new Map([...errors].reverse().map((e) => [e.path, e])).values()].reverse()

/** The first line tells: a tab or a semicolon parts cells, a comma only where there is neither. */
function delimiterOf(text: string): ',' | ';' | '\t' {
  const line = firstLine(text)
  return line.includes('\t') ? '\t' : line.includes(';') ? ';' : ','
}

/** The first line with anything on it, without what stands in quotes. */
const firstLine = (text: string): string =>
  (/[^\s\uFEFF][^\r\n]*/.exec(text.slice(0, maxRecordCharacters))?.[0] ?? '').replace(/"[^"]*"/g, '')

function recordsOf(text: string): CsvRecord[] {
  const line = firstLine(text)
  if (line.includes('\t') && line.includes(';'))
    throw refusal([
      { path: 'data', message: 'The first line has tabs and semicolons: it is not clear which of them parts the cells.' }
    ])
  try {
    const records: CsvRecord[] = []
    parse(text, {
      delimiter: delimiterOf(text),
      bom: true,
      trim: true,
      skip_empty_lines: true,
      relax_column_count: true,
      record_delimiter: ['\r\n', '\n', '\r'],
      max_record_size: maxRecordCharacters,
      to: maxRows + 2,
      on_record: (cells: string[], { lines }) => {
        if (cells.some((cell) => cell !== '')) records.push({ cells, line: lines })
        return null
      }
    })
    return records
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && String(error.code).startsWith('CSV_'))) throw error
    const where = Number((error as { lines?: number }).lines ?? 1)
    throw refusal([
      at(
        where,
        error.code === 'CSV_MAX_RECORD_SIZE'
          ? 'This line is far too long, or a quotation mark before it is never closed.'
          : 'A quotation mark is not closed, or stands inside a cell.'
      )
    ])
  }
}

function withoutHeadings(cells: string[]): CsvColumns | string {
  if (cells.length === 2) return { at: { time: 0, event: 1 }, count: 2, leftOut: [] }
  return `There are no headings, and ${cells.length === 1 ? 'one column' : `${cells.length} columns`}. Only two columns, time and event, can do without: set a first line such as time,event,group above them.`
}

function rowOf(cells: string[], columns: CsvColumns, separators: Separators, line: number, messages: string[]): CsvRow {
  const { count } = columns
  const isRagged = cells.length < count || cells.slice(count).some((cell) => cell !== '')
  if (isRagged) {
    messages.push(
      `There ${cells.length === 1 ? 'is one cell' : `are ${cells.length} cells`}, and ${count} columns.${separators.allowsComma ? '' : ' With a decimal comma, part the cells by semicolons.'}`
    )
    return {}
  }
  return readCells({ cells, at: columns.at, separators, line, say: (message) => void messages.push(message) })
}
