import { readDesignators } from './designators'
import type { CheckLimits } from './limits'
import { findHeader, readTables, type Columns } from './read-table'

export type BomLine = {
  designators: string[]
  /** As written; null when the file has no such column or the cell is empty or no number. */
  quantity: number | null
  value: string
  footprint: string
  description: string
  isFitted: boolean
}

export type Bom = {
  lines: BomLine[]
  /** Distinct parts: lines that differ in nothing but designators and quantity count once. */
  distinctLines: number
  /** Cells that a spreadsheet would run as a formula. */
  unsafeCells: string[]
}

const meanings = {
  designators:
    /^(ref|refs|reference|references|referencedesignators?|designators?|refdes|refdesignators?|partreferences?|componentreferences?|parts|locations?|positions?)$/,
  quantity: /^(qty|quantity|qnty|quant|count|amount|pcs|pieces|qtyperboard|qtypcb|anzahl|menge)$/,
  value: /^(value|val|values|comment|designation|partvalue)$/,
  footprint: /^(footprint|package|pattern|case|casesize|pcbfootprint|packagereference)$/,
  description: /^(description|desc|descr|details|partdescription|name)$/,
  notFitted:
    /^(notfitted|dnp|dnf|dni|dnm|donotpopulate|donotplace|donotfit|donotmount|nofit|nopop|unfitted|notmounted|notpopulated|donotinstall)$/,
  fitted: /^(fitted|populate|populated|mounted|fit|assemble)$/,
  number: /^(id|item|line|no|nr|number|pos|)$/
}

const yes = /^(y|yes|true|1|x|✓|✔|dnp|dnf|dni|dnm|nf|nofit|notfitted|donotpopulate|donotplace|donotfit|excluded|ja)$/
const no = /^(n|no|false|0|dnp|dnf|notfitted|excluded|nein)$/
const markedInText = /^(dnp|dnf|dni|not fitted|do not (populate|fit|place|mount))\b/i

// `=` and `@` always start a formula; a sign does with a call or a reference behind it (`+5V` is a value).
const runsAsFormula = /^\s*(=|@|[+-].*[(!|])/

/** A bill of materials from its bytes; null when no row heads it by meaning. */
export function readBom(bytes: Uint8Array, limits: CheckLimits): Bom | null {
  const isEnough = (c: Columns<keyof typeof meanings>) =>
    c.designators !== undefined &&
    (c.quantity !== undefined || c.value !== undefined || c.footprint !== undefined || c.description !== undefined)
  let best: { rows: string[][]; header: { row: number; columns: Columns<keyof typeof meanings>; score: number } } | null = null
  for (const table of readTables(bytes, limits)) {
    const header = findHeader(table, meanings, isEnough)
    if (header && (!best || header.score > best.header.score)) best = { rows: table.rows, header }
  }
  if (!best) return null
  const { columns, row } = best.header
  const lines: BomLine[] = []
  const distinct = new Set<string>()
  const unsafeCells: string[] = []
  for (const cells of best.rows.slice(row + 1)) {
    const at = (key: keyof typeof meanings) => (columns[key] === undefined ? '' : (cells[columns[key]] ?? ''))
    for (const cell of cells) if (unsafeCells.length < 50 && runsAsFormula.test(cell)) unsafeCells.push(cell.slice(0, 60))
    if (cells[0]?.startsWith('#') && cells.length < 3) continue
    const designators = readDesignators(at('designators'))
    if (designators.length === 0) continue
    const quantity = /^\s*\d+([.,]0+)?\s*(x|pcs?|st)?\s*$/i.test(at('quantity')) ? Number.parseInt(at('quantity'), 10) : null
    const key = (text: string) => text.toLowerCase().replace(/[\s_-]/g, '')
    const isMarked = yes.test(key(at('notFitted'))) || (columns.fitted !== undefined && no.test(key(at('fitted'))))
    const isMarkedInText = [at('value'), at('description')].some((text) => markedInText.test(text))
    lines.push({
      designators,
      quantity,
      value: at('value'),
      footprint: at('footprint'),
      description: at('description'),
      isFitted: !isMarked && !isMarkedInText
    })
    const skip = [columns.designators, columns.quantity, columns.number]
    distinct.add(JSON.stringify(cells.filter((_, i) => !skip.includes(i))))
  }
  return { lines, distinctLines: distinct.size, unsafeCells }
}
