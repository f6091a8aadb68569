import { useId } from 'react'
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
import { curveInks } from './curve-ink'
import { TwoDrawings } from './figure'
import { readingText } from './percent-text'
import { AtRiskRows, CurveLabels, nameWidths, rowHeight, type DrawnSeries } from './survival-labels'
import { SurvivalCurve } from './survival-curve'

export type SurvivalSeries = {
  name: string
  points: SurvivalPoint[]
  marked: boolean
  /** What stands under its name, "93 % at 1 year"; else it is read from the points. */
  says?: string
}

export type SurvivalChartProps = {
  /** One marked, at most three beside it; further ones are left out. */
  series: SurvivalSeries[]
  /** In what the time axis is read; see `unitFor`. */
  unit: TimeUnit
  /** Times of anybody's own data are counted in this unit ("weeks"), from wherever that data starts; `unit` and `asOf` then say nothing. */
  plainUnit?: string
  /** The day up to which reports are counted. */
  asOf?: string
  /** Where the figure at a line's end is read. */
  reading?: { days: number; words: string }
  /** The points are thinned: exact at its multiples (`drawnCurves`). */
  grain?: number | null
  /** The confidence of the limits in words. */
  sure?: string
  /** One curve in a small figure: no label, no rows below. */
  isSmall?: boolean
}

const oneYear = { days: 365, words: '1 year' }
const unitWords: Record<TimeUnit, string> = { year: 'years', month: 'months', day: 'days' }

/** What is drawn, in drawing order: the marked series last, over the others; at most four. */
export function drawnSeries(series: readonly SurvivalSeries[]): DrawnSeries[] {
  const marked = series.find((s) => s.marked) ?? series[0]
  if (!marked) return []
  const beside = series.filter((s) => s !== marked).slice(0, 3)
  return [
    ...beside.map((s, i) => ({ ...s, isMarked: false, ink: curveInks[i + 1]! })),
    { ...marked, isMarked: true, ink: curveInks[0]! }
  ]
}

const inWords = (drawn: DrawnSeries[], props: SurvivalChartProps) => {
  const { days, words } = props.reading ?? oneYear
  const parts = [...drawn]
    .reverse()
    .map((s) => `${s.name}${s.isMarked && drawn.length > 1 ? ' (marked)' : ''} ${readingText(s.points, days, words)}`)
  if (props.plainUnit !== undefined) return `Share still working by ${props.plainUnit}: ${parts.join('; ')}.`
  return `Share still working by ${unitWords[props.unit]} after fitting, as of ${props.asOf}: ${parts.join('; ')}.`
}

/** How far down (the marked band included) and how far to the right the drawn runs go. */
function drawnExtent(drawn: DrawnSeries[], isPlain: boolean) {
  let [lowest, lastDay] = [1, isPlain ? 0 : 1]
  for (const { points, isMarked } of drawn)
    for (const { weight, steps } of visibleRuns(points))
      for (const step of steps) {
        lowest = Math.min(lowest, isMarked && weight === 'full' ? (step.lower ?? step.survival) : step.survival)
        lastDay = Math.max(lastDay, step.time)
      }
  return { lowest, lastDay }
}

/** The survival figure, drawn twice: wide and narrow. A table with the same figures belongs beside it. */
export function SurvivalChart(props: SurvivalChartProps) {
  const drawn = drawnSeries(props.series)
  return <TwoDrawings wide={<Drawing {...props} drawn={drawn} />} narrow={<Drawing {...props} drawn={drawn} isNarrow />} />
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

type DrawingProps = SurvivalChartProps & { drawn: DrawnSeries[]; isNarrow?: boolean }

function Drawing({ drawn, isNarrow, ...props }: DrawingProps) {
  const { isSmall, unit, plainUnit, reading = oneYear } = props
  const clip = useId()
  const { width, plot, isStacked } = layout(drawn, isNarrow === true, isSmall === true)
  const extent = drawnExtent(drawn, plainUnit !== undefined)
  const floor = axisFloor(extent.lowest)
  const axis = plainUnit === undefined ? timeAxis(extent.lastDay, unit) : plainAxis(extent.lastDay)
  const x = linear(0, axis.days, plot.left, plot.right)
  const percent = linear(floor, 100, plot.bottom, plot.top)
  const y = (share: number) => percent(share * 100)
  const rowsTop = plot.bottom + 50
  const height = isSmall ? plot.bottom + 44 : rowsTop + rowHeight(isStacked) * drawn.length + 14
  return (
    <svg viewBox={`0 0 ${width} ${height}`} width={width} height={height} role="img" aria-label={inWords(drawn, props)}>
      <clipPath id={clip}>
        <rect x={plot.left - 3} y={plot.top - 8} width={plot.right - plot.left + 6} height={plot.bottom - plot.top + 8} />
      </clipPath>
      <ChartFrame
        plot={plot}
        x={x}
        y={percent}
        yTicks={percentTicks(floor, isNarrow || isSmall)}
        xTicks={axis.ticks}
        yTitle="% still working"
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
      {!isSmall && (
        <>
          <CurveLabels drawn={drawn} x={x} y={y} plot={plot} isNarrow={isNarrow} reading={reading} />
          <AtRiskRows drawn={drawn} x={x} ticks={axis.ticks} top={rowsTop} isStacked={isStacked} />
        </>
      )}
    </svg>
  )
}
