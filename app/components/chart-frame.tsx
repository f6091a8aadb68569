import type { Scale } from './chart-geometry'

export type Plot = { left: number; right: number; top: number; bottom: number }

export type ChartFrameProps = {
  plot: Plot
  x: Scale
  y: Scale
  /** Percent, or whatever the title over the axis says. */
  yTicks: number[]
  xTicks: { label: string; days: number }[]
  yTitle: string
  xTitle: string
  /** The axis does not start at 0: two strokes across its foot. */
  isCut?: boolean
  /** The title of the x axis below its last tick instead of beside it. */
  isTight?: boolean
}

/** L-shaped axis of 1.5 px with its ticks, over a hair grid. */
export function ChartFrame({ plot, x, y, yTicks, xTicks, yTitle, xTitle, isCut, isTight }: ChartFrameProps) {
  const { left, right, top, bottom } = plot
  return (
    <g>
      {yTicks.map((tick) => (
        <g key={tick}>
          {y(tick) < bottom && <path d={`M${left} ${y(tick)}H${right}`} stroke="var(--color-hair)" />}
          <text x={left - 8} y={y(tick) + 5} textAnchor="end">
            {tick}
          </text>
        </g>
      ))}
      <text x="0" y="13" className="t-soft">
        {yTitle}
      </text>
      <path className="ln" strokeWidth="1.5" d={`M${left} ${top}V${bottom}H${right}`} />
      {isCut && (
        <>
          <path className="halo" strokeWidth="4" d={`M${left} ${bottom - 12}v4`} />
          <path className="ln" strokeWidth="1.5" d={`M${left - 6} ${bottom - 9}l12 -5M${left - 6} ${bottom - 14}l12 -5`} />
        </>
      )}
      {xTicks.map(({ label, days }, i) => (
        <g key={label}>
          <path className="ln" strokeWidth="1.5" d={`M${x(days)} ${bottom}v6`} />
          <text x={x(days)} y={bottom + 21} textAnchor={isTight && i === xTicks.length - 1 ? 'end' : 'middle'}>
            {label}
          </text>
        </g>
      ))}
      {isTight ? (
        <text x={right} y={bottom + 38} textAnchor="end" className="t-soft">
          {xTitle}
        </text>
      ) : (
        <text x={right + Math.max(12, 4 + 4 * (xTicks.at(-1)?.label.length ?? 0))} y={bottom + 21} className="t-soft">
          {xTitle}
        </text>
      )}
    </g>
  )
}
