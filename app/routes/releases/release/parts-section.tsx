import { Table, type Column } from '~/components/table'
import type { PartRow } from '~/domain/releases/part-rows'
import type { ReleasePage } from '~/domain/releases/release-page.server'

/** Lines in sight; the rest folds. */
const atFirst = 50

const names: Record<string, [string, string]> = {
  capacitor: ['capacitor', 'capacitors'],
  resistor: ['resistor', 'resistors'],
  inductor: ['inductor', 'inductors'],
  ferrite: ['ferrite', 'ferrites'],
  other: ['other part', 'other parts']
}

const none = <span className="usual">–</span>

const columns: Column<PartRow>[] = [
  { key: 'designators', head: 'Designators', isRowHead: true, cell: (row) => row.designators },
  { key: 'quantity', head: 'Quantity', isFigure: true, cell: (row) => <span className="usual">{row.quantity}</span> },
  { key: 'value', head: 'As written', cell: (row) => row.value || none },
  {
    key: 'read',
    head: 'As read',
    cell: (row) => (
      <>
        {row.read}
        {row.unread && <span className="soft">{row.read ? `. ${row.unread}` : row.unread}</span>}
        {!row.read && !row.unread && none}
      </>
    )
  },
  { key: 'footprint', head: 'Footprint', cell: (row) => row.footprint || none },
  { key: 'fitted', head: 'Fitted', cell: (row) => (row.isFitted ? <span className="usual">yes</span> : <b>not fitted</b>) }
]

/** How many tables `Parts` numbers. */
export const partsTables = (page: ReleasePage) => (page.parts.lines > 0 ? 1 : 0)

/** The bill of materials: what is written in it and what was read out of each value. */
export function Parts({ page, number }: { page: ReleasePage; number: number }) {
  const { rows, left, lines, parts, notFitted, kinds } = page.parts
  if (lines === 0) return <p className="soft">No bill of materials could be read.</p>
  const counted = kinds.map(({ kind, count }) => `${count} ${names[kind]![count === 1 ? 0 : 1]}`).join(', ')
  return (
    <>
      <p>
        {parts} {parts === 1 ? 'part' : 'parts'} in {lines} {lines === 1 ? 'line' : 'lines'}: {counted}.{' '}
        {notFitted === 0 ? 'All are fitted.' : `${notFitted} ${notFitted === 1 ? 'is' : 'are'} marked as not fitted.`}
      </p>
      <Table
        number={number}
        caption="The bill of materials, and what Fettle read out of it. Nothing is guessed."
        rows={rows.slice(0, atFirst)}
        rowKey={(row) => String(row.line)}
        columns={columns}
        className="parts"
        isDense
        isFolded
      />
      {rows.length > atFirst && (
        <details className="mt-4">
          <summary>{rows.length - atFirst} more lines</summary>
          <Table
            caption={`Lines ${atFirst + 1} to ${rows.length}.`}
            rows={rows.slice(atFirst)}
            rowKey={(row) => String(row.line)}
            columns={columns}
            className="parts"
            isDense
            isFolded
          />
        </details>
      )}
      {left > 0 && <p className="small soft mt-3">{left} more lines stand in the file itself.</p>}
    </>
  )
}
