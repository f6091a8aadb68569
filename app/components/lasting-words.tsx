import { GoLink } from './button'

export type LastingWordsProps = {
  lasting: { oneYear: { figure: string; interval: string } | null; fitted: number; failed: number } | null
  /** Where the curves are, and what the link says. */
  href: string
  link: string
}

const fittedWords = (n: number) => `${n} fitted`

/** How long it lasts, in one figure with its interval, and the way to the curves. */
export function LastingWords({ lasting, href, link }: LastingWordsProps) {
  return (
    <>
      {lasting === null ? (
        <p>The figures cannot be computed just now. The curves are on their own sheet.</p>
      ) : lasting.oneYear ? (
        <>
          <p className="read">
            {lasting.oneYear.figure.replace(/ of 100$/, '')}
            <small> of 100</small>
          </p>
          <p>still work one year after fitting.</p>
          <p className="small soft mt-1">
            95 % interval: {lasting.oneYear.interval}. {fittedWords(lasting.fitted)}, {lasting.failed} failed in all.
          </p>
        </>
      ) : lasting.fitted === 0 ? (
        <p>Nobody has reported one yet. The first report counts most.</p>
      ) : (
        <p>
          {fittedWords(lasting.fitted)}, {lasting.failed} failed so far: too few were followed for a year to name a share.
        </p>
      )}
      <p className="mt-3">
        <GoLink href={href}>{link}</GoLink>
      </p>
    </>
  )
}
