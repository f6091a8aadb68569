import { memo, useId, type PointerEvent } from 'react'
import { CauseLabels, CauseLine, type DrawnCause } from './cause-lines'
import { ChartFrame } from './chart-frame'
import { linear, plainAxis, roundTicks, timeAxis, visibleRuns, type TimeUnit } from './chart-geometry'
import { CursorLine, placeOf, usePointing } from './chart-reader'
import { drawnTo, readAt } from './chart-reading'
import { curveInks } from './curve-ink'
import { unitWords } from './survival-drawing'

type DrawingProps = { drawn: DrawnCause[]; label: string; unit: TimeUnit; plainUnit?: string; isNarrow?: boolean }

const nearby = 12

/** One of the two drawings of an incidence figure. */
export const IncidenceDrawing = memo(function IncidenceDrawing({ drawn, label, unit, plainUnit, isNarrow }: DrawingProps) {
  const { toDay, mark } = usePointing()
  const clip = useId()
  // long names take room from the plot, never from themselves
  const longest = Math.max(0, ...drawn.map((cause) => cause.name.length))
  const [width, plot] = isNarrow
    ? [328, { left: 44, right: Math.max(120, Math.min(196, 280 - longest * 8)), top: 26, bottom: 250 }]
    : [804, { left: 44, right: Math.min(614, 752 - (longest + 7) * 8), top: 26, bottom: 270 }]
  const last = Math.max(plainUnit === undefined ? 1 : 0, ...drawn.map((c) => drawnTo(c.points)))
  const axis = plainUnit === undefined ? timeAxis(last, unit) : plainAxis(last)
  const highest = Math.max(
    0,
    ...drawn.flatMap(({ points, ink }) =>
      visibleRuns(points, 0).flatMap((run) =>
        run.steps.map((step) => (ink === curveInks[0] && run.weight === 'full' ? (step.upper ?? step.survival) : step.survival))
      )
    )
  )
  const yTicks = roundTicks(Math.max(1, highest * 100), 3)
  const x = linear(0, axis.days, plot.left, plot.right)
  const percent = linear(0, yTicks.at(-1)!, plot.bottom, plot.top)
  const y = (share: number) => percent(share * 100)
  const levelAt = ({ points }: DrawnCause, day: number) => {
    const at = readAt(points, day, 0)
    return at.kind === 'known' ? y(at.share) : null
  }
  function point(event: PointerEvent<SVGSVGElement>) {
    const at = placeOf(event)
    if (at.x < plot.left - 12 || at.x > plot.right + 8) return
    const day = ((at.x - plot.left) / (plot.right - plot.left)) * axis.days
    toDay(day)
    const near = drawn.flatMap((cause) => {
      const level = levelAt(cause, Math.max(0, day))
      return level === null ? [] : [{ name: cause.name, away: Math.abs(level - at.y) }]
    })
    const nearest = near.sort((a, b) => a.away - b.away)[0]
    mark(nearest !== undefined && nearest.away < nearby ? nearest.name : null)
  }
  const height = plot.bottom + 30
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width={width}
      height={height}
      role="img"
      aria-label={label}
      onPointerMove={point}
      onPointerDown={point}
    >
      <ChartFrame
        plot={plot}
        x={x}
        y={percent}
        yTicks={yTicks}
        xTicks={axis.ticks}
        yTitle="% failed from this cause"
        xTitle={plainUnit ?? (isNarrow ? unitWords[unit] : `${unitWords[unit]} after fitting`)}
      />
      <clipPath id={clip}>
        <rect x={plot.left - 3} y={plot.top - 8} width={plot.right - plot.left + 6} height={plot.bottom - plot.top + 10} />
      </clipPath>
      <g clipPath={`url(#${clip})`}>
        {drawn.map((cause) => (
          <CauseLine key={cause.name} cause={cause} x={x} y={y} />
        ))}
      </g>
      <CursorLine
        x={x}
        top={plot.top - 6}
        bottom={plot.bottom}
        levels={(day) =>
          drawn.flatMap((cause) => {
            const level = levelAt(cause, day)
            return level === null ? [] : [{ y: level, isMarked: cause.isMarked }]
          })
        }
      />
      <CauseLabels drawn={drawn} x={x} y={y} plot={plot} isNarrow={isNarrow} />
    </svg>
  )
})
