import { memo, useId, type PointerEvent } from 'react'
import { ChartFrame } from './chart-frame'
import {
  axisFloor,
  linear,
  percentTicks,
  plainAxis,
  timeAxis,
  visibleRuns,
  type SurvivalPoint,
  type TimeUnit
} from './chart-geometry'
import { CursorLine, placeOf, usePointing } from './chart-reader'
import { readAt } from './chart-reading'
import { curveInks } from './curve-ink'
import { SurvivalCurve } from './survival-curve'
import { AtRiskRows, CurveLabels, nameWidths, rowHeight, type DrawnSeries } from './survival-labels'

export const unitWords: Record<TimeUnit, string> = { year: 'years', month: 'months', day: 'days' }

/** How far down (the band of the one first marked included) and how far to the right the drawn runs go; pointing at a line moves no axis. */
function drawnExtent(drawn: DrawnSeries[], isPlain: boolean) {
  let [lowest, lastDay] = [1, isPlain ? 0 : 1]
  for (const { points, ink } of drawn)
    for (const { weight, steps } of visibleRuns(points))
      for (const step of steps) {
        lowest = Math.min(lowest, ink === curveInks[0] && weight === 'full' ? (step.lower ?? step.survival) : step.survival)
        lastDay = Math.max(lastDay, step.time)
      }
  return { lowest, lastDay }
}

/** The drawing's width and where its axes lie: long names (releases) take room from the plot, never from themselves. */
function layout(drawn: DrawnSeries[], isNarrow: boolean, isSmall: boolean) {
  if (isSmall) {
    const [width, right, bottom] = isNarrow ? [328, 310, 176] : [500, 482, 206]
    return { width, plot: { left: 44, right, top: 26, bottom }, isStacked: false }
  }
  const { label, row } = nameWidths(drawn)
  const isStacked = isNarrow && row > 42
  if (isNarrow) return { width: 328, plot: { left: 58, right: Math.min(262, 312 - label), top: 26, bottom: 300 }, isStacked }
  return {
    width: 804,
    plot: { left: Math.max(64, row + 22), right: Math.min(664, 786 - label), top: 26, bottom: 348 },
    isStacked
  }
}

type DrawingProps = {
  unit: TimeUnit
  plainUnit?: string
  isSmall?: boolean
  drawn: DrawnSeries[]
  label: string
  /** What the share is one of. */
  share: string
  /** The element that says what is drawn at length. */
  descriptionId?: string
  reading: { days: number; words: string }
  isNarrow?: boolean
}

/** Near a line means so many pixels of the drawing. */
const nearby = 12

/** One of the two drawings of a survival figure. */
export const SurvivalDrawing = memo(function SurvivalDrawing({
  drawn,
  label,
  share,
  descriptionId,
  isNarrow,
  isSmall,
  unit,
  plainUnit,
  reading
}: DrawingProps) {
  const { toDay, mark } = usePointing()
  const clip = useId()
  const { width, plot, isStacked } = layout(drawn, isNarrow === true, isSmall === true)
  const extent = drawnExtent(drawn, plainUnit !== undefined)
  const floor = axisFloor(extent.lowest)
  const axis = plainUnit === undefined ? timeAxis(extent.lastDay, unit) : plainAxis(extent.lastDay)
  const x = linear(0, axis.days, plot.left, plot.right)
  const percent = linear(floor, 100, plot.bottom, plot.top)
  const y = (share: number) => percent(share * 100)
  const rowsTop = plot.bottom + 50
  const levelAt = (points: SurvivalPoint[], day: number) => {
    const at = readAt(points, day)
    return at.kind === 'known' ? y(at.share) : at.kind === 'open' ? y((at.low + at.high) / 2) : null
  }
  function point(event: PointerEvent<SVGSVGElement>) {
    const at = placeOf(event)
    if (at.x < plot.left - 12 || at.x > plot.right + 8 || at.y > plot.bottom + 30) return
    const day = ((at.x - plot.left) / (plot.right - plot.left)) * axis.days
    toDay(day)
    const near = drawn.flatMap(({ name, points }) => {
      const level = levelAt(points, Math.max(0, day))
      return level === null ? [] : [{ name, away: Math.abs(level - at.y) }]
    })
    const nearest = near.sort((a, b) => a.away - b.away)[0]
    mark(nearest !== undefined && nearest.away < nearby ? nearest.name : null)
  }
  const height = isSmall ? plot.bottom + 44 : rowsTop + rowHeight(isStacked) * drawn.length + 14
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width={width}
      height={height}
      role="img"
      aria-label={label}
      aria-describedby={descriptionId}
      onPointerMove={point}
      onPointerDown={point}
    >
      <clipPath id={clip}>
        <rect x={plot.left - 3} y={plot.top - 8} width={plot.right - plot.left + 6} height={plot.bottom - plot.top + 8} />
      </clipPath>
      <ChartFrame
        plot={plot}
        x={x}
        y={percent}
        yTicks={percentTicks(floor, isNarrow || isSmall)}
        xTicks={axis.ticks}
        yTitle={`% ${share}`}
        xTitle={plainUnit ?? (isNarrow && !isSmall ? unitWords[unit] : `${unitWords[unit]} after fitting`)}
        isCut={floor > 0}
        isTight={isSmall}
      />
      <g clipPath={`url(#${clip})`}>
        {drawn.map((s) => (
          <SurvivalCurve
            key={s.name}
            points={s.points}
            x={x}
            y={y}
            ink={s.ink}
            isMarked={s.isMarked}
            width={isSmall ? 2.75 : undefined}
          />
        ))}
      </g>
      <CursorLine
        x={x}
        top={plot.top - 6}
        bottom={plot.bottom}
        levels={(day) =>
          drawn.flatMap(({ points, isMarked }) => {
            const level = levelAt(points, day)
            return level === null ? [] : [{ y: Math.min(level, plot.bottom), isMarked }]
          })
        }
      />
      {!isSmall && (
        <>
          <CurveLabels drawn={drawn} x={x} y={y} plot={plot} isNarrow={isNarrow} reading={reading} />
          <AtRiskRows drawn={drawn} x={x} ticks={axis.ticks} top={rowsTop} isStacked={isStacked} />
        </>
      )}
    </svg>
  )
})
