import { linear } from './chart-geometry'
import { percentText } from './percent-text'

export type IntervalBarProps = {
  /** Shares 0 to 1. With no failure the estimate is 1 and only the lower limit says something. */
  estimate: number
  lower: number | null
  upper: number | null
  /** Percent at the scale's ends; the same for all that are compared. */
  from?: number
  to?: number
  width?: number
}

const edge = 4

/** Whiskers are the 95 % interval, the point is the estimate. Without failures: no point, and a bar to the edge. */
export function IntervalBar({ estimate, lower, upper, from = 50, to = 100, width = 170 }: IntervalBarProps) {
  const x = linear(from, to, edge, width - edge)
  const at = (share: number) => Math.round(x(share * 100) * 10) / 10
  const isBound = estimate >= 1
  const low = lower === null ? null : Math.max(edge, at(lower))
  const high = isBound ? width - edge : upper === null ? null : Math.min(width - edge, at(upper))
  const leavesLow = lower !== null && at(lower) < edge
  const leavesHigh = !isBound && upper !== null && at(upper) > width - edge
  const isInside = estimate * 100 >= from && estimate * 100 <= to
  return (
    <svg viewBox={`0 0 ${width} 22`} width={width} height="22" aria-hidden="true">
      <path d={`M${edge} 16H${width - edge}`} stroke="var(--color-hair)" />
      <path d={`M${width - edge} 12v8`} stroke="var(--color-edge)" />
      {low !== null && high !== null && high > edge && low < width - edge && (
        <g fill="none" stroke="var(--color-petrol)">
          <path d={`M${low} 10H${high}`} strokeWidth="2.5" />
          <path
            strokeWidth="1.5"
            d={`${leavesLow ? `M${edge + 7} 5L${edge} 10l7 5` : `M${low} 5v10`}${leavesHigh ? `M${high - 7} 5L${high} 10l-7 5` : `M${high} 5v10`}`}
          />
        </g>
      )}
      {!isBound && isInside && <circle cx={at(estimate)} cy="10" r="4.5" fill="var(--color-ink)" />}
      {!isBound && estimate * 100 < from && <path d={`M${edge} 10l8 -5v10z`} fill="var(--color-ink)" />}
    </svg>
  )
}

export type IntervalCellProps = IntervalBarProps & {
  /** Under the figure on a phone: "11 followed". */
  note?: string
}

/** The inside of a table cell: figure, bar, and the interval in words for who cannot see it. Table class `ivt`, column class `iv`. */
export function IntervalCell({ note, ...bar }: IntervalCellProps) {
  const { estimate, lower, upper } = bar
  return (
    <>
      <span className="num">{percentText(estimate, lower)}</span>
      {estimate < 1 && lower !== null && upper !== null && (
        <span className="vh">
          , 95 % interval {Math.floor(lower * 100)} to {upper >= 1 ? '100' : Math.ceil(upper * 100)}
        </span>
      )}
      {note && <small className="on-n soft">{note}</small>}
      <span className="on-w in">
        <IntervalBar {...bar} width={170} />
      </span>
      <span className="on-n">
        <IntervalBar {...bar} width={110} />
      </span>
    </>
  )
}

/** The scale under a column of bars. */
export function IntervalAxis({ from = 50, to = 100, width = 170 }: { from?: number; to?: number; width?: number }) {
  const middle = width / 2
  return (
    <svg viewBox={`0 0 ${width} 24`} width={width} height="24" aria-hidden="true">
      <path className="ln" d={`M${edge} .5H${width - edge}M${edge} 0v6M${middle} 0v6M${width - edge} 0v6`} />
      <text x="0" y="20">
        {from}
      </text>
      {width > 90 && (
        <text x={middle} y="20" textAnchor="middle">
          {(from + to) / 2}
        </text>
      )}
      <text x={width} y="20" textAnchor="end">
        {to}
      </text>
    </svg>
  )
}

/** The scale as the inside of the last row's cell. */
export function IntervalAxisCell({ from, to }: { from?: number; to?: number }) {
  return (
    <>
      <span className="num" />
      <span className="on-w in">
        <IntervalAxis from={from} to={to} width={170} />
      </span>
      <span className="on-n">
        <IntervalAxis from={from} to={to} width={110} />
      </span>
    </>
  )
}
