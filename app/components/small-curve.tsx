import { linear, type SurvivalPoint } from './chart-geometry'
import { SurvivalCurve } from './survival-curve'
import { curveInks } from './curve-ink'

export type SmallCurveProps = {
  points: readonly SurvivalPoint[]
  /** The same for all that stand in one list: the day at the right edge, and the percent at the foot. */
  lastDay: number
  floor: number
  /** Where the tick stands. */
  tickDay?: number
}

const [width, height, left, right, top, bottom] = [120, 36, 1, 119, 3, 30]

/** A curve for a table's cell or a list's row, in ink, with its band, on a scale common to the rows. The row's own figures are its text. */
export function SmallCurve({ points, lastDay, floor, tickDay = 365 }: SmallCurveProps) {
  const x = linear(0, Math.max(1, lastDay), left, right)
  const y = linear(floor / 100, 1, bottom, top)
  const low = (share: number) => Math.min(bottom, y(share))
  return (
    <svg className="smc" viewBox={`0 0 ${width} ${height}`} width={width} height={height} aria-hidden="true">
      <path d={`M${left} ${top}H${right}`} stroke="var(--color-hair)" />
      <path className="ln" d={`M${left} ${top}V${bottom + 0.5}H${right}`} />
      {tickDay <= lastDay && <path className="ln" d={`M${Math.floor(x(tickDay)) + 0.5} ${bottom}v5`} />}
      <SurvivalCurve
        points={points}
        x={x}
        y={low}
        ink={{ ...curveInks[0]!, stroke: 'var(--color-ink)' }}
        isMarked
        width={1.75}
        tick={0}
      />
    </svg>
  )
}
