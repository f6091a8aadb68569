import type { ColumnMeaning } from './csv-columns'

/** A row as `parseSurvivalRequest` takes it. */
export type CsvRow = {
  time?: number
  event?: number | string
  lower?: number
  upper?: number | null
  entry?: number
  group?: string
  weight?: number
}

/**
 * How numbers are written, as far as the lines before have told: `seen` is the decimal sign once one is sure; `unsure` the first number that could
 * hold a sign of thousands instead ("1,234" in a file with semicolons).
 */
export type Separators = {
  allowsComma: boolean
  seen: ',' | '.' | null
  unsure: { line: number; sign: ',' | '.'; message: string } | null
}

/** Whether every number could be read in one way only. */
export const sureOf = ({ unsure, seen }: Separators): boolean => unsure === null || seen === unsure.sign

type Reading = {
  cells: readonly string[]
  at: Partial<Record<ColumnMeaning, number>>
  separators: Separators
  line: number
  say: (message: string) => void
}

const isMissing = (cell: string) => /^(|na|n\/a|nan|null|\.|-)$/i.test(cell)
const isEndless = (cell: string) => /^\+?(inf|infinity|∞)$/i.test(cell)
const shown = (cell: string) => `“${cell.length > 40 ? `${cell.slice(0, 40)}…` : cell}”`

/** One row of cells by their meanings; what is wrong is said. */
export function readCells(reading: Reading): CsvRow {
  const { cells, at, say } = reading
  const cellOf = (meaning: ColumnMeaning) => (at[meaning] === undefined ? null : cells[at[meaning]]!)
  const numberOf = (meaning: ColumnMeaning): number | undefined => {
    const cell = cellOf(meaning)
    return cell === null || isMissing(cell) ? undefined : readNumber(cell, meaning, reading)
  }
  const row: CsvRow = {}
  const entry = numberOf('entry')
  if (entry !== undefined) row.entry = entry
  if (at.weight !== undefined) {
    if (isMissing(cellOf('weight')!)) say('The weight is empty: how many units share the row?')
    row.weight = numberOf('weight')
  }
  if (at.group !== undefined) {
    row.group = cellOf('group')!
    if (row.group === '') say('The group is empty.')
  }
  const hasTime = at.time !== undefined && !isMissing(cellOf('time')!)
  const hasEnds = at.lower !== undefined && !(isMissing(cellOf('lower')!) && isMissing(cellOf('upper')!))
  if (hasTime && hasEnds) say('There is a time and an interval: leave one of them empty.')
  else if (hasTime) {
    row.time = numberOf('time')
    if (at.event === undefined) say('A time needs an event: add a column headed event.')
    else row.event = eventOf(cellOf('event')!, say)
  } else if (hasEnds) addEnds(row, cellOf('upper')!, numberOf, at.event === undefined ? '' : cellOf('event')!, say)
  else
    say(
      at.lower === undefined
        ? 'The time is empty.'
        : at.time === undefined
          ? 'Both ends are empty.'
          : 'The time and both ends are empty.'
    )
  return row
}

function addEnds(
  row: CsvRow,
  upper: string,
  numberOf: (meaning: ColumnMeaning) => number | undefined,
  eventCell: string,
  say: Reading['say']
): void {
  row.lower = numberOf('lower') ?? 0
  row.upper = isMissing(upper) || isEndless(upper) ? null : numberOf('upper')
  const event = isMissing(eventCell) ? undefined : eventOf(eventCell, say)
  if (row.upper === null && event !== undefined && event !== 0)
    say('The upper end says that no failure was seen, and the event that there was one.')
  else if (row.upper !== null && event === 0)
    say('The upper end says that a failure was seen, and the event that there was none.')
  else if (typeof event === 'string') row.event = event
}

function readNumber(cell: string, meaning: ColumnMeaning, { separators, line, say }: Reading): number | undefined {
  const found = /^[+-]?(\d+)?(?:([.,])(\d*))?(?:e[+-]?\d+)?$/i.exec(cell)
  const sign = found?.[2] as ',' | '.' | undefined
  if (found === null || (!found[1] && !found[3]) || (sign === ',' && !separators.allowsComma)) {
    say(`The ${meaning} ${shown(cell)} is not a number.`)
    return undefined
  }
  if (sign !== undefined && separators.allowsComma) {
    const isUnsure = /^[1-9]\d{0,2}$/.test(found[1] ?? '') && found[3]!.length === 3 && !/e/i.test(cell)
    if (separators.seen !== null && separators.seen !== sign) {
      say(`The ${meaning} ${shown(cell)} has a ${words[sign]}, and a number before it a ${words[separators.seen]}.`)
      return undefined
    }
    if (!isUnsure) separators.seen = sign
    else
      separators.unsure ??= {
        line,
        sign,
        message: `The ${meaning} ${shown(cell)} can be read as ${cell.replace(sign, '.')} or as ${cell.replace(sign, '')}: write it without a sign between the thousands, and with a further decimal if it is a fraction.`
      }
  }
  const value = Number(cell.replace(',', '.'))
  if (Number.isFinite(value)) return value
  say(`The ${meaning} ${shown(cell)} is too large.`)
  return undefined
}

const words = { ',': 'comma', '.': 'point' }

function eventOf(cell: string, say: Reading['say']): number | string | undefined {
  if (/^(0([.,]0+)?|no|n|false)$/i.test(cell)) return 0
  if (/^(1([.,]0+)?|yes|y|true)$/i.test(cell)) return 1
  if (isMissing(cell)) say('The event is empty: 0 (still working), 1 (failed) or the name of a cause.')
  else if (/^[+-]?[\d.,]+(e[+-]?\d+)?$/i.test(cell))
    say(`The event ${shown(cell)} is neither 0 (still working) nor 1 (failed). Give causes by name, not by number.`)
  else if (/^(still )?(censored|cens|censor|alive|working|running|works|none|ok|not failed|lost|survived)$/i.test(cell))
    say(`The event ${shown(cell)} reads like a unit that had not failed, not like a cause: write 0 for it.`)
  else return cell
  return undefined
}
