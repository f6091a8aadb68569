import { ChartFrame } from './chart-frame'
import { linear, plainAxis, roundTicks, spreadLabels, stepPath, timeAxis, type TimeUnit } from './chart-geometry'
import { curveInks } from './curve-ink'
import { TwoDrawings } from './figure'

/** Share failed from one cause, over days. */
export type CauseCurve = {
  name: string
  points: {
    time: number
    estimate: number
    standardError?: number
    lower?: number | null
    upper?: number | null
    /** Faint under 10, gone under 5; without it all is drawn. */
    atRisk?: number
    since?: number
  }[]
}

/** `plainUnit` as in the survival chart. */
export type IncidenceChartProps = {
  /** At most six are drawn, in this order; the first carries its band. */
  causes: CauseCurve[]
  unit: TimeUnit
  plainUnit?: string
  /** As in the survival chart. */
  reading?: { days: number; words: string }
  grain?: number | null
  sure?: string
}

const unitWords: Record<TimeUnit, string> = { year: 'years', month: 'months', day: 'days' }
const shareText = (share: number) => (share * 100).toFixed(1)
const lastOf = (cause: CauseCurve) => cause.points.at(-1)?.estimate ?? 0

/** Cumulative incidence by cause; causes compete, so the lines add up to the share that failed. At most four. */
export function IncidenceChart({ causes, ...rest }: IncidenceChartProps) {
  const drawn = causes.slice(0, 4)
  return <TwoDrawings wide={<Drawing causes={drawn} {...rest} />} narrow={<Drawing causes={drawn} {...rest} isNarrow />} />
}

function Drawing({ causes, unit, plainUnit, isNarrow }: IncidenceChartProps & { isNarrow?: boolean }) {
  const [width, plot] = isNarrow
    ? [328, { left: 44, right: 196, top: 26, bottom: 250 }]
    : [804, { left: 44, right: 614, top: 26, bottom: 270 }]
  const last = Math.max(plainUnit === undefined ? 1 : 0, ...causes.map((c) => c.points.at(-1)?.time ?? 0))
  const axis = plainUnit === undefined ? timeAxis(last, unit) : plainAxis(last)
  const yTicks = roundTicks(Math.max(1, ...causes.map((c) => lastOf(c) * 100)), 3)
  const x = linear(0, axis.days, plot.left, plot.right)
  const y = linear(0, yTicks.at(-1)!, plot.bottom, plot.top)
  const ends = causes.map((c) => y(lastOf(c) * 100))
  const gap = isNarrow ? 36 : 20
  const places = spreadLabels(ends, gap, plot.top + 4, plot.bottom - 8)
  const height = plot.bottom + 30
  const label = `Share failed by cause: ${causes.map((c) => `${c.name} ${shareText(lastOf(c))} percent`).join(', ')}`
  return (
    <svg viewBox={`0 0 ${width} ${height}`} width={width} height={height} role="img" aria-label={label}>
      <ChartFrame
        plot={plot}
        x={x}
        y={y}
        yTicks={yTicks}
        xTicks={axis.ticks}
        yTitle="% failed from this cause"
        xTitle={plainUnit ?? (isNarrow ? unitWords[unit] : `${unitWords[unit]} after fitting`)}
      />
      {causes.map((cause, i) => {
        const ink = curveInks[i]!
        const steps: [number, number][] = [
          [x(0), y(0)],
          ...cause.points.map((p): [number, number] => [x(p.time), y(p.estimate * 100)])
        ]
        return (
          <g key={cause.name}>
            <path d={stepPath(steps)} fill="none" stroke={ink.stroke} strokeWidth="2.5" strokeDasharray={ink.dash} />
            <path
              d={`M${steps.at(-1)![0] + 3} ${ends[i]}H${Math.max(steps.at(-1)![0] + 3, plot.right + 2)}L${plot.right + 10} ${places[i]}h6`}
              stroke="var(--color-edge)"
              fill="none"
            />
            <text x={plot.right + 20} y={places[i]! + 5} className={`t-b ${ink.textClass}`}>
              {isNarrow ? (
                <>
                  <tspan>{cause.name}</tspan>
                  <tspan x={plot.right + 20} dy="16">
                    {shareText(lastOf(cause))} %
                  </tspan>
                </>
              ) : (
                `${cause.name} ${shareText(lastOf(cause))} %`
              )}
            </text>
          </g>
        )
      })}
    </svg>
  )
}
