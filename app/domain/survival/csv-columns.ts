/** What a column of a table of lives can mean. */
export const columnMeanings = ['time', 'event', 'entry', 'lower', 'upper', 'group', 'weight'] as const
export type ColumnMeaning = (typeof columnMeanings)[number]

const units = '(hours?|days?|weeks?|months?|years?|cycles?|h|d|w)'
const headings: Record<ColumnMeaning, RegExp> = {
  time: new RegExp(`^(t|time${units}?|${units}|(${units}|time)to(failure|event|exit)|duration|lifetime|followup|exit|stop)$`),
  event: /^(event|status|failed|failure|fail|cause|causeoffailure|died|dead)$/,
  entry: /^(entry|entered|start|delayedentry|entrytime|starttime)$/,
  lower: /^(l|lower|low|left|lowerend|leftend|lowerlimit)$/,
  upper: /^(u|upper|high|right|upperend|rightend|upperlimit)$/,
  group: /^(group|arm|batch|release|version|revision|treatment|stratum|strata)$/,
  weight: /^(weight|weights|count|counts|n|freq|frequency|number|units)$/
}

/** A heading without case, accents, signs and whatever stands in brackets: `Time (days)` is `time`. */
const keyOf = (cell: string): string =>
  cell
    .slice(0, 200)
    .toLowerCase()
    .normalize('NFD')
    .replace(/[([{][^)\]}]*[)\]}]/g, '')
    .replace(/[^\p{L}\p{N}]/gu, '')

/** Columns counted from 0; `leftOut` are the headings that mean nothing here. */
export type CsvColumns = { at: Partial<Record<ColumnMeaning, number>>; count: number; leftOut: string[] }

const quoted = (text: string) => `“${text.length > 40 ? `${text.slice(0, 40)}…` : text}”`

/**
 * What the headings of a table mean, in any order.
 * @returns the columns, or in words why they cannot be told
 */
export function readHeadings(cells: readonly string[]): CsvColumns | string {
  const at: CsvColumns['at'] = {}
  const leftOut: string[] = []
  for (const [i, cell] of cells.entries()) {
    const key = keyOf(cell)
    if (/^(censor(ed|ing)?|cens)$/.test(key))
      return `${quoted(cell)} can mean failed or not failed. Head the column event, with 1 for a failure and 0 for a unit that still worked.`
    const meaning = columnMeanings.find((name) => headings[name].test(key))
    if (meaning === undefined) {
      if (cell !== '') leftOut.push(cell.slice(0, 40))
    } else if (at[meaning] === undefined) at[meaning] = i
    else return `${quoted(cells[at[meaning]!]!)} and ${quoted(cell)} both look like the ${meaning}. Rename or remove one of them.`
  }
  const { time, event, lower, upper } = at
  if (lower !== undefined && upper === undefined) return 'There is a lower end and no upper one: add a column headed upper.'
  if (upper !== undefined && lower === undefined) return 'There is an upper end and no lower one: add a column headed lower.'
  if (time === undefined && lower === undefined)
    return `No heading names the time. Head the columns time and event, or lower and upper (found: ${cells.slice(0, 6).map(quoted).join(', ')}).`
  if (time !== undefined && event === undefined && lower === undefined)
    return 'No heading names the event: add a column headed event, with 1 for a failure and 0 for a unit that still worked.'
  return { at, count: cells.length, leftOut: leftOut.slice(0, 10) }
}
