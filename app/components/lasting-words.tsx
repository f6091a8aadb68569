import { GoLink } from './button'
import { unitFor, type SurvivalPoint } from './chart-geometry'
import { Figure } from './figure'
import { SurvivalChart } from './survival-chart'

export type LastingWordsProps = {
  lasting: {
    oneYear: { figure: string; interval: string } | null
    fitted: number
    failed: number
    followedAYear: number
    curve: SurvivalPoint[] | null
    grain: number | null
    asOf: string
  } | null
  /** What the curve is of: "Buttress 1.1.0". */
  name: string
  /** The number of the figure on its page. */
  figure: number
  /** Where the curves are, and what the link says. */
  href: string
  link: string
}

/** How long it lasts, in one figure with its interval, its curve, and the way to all of them. */
export function LastingWords({ lasting, name, figure, href, link }: LastingWordsProps) {
  const go = (
    <p className="mt-3">
      <GoLink href={href}>{link}</GoLink>
    </p>
  )
  if (!lasting?.curve)
    return (
      <>
        <p>{lasting === null ? 'The figures cannot be computed just now. The curves are on their own sheet.' : few(lasting)}</p>
        {go}
      </>
    )
  const { oneYear, fitted, failed, followedAYear, curve, grain, asOf } = lasting
  return (
    <div className="last">
      <div>
        {oneYear ? (
          <>
            <p className="read">
              {oneYear.figure.replace(/ of 100$/, '')}
              <small> of 100</small>
            </p>
            <p>still work one year after fitting.</p>
            <p className="small soft">
              {oneYear.interval === 'none failed'
                ? 'The exact lower bound, with 95\u00a0% confidence: none failed by then.'
                : `95\u00a0% interval ${oneYear.interval}.`}{' '}
              {fitted} fitted, {followedAYear} of them still followed at one year, {failed === 0 ? 'none' : failed} failed in all.
            </p>
          </>
        ) : (
          <p>{few(lasting)}</p>
        )}
        {go}
      </div>
      <Figure
        number={figure}
        caption={'All console revisions together, with the 95\u00a0% interval. Ticks: last word from a working unit.'}
      >
        <SurvivalChart
          isSmall
          series={[{ name, points: curve, marked: true }]}
          unit={unitFor(curve.at(-1)?.time ?? 1)}
          asOf={asOf}
          grain={grain}
        />
      </Figure>
    </div>
  )
}

const few = ({ fitted, failed }: { fitted: number; failed: number }) =>
  fitted === 0
    ? 'Nobody has reported one yet. The first report counts most.'
    : `${fitted} fitted, ${failed === 0 ? 'none' : failed} failed so far: too few were followed for a year to name a share.`
