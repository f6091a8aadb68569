import { readDesignators } from './designators'
import type { CheckLimits } from './limits'
import { isDescriptionNotFitted, isValueNotFitted } from './not-fitted'
import { findTable, type Columns } from './read-table'

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

// Headings of the trade's tools in English, German and French; common practice, no source.
const meanings = {
  designators: [
    /^(refs?|references?|referencedesignators?|designators?|refdes|refdesignators?|refdesig|partreferences?|componentreferences?|componentdesignators?|referenz(en)?|referenzbezeichner|bauteilreferenz(en)?|bezeichner|reperes?|reperetopologique|designateurs?)$/,
    /^(parts?|components?|bauteile?|composants?|locations?|positions?)$/
  ],
  quantity: [
    /^(qty|quantity|qnty|quant|count|amount|pcs|pieces|partcount|partscount|qtyperboard|quantityperboard|qtypcb|qtyboard|anzahl|menge|stuck|stuckzahl|stk|quantites?|qte|nombre)$/
  ],
  value: [
    /^(value|val|values|partvalue|componentvalue|wert|bauteilwert|valeur)$/,
    /^(comment|designation|kommentar|commentaire)$/
  ],
  footprint: [
    /^(footprint|footprintname|pcbfootprint|pattern|landpattern|empreinte|footprintref)$/,
    /^(package|packagereference|packagetype|packagefootprint|case|casesize|gehause|bauform|boitier|housing)$/
  ],
  description: [/^(description|desc|descr|details|partdescription|beschreibung|bauteilbeschreibung)$/, /^(name|bezeichnung)$/],
  notFitted: [
    /^(notfitted|dnp|dnf|dni|dnm|dns|donotpopulate|donotplace|donotfit|donotmount|donotinstall|donotstuff|donotassemble|nofit|nopop|unfitted|unpopulated|notmounted|notpopulated|notplaced|notassembled|nichtbestuckt|nichtbestucken|nonmontee?s?|nepasmonter)$/
  ],
  fitted: [
    /^(fitted|populate|populated|mounted|mount|fit|assemble|assembled|placed|stuffed|bestuckt|bestucken|bestuckung|montee?s?|amonter)$/
  ],
  number: [/^(id|item|line|no|nr|num|number|pos|)$/]
}

const yes =
  /^(y|yes|true|1|x|✓|✔|dnp|dnf|dni|dnm|dns|nf|nofit|notfitted|notpopulated|notplaced|notmounted|donotpopulate|donotplace|donotfit|donotmount|excluded|ja|j|oui|nichtbestuckt|nonmontee?)$/
const no =
  /^(n|no|false|0|dnp|dnf|dni|dnm|dns|nofit|notfitted|notpopulated|notplaced|notmounted|donotpopulate|donotplace|donotfit|donotmount|excluded|nein|non|nichtbestuckt|nonmontee?)$/
const isTotal = /^\s*(grand\s*)?(sub)?(total|sum|summe|gesamt|somme)s?\b[\s:=\d]*$/i
const isNoDesignator = /^\s*(n\/?a|none|keine?|aucune?|[-–—.]+)\s*$/i

// `=` and `@` always start a formula; a sign does with a call or a reference behind it (`+5V` is a value).
const runsAsFormula = /^\s*(=|@|[+-].*[(!|])/

/** A bill of materials from its bytes; null when no row heads it by meaning, or it names more parts than the limits allow. */
export function readBom(bytes: Uint8Array, limits: CheckLimits): Bom | null {
  const isEnough = (c: Columns<keyof typeof meanings>) =>
    c.designators !== undefined &&
    (c.quantity !== undefined || c.value !== undefined || c.footprint !== undefined || c.description !== undefined)
  const table = findTable(bytes, limits, meanings, isEnough)
  if (!table) return null
  const { columns, row, rows } = table
  const lines: BomLine[] = []
  let all = 0
  const distinct = new Set<string>()
  const unsafeCells: string[] = []
  for (const cells of rows.slice(row + 1)) {
    const at = (key: keyof typeof meanings) => (columns[key] === undefined ? '' : (cells[columns[key]] ?? ''))
    for (const cell of cells) if (unsafeCells.length < 50 && runsAsFormula.test(cell)) unsafeCells.push(cell.slice(0, 60))
    if (cells[0]?.startsWith('#') && (cells.length < 3 || table.isAligned)) continue
    if (isTotal.test(at('designators')) || isNoDesignator.test(at('designators'))) continue
    const designators = readDesignators(at('designators'), limits.designators - all)
    if (designators.length === 0) continue
    all += designators.length
    if (all > limits.designators) return null
    const quantity = /^\s*\d+([.,]0+)?\s*(x|pcs?|stk?)?\.?\s*$/i.test(at('quantity')) ? Number.parseInt(at('quantity'), 10) : null
    const isMarked = yes.test(markKey(at('notFitted'))) || (columns.fitted !== undefined && no.test(markKey(at('fitted'))))
    const isMarkedInText = isValueNotFitted(at('value')) || isDescriptionNotFitted(at('description'))
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

const markKey = (text: string) =>
  text
    .slice(0, 60)
    .toLowerCase()
    .normalize('NFD')
    .replace(/[\p{M}\s_-]/gu, '')
