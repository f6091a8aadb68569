export type ReadingRow = {
  name: string
  /** The ink of its line. */
  textClass?: string
  isMarked?: boolean
  /** "93 %", or why there is no figure. */
  share: string
  /** "88 to 96"; empty where there is none. */
  interval: string
  followed: string
}

export type ReadingLinesProps = {
  /** The day in words, and what the figures are. */
  head: string
  rows: readonly ReadingRow[]
}

/** What stands under a chart: each line's figures at a day. It keeps its room, whatever it says. */
export function ReadingLines({ head, rows }: ReadingLinesProps) {
  return (
    <div className="chart-lines">
      <p className="soft">{head}</p>
      <ul>
        {rows.map(({ name, textClass, isMarked, share, interval, followed }) => (
          <li key={name} className={isMarked ? 'b' : undefined}>
            <span className={`nm ${textClass ?? ''}`}>{name} </span>
            <span className={interval === '' ? 'all' : undefined}>{share} </span>
            {interval !== '' && <span>{interval} </span>}
            <span className="r">{followed}</span>
          </li>
        ))}
      </ul>
    </div>
  )
}

/** The same for one line alone, in a sentence. */
export const ReadingLine = ({ head, row }: { head: string; row: ReadingRow }) => (
  <p className="chart-lines">
    <span className="soft">{head}</span> <b>{row.share}</b>
    {row.interval && `, ${row.interval}`}
    {row.followed && `, ${row.followed}`}
  </p>
)

/** One line's figures as a part of a sentence: "TM-3 93 %, 88 to 96, 84 followed". */
export const spokenRow = ({ name, share, interval, followed }: ReadingRow, sure: string): string =>
  [`${name} ${share}`, interval && (/^\d/.test(interval) ? `${sure} interval ${interval}` : interval), followed]
    .filter(Boolean)
    .join(', ')
