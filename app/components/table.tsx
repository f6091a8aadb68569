import { useId, type ReactNode } from 'react'
import { TextLink } from './text-link'

export type Column<Row> = {
  key: string
  head: ReactNode
  cell: (row: Row) => ReactNode
  /** The word before the value when the table is folded; the head when it is text. */
  label?: string
  /** Figures stand right, with their unit in the head. */
  isFigure?: boolean
  /** What the row is about. */
  isRowHead?: boolean
  weight?: 'bold' | 'soft'
  /** Left out below the whole sheet (1120 px) or below wide drawings (900 px). */
  only?: 'sheet' | 'wide'
  className?: string
  sort?: { href: string; direction?: 'ascending' | 'descending' }
}

export type TableProps<Row> = {
  number?: number
  /** Stands above; without a number and a caption a table has no name, so it is required. */
  caption: ReactNode
  columns: Column<Row>[]
  rows: Row[]
  rowKey: (row: Row) => string
  /** Rows that can be pointed at. */
  rowId?: (row: Row) => string | undefined
  isDense?: boolean
  /** On a phone a row becomes label and value; else its columns stay. */
  isFolded?: boolean
  className?: string
  /** Rows after the last, such as an axis. */
  after?: ReactNode
}

const classes = (...names: (string | false | undefined)[]) => names.filter(Boolean).join(' ') || undefined

const columnClass = <Row,>(c: Column<Row>) =>
  classes(c.isFigure && 'r', c.only === 'sheet' && 'x', c.only === 'wide' && 'w', c.className)

/** Heavy rule over, under the head and below, hair between rows; no fills, no vertical rules. */
export function Table<Row>(props: TableProps<Row>) {
  const { number, caption, columns, rows, rowKey, rowId, isDense, isFolded, className, after } = props
  const hasSort = columns.some((c) => c.sort)
  const captionId = useId()
  return (
    <TableScroll labelledBy={captionId}>
      <table className={classes(isDense && 'dense', isFolded && 'fold', hasSort && 'srt', className)}>
        <caption id={captionId}>
          {number !== undefined && <b>Table {number}</b>} {caption}
        </caption>
        <thead>
          <tr>
            {columns.map((c) => (
              <th key={c.key} scope="col" className={columnClass(c)} aria-sort={c.sort?.direction}>
                {c.sort ? <SortLink {...c.sort}>{c.head}</SortLink> : c.head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={rowKey(row)} id={rowId?.(row)}>
              {columns.map((c) => (
                <Cell key={c.key} column={c} row={row} isFolded={isFolded} />
              ))}
            </tr>
          ))}
          {after}
        </tbody>
      </table>
    </TableScroll>
  )
}

/** What a wide table scrolls in on a phone; it takes the focus so that the arrow keys scroll it too. */
export function TableScroll({ labelledBy, children }: { labelledBy: string; children: ReactNode }) {
  return (
    <div className="tw" role="group" aria-labelledby={labelledBy} tabIndex={0}>
      {children}
    </div>
  )
}

function Cell<Row>({ column: c, row, isFolded }: { column: Column<Row>; row: Row; isFolded?: boolean }) {
  const className = classes(columnClass(c), c.weight === 'bold' && 'b', c.weight === 'soft' && 'soft')
  if (c.isRowHead)
    return (
      <th scope="row" className={className}>
        {c.cell(row)}
      </th>
    )
  const label = c.label ?? (typeof c.head === 'string' ? c.head : undefined)
  return (
    <td className={className} data-l={isFolded ? label : undefined}>
      {isFolded ? <span>{c.cell(row)}</span> : c.cell(row)}
    </td>
  )
}

function SortLink({ href, direction, children }: { href: string; direction?: 'ascending' | 'descending'; children: ReactNode }) {
  return (
    <TextLink href={href}>
      {children}
      {direction && (
        <svg width="12" height="10" aria-hidden="true">
          <path d={direction === 'descending' ? 'M1 2h10L6 9z' : 'M1 8h10L6 1z'} fill="currentColor" />
        </svg>
      )}
    </TextLink>
  )
}
