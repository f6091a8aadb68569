import { TextLink } from './text-link'

/** The page numbers to show: first, last, the current one with a neighbour each side; `null` where some are left out. */
export function pageNumbers(page: number, pages: number): (number | null)[] {
  const shown = [...new Set([1, page - 1, page, page + 1, pages])].filter((n) => n >= 1 && n <= pages).sort((a, b) => a - b)
  return shown.flatMap((n, i) => {
    const before = shown[i - 1]
    if (before === undefined || n === before + 1) return [n]
    return n === before + 2 ? [n - 1, n] : [null, n]
  })
}

export type PagerProps = {
  page: number
  pageSize: number
  total: number
  /** What is listed: "reports". */
  of: string
  hrefOf: (page: number) => string
  /** Lists run newest first; others say before and after. */
  words?: { back: string; on: string }
}

/** Newer, numbers, Older, "reports 51 to 100 of 439". Nothing when all fit one page. */
export function Pager({ page, pageSize, total, of, hrefOf, words = { back: 'Newer', on: 'Older' } }: PagerProps) {
  const pages = Math.max(1, Math.ceil(total / pageSize))
  if (pages === 1) return null
  const from = (page - 1) * pageSize + 1
  return (
    <nav className="pgr" aria-label="Pages of the list">
      {page > 1 && (
        <TextLink className="end" href={hrefOf(page - 1)} rel="prev">
          {words.back}
        </TextLink>
      )}
      {pageNumbers(page, pages).map((n, i) =>
        n === null ? (
          <span key={`gap ${i}`} className="soft">
            …
          </span>
        ) : n === page ? (
          <b key={n} aria-current="page">
            {n}
          </b>
        ) : (
          <TextLink key={n} href={hrefOf(n)} aria-label={`Page ${n}`}>
            {n}
          </TextLink>
        )
      )}
      {page < pages && (
        <TextLink className="end" href={hrefOf(page + 1)} rel="next">
          {words.on}
        </TextLink>
      )}
      <span className="of">
        {of} {from} to {Math.min(total, page * pageSize)} of {total}
      </span>
    </nav>
  )
}
