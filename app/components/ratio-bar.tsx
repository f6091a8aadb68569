import { linear } from './chart-geometry'

export type RatioBarProps = {
  ratio: number
  lower: number
  upper: number
  /** Told by a word and by the point's shape: a filled diamond instead of a disc. */
  isFlagged: boolean
  /** Ends of the scale, on both sides of 1; the same for all rows. */
  from?: number
  to?: number
  width?: number
}

const edge = 4

/** A ratio on a logarithmic line with a mark at 1: whiskers are the interval. A ratio of 0 has no point and an open left end. */
export function RatioBar({ ratio, lower, upper, isFlagged, from = 0.1, to = 10, width = 170 }: RatioBarProps) {
  const scale = linear(Math.log(from), Math.log(to), edge, width - edge)
  const at = (value: number) => (value <= from ? edge : value >= to ? width - edge : Math.round(scale(Math.log(value)) * 10) / 10)
  const [low, high, one, point] = [at(lower), at(upper), at(1), at(ratio)]
  return (
    <svg viewBox={`0 0 ${width} 22`} width={width} height="22" aria-hidden="true">
      <path d={`M${edge} 16H${width - edge}`} stroke="var(--color-hair)" />
      <path d={`M${one} 0V22`} className="ln" strokeWidth="1" />
      <g fill="none" stroke="var(--color-petrol)">
        <path d={`M${low} 10H${high}`} strokeWidth="2.5" />
        <path
          strokeWidth="1.5"
          d={`${lower < from ? `M${low + 7} 5L${low} 10l7 5` : `M${low} 5v10`}${upper > to ? `M${high - 7} 5L${high} 10l-7 5` : `M${high} 5v10`}`}
        />
      </g>
      {ratio >= from &&
        ratio <= to &&
        (isFlagged ? (
          <path
            data-flagged
            d={`M${point - 7} 10l7 -8l7 8l-7 8z`}
            fill="var(--color-ink)"
            stroke="var(--color-paper)"
            strokeWidth="1.5"
          />
        ) : (
          <circle cx={point} cy="10" r="4.5" fill="var(--color-ink)" />
        ))}
    </svg>
  )
}

/** One figure after the point; two where one would say 0 or hide that it lies above 1. */
const down = (value: number) => {
  const floor = (digits: number) => (Math.floor(value * 10 ** digits + 1e-9) / 10 ** digits).toFixed(digits)
  return value < 0.095 || (value > 1 && value < 1.1) ? floor(2) : floor(1)
}

/** "2.4 times (1.1 to 4.6)": how often as many failures as expected; the limits are rounded away from the claim. */
export const ratioText = ({ ratio, lower, upper }: { ratio: number; lower: number; upper: number }): string =>
  `${ratio < 0.095 && ratio > 0 ? ratio.toFixed(2) : ratio.toFixed(1)} times (${down(lower)} to ${(Math.ceil(upper * 10 - 1e-9) / 10).toFixed(1)})`

/** The inside of a table's cell (class `iv`): words, the word of a flagged row, and the bar drawn wide and narrow. */
export function RatioCell(bar: Omit<RatioBarProps, 'width'>) {
  return (
    <>
      <span className="nw">{ratioText(bar)}</span>
      {bar.isFlagged && <b className="nw"> more than chance</b>}
      <span className="on-w">
        <RatioBar {...bar} width={170} />
      </span>
      <span className="on-n">
        <RatioBar {...bar} width={110} />
      </span>
    </>
  )
}

function RatioAxis({ from, to, width }: { from: number; to: number; width: number }) {
  const middle = linear(Math.log(from), Math.log(to), edge, width - edge)(0)
  return (
    <svg viewBox={`0 0 ${width} 24`} width={width} height="24" aria-hidden="true">
      <path className="ln" d={`M${edge} .5H${width - edge}M${edge} 0v6M${middle} 0v6M${width - edge} 0v6`} />
      <text x="0" y="20">
        {from}
      </text>
      <text x={middle} y="20" textAnchor="middle">
        1
      </text>
      <text x={width} y="20" textAnchor="end">
        {to}
      </text>
    </svg>
  )
}

/** The scale as the inside of the last row's cell. */
export function RatioAxisCell({ from = 0.1, to = 10 }: { from?: number; to?: number }) {
  return (
    <>
      <span className="on-w">
        <RatioAxis from={from} to={to} width={170} />
      </span>
      <span className="on-n">
        <RatioAxis from={from} to={to} width={110} />
      </span>
    </>
  )
}
