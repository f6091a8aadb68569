import type { Plot } from './chart-frame'
import { atRiskAt, faintUnder, spreadLabels, visibleRuns, type Scale, type SurvivalPoint } from './chart-geometry'
import type { CurveInk } from './curve-ink'
import { usePointing } from './chart-reader'
import { readingText } from './chart-reading'

export type DrawnSeries = { name: string; points: SurvivalPoint[]; says?: string; isMarked: boolean; ink: CurveInk }

type LabelProps = {
  drawn: DrawnSeries[]
  x: Scale
  y: Scale
  plot: Plot
  isNarrow?: boolean
  reading: { days: number; words: string }
}

/** Names at the lines' ends, moved apart where they would meet, each with a thin leader to its line. */
export function CurveLabels({ drawn, x, y, plot, isNarrow, reading }: LabelProps) {
  const { mark } = usePointing()
  const ended = drawn.flatMap((series) => {
    const end = visibleRuns(series.points).at(-1)?.steps.at(-1)
    return end ? [{ series, endX: x(end.time), endY: Math.min(y(end.survival), plot.bottom) }] : []
  })
  const gap = isNarrow ? 22 : 40
  const places = spreadLabels(
    ended.map((e) => e.endY),
    gap,
    plot.top + 4,
    plot.bottom - (isNarrow ? 4 : 24)
  )
  const textX = plot.right + (isNarrow ? 16 : 18)
  return ended.map(({ series: { name, points, says, isMarked, ink }, endX, endY }, i) => {
    const at = places[i]!
    const turn = plot.right + (isNarrow ? 4 : 6)
    const leader = `M${endX + 4} ${endY}H${Math.max(endX + 4, plot.right - (isNarrow ? 4 : 10))}L${turn} ${at}H${textX - 4}`
    return (
      <g key={name} onPointerEnter={() => mark(name)}>
        <path d={leader} stroke="var(--color-edge)" fill="none" />
        <text x={textX} y={at + 5} className={`${isMarked ? 't-mark' : 't-b'} ${ink.textClass}`}>
          {name}
        </text>
        {isMarked && <path d={`M${textX} ${at + 10}h${Math.max(24, name.length * 9)}`} stroke={ink.stroke} strokeWidth="3" />}
        {!isNarrow && (
          <text x={textX} y={at + (isMarked ? 27 : 21)} className="t-soft">
            {says ?? readingText(points, reading.days, reading.words)}
          </text>
        )}
      </g>
    )
  })
}

/** About how wide the longest name is, at a line's end, where any may be marked, and in the rows below. */
export const nameWidths = (drawn: readonly DrawnSeries[]) => ({
  label: Math.max(0, ...drawn.map((s) => s.name.length * 9.2)),
  row: Math.max(0, ...drawn.map((s) => s.name.length * 7.6))
})

/** In the order in which they are listed. */
export const byName = <One extends { name: string }>(drawn: readonly One[]): One[] =>
  [...drawn].sort((a, b) => a.name.localeCompare(b.name, 'en', { numeric: true }))

/** How high the rows are; `isStacked` sets a long name over its counts. */
export const rowHeight = (isStacked: boolean) => (isStacked ? 40 : 22)

type RowsProps = { drawn: DrawnSeries[]; x: Scale; ticks: { label: string; days: number }[]; top: number; isStacked: boolean }

/** How many were still followed at each tick; the marked row is bold. The rows keep the order of the names. */
export function AtRiskRows({ drawn, x, ticks, top, isStacked }: RowsProps) {
  const rows = byName(drawn)
  return (
    <g>
      <text x="0" y={top} className="t-soft">
        still followed (at risk)
      </text>
      {rows.map(({ name, points, isMarked, ink }, i) => {
        const y = top + 20 + rowHeight(isStacked) * i
        return (
          <g key={name}>
            <text x="0" y={y} className={`${isMarked ? 'font-bold' : 'font-semibold'} ${ink.textClass}`}>
              {name}
            </text>
            {ticks.map(({ label, days }) => {
              const n = atRiskAt(points, days)
              return (
                <text
                  key={label}
                  x={x(days)}
                  y={isStacked ? y + 17 : y}
                  textAnchor="middle"
                  className={`${isMarked ? 'font-bold' : ''} ${n < faintUnder ? 't-soft' : ''}`}
                >
                  {n}
                </text>
              )
            })}
          </g>
        )
      })}
    </g>
  )
}
