import { linear } from './chart-geometry'

export type DifferenceBarProps = {
  estimate: number
  lower: number
  upper: number
  /** The scale reaches as far to both sides of 0; the same for all that are compared. See `differenceReach`. */
  reach: number
  width?: number
}

const edge = 4

/** A round number that holds the estimates and most of their limits; limits further out end in an arrowhead. */
export function differenceReach(rows: readonly { estimate: number; lower: number; upper: number }[]): number {
  const widths = rows.map((r) => (r.upper - r.lower) / 2).sort((a, b) => a - b)
  // Half of the intervals are no wider than this; a scale that cuts those off shows nothing.
  const typical = 2 * (widths[Math.floor(widths.length / 2)] ?? 0)
  const most = Math.max(
    0,
    ...rows.map((r) =>
      Math.max(Math.abs(r.estimate) * 1.15, Math.min(Math.max(Math.abs(r.estimate) * 3, typical), Math.max(-r.lower, r.upper)))
    )
  )
  if (!(most > 0)) return 1
  const power = 10 ** Math.floor(Math.log10(most))
  return [1, 2, 5, 10].map((n) => n * power).find((n) => n >= most * (1 - 1e-9))!
}

/** A difference on a line with 0 in its middle: whiskers are the interval, the point is the estimate. Its words stand beside it. */
export function DifferenceBar({ estimate, lower, upper, reach, width = 170 }: DifferenceBarProps) {
  const x = linear(-reach, reach, edge, width - edge)
  const at = (value: number) => Math.round(Math.min(width - edge, Math.max(edge, x(value))) * 10) / 10
  const [low, high, zero] = [at(lower), at(upper), at(0)]
  return (
    <svg viewBox={`0 0 ${width} 22`} width={width} height="22" aria-hidden="true">
      <path d={`M${edge} 16H${width - edge}`} stroke="var(--color-hair)" />
      <path d={`M${zero} 0V22`} className="ln" strokeWidth="1" />
      <g fill="none" stroke="var(--color-petrol)">
        <path d={`M${low} 10H${high}`} strokeWidth="2.5" />
        <path
          strokeWidth="1.5"
          d={`${lower < -reach ? `M${low + 7} 5L${low} 10l7 5` : `M${low} 5v10`}${upper > reach ? `M${high - 7} 5L${high} 10l-7 5` : `M${high} 5v10`}`}
        />
      </g>
      {Math.abs(estimate) <= reach && <circle cx={at(estimate)} cy="10" r="4.5" fill="var(--color-ink)" />}
    </svg>
  )
}

const whole = (value: number) => {
  const rounded = Math.round(value)
  return rounded < 0 ? `−${-rounded}` : String(rounded)
}

/** "12 days more (−3 to 27)": a difference with its interval in one breath; the limits are rounded away from the claim. */
export function differenceText(
  { estimate, lower, upper }: { estimate: number; lower: number; upper: number },
  unit = 'days'
): string {
  const size = Math.abs(Math.round(estimate))
  const words =
    size === 0
      ? `less than one ${unit.replace(/s$/, '')}`
      : `${size} ${size === 1 ? unit.replace(/s$/, '') : unit} ${estimate > 0 ? 'more' : 'less'}`
  return `${words} (${whole(Math.floor(lower + 1e-9))} to ${whole(Math.ceil(upper - 1e-9))})`
}

/** The inside of a table's cell (class `iv`): the words, and the bar drawn wide and narrow. */
export function DifferenceCell({ unit, ...bar }: Omit<DifferenceBarProps, 'width'> & { unit?: string }) {
  return (
    <>
      <span className="nw">{differenceText(bar, unit)}</span>
      <span className="on-w">
        <DifferenceBar {...bar} width={170} />
      </span>
      <span className="on-n">
        <DifferenceBar {...bar} width={110} />
      </span>
    </>
  )
}

function DifferenceAxis({ reach, width }: { reach: number; width: number }) {
  const middle = width / 2
  return (
    <svg viewBox={`0 0 ${width} 24`} width={width} height="24" aria-hidden="true">
      <path className="ln" d={`M${edge} .5H${width - edge}M${edge} 0v6M${middle} 0v6M${width - edge} 0v6`} />
      <text x="0" y="20">{`−${reach}`}</text>
      <text x={middle} y="20" textAnchor="middle">
        0
      </text>
      <text x={width} y="20" textAnchor="end">{`+${reach}`}</text>
    </svg>
  )
}

/** The scale as the inside of the last row's cell. */
export function DifferenceAxisCell({ reach }: { reach: number }) {
  return (
    <>
      <span className="on-w">
        <DifferenceAxis reach={reach} width={170} />
      </span>
      <span className="on-n">
        <DifferenceAxis reach={reach} width={110} />
      </span>
    </>
  )
}
