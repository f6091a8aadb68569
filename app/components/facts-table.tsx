import { useId, type ReactNode } from 'react'
import { TableScroll } from './table'

export type FactRow = {
  /** With its unit: "Thickness, mm". */
  fact: string
  /** What the maintainer declares; absent when not stated. */
  declared?: ReactNode
  /** What was measured in the files; absent when it cannot be. */
  measured?: ReactNode
  /** Nobody declares it: the place stays empty instead of "not stated". */
  isMeasuredOnly?: boolean
  /** Both are there and differ; then the finding that says so. */
  differs?: { href: string }
}

/** Declared beside measured, "=" between them; a difference is "≠" and links to its finding. */
export function FactsTable({ number, caption, rows }: { number?: number; caption: ReactNode; rows: FactRow[] }) {
  const captionId = useId()
  return (
    <TableScroll labelledBy={captionId}>
      <table className="facts">
        <caption id={captionId}>
          {number !== undefined && <b>Table {number}</b>} {caption}
        </caption>
        <thead>
          <tr>
            <th scope="col">Fact</th>
            <th scope="col" className="r">
              Declared
            </th>
            <th scope="col" className="eq">
              <span className="vh">agrees</span>
            </th>
            <th scope="col" className="r">
              Measured
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ fact, declared, measured, isMeasuredOnly, differs }) => (
            <tr key={fact}>
              <th scope="row">{fact}</th>
              <td className={declared === undefined ? 'r soft' : 'r'}>
                {declared ?? (isMeasuredOnly ? null : 'not\u00a0stated')}
              </td>
              <td className="eq">
                {differs ? (
                  <a href={differs.href} aria-label="differs, see the finding">
                    ≠
                  </a>
                ) : declared !== undefined && measured !== undefined ? (
                  '='
                ) : null}
              </td>
              <td className={measured === undefined ? 'r soft' : 'r b'}>{measured ?? 'not in the files'}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </TableScroll>
  )
}
