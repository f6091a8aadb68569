import { censorTicks, stepArea, stepPath, visibleRuns, type Run, type Scale, type SurvivalPoint } from './chart-geometry'
import type { CurveInk } from './curve-ink'

type Places = { x: Scale; y: Scale }

const linePath = (run: Run, { x, y }: Places) => stepPath(run.steps.map((s) => [x(s.time), y(s.survival)]))

/** The stretches of a run that have both limits. */
function bandPlaces(run: Run, { x, y }: Places) {
  const stretches: [number, number, number][][] = [[]]
  for (const { time, lower, upper } of run.steps) {
    if (lower !== null && upper !== null) stretches.at(-1)!.push([x(time), y(upper), y(lower)])
    else if (stretches.at(-1)!.length > 0) stretches.push([])
  }
  // the limits after the last point belong to no stretch that is drawn
  return stretches
    .filter((s) => s.length > 1)
    .map((s) => [...s.slice(0, -1), [s.at(-1)![0], s.at(-2)![1], s.at(-2)![2]] as [number, number, number]])
}

export type CurveProps = Places & {
  points: readonly SurvivalPoint[]
  ink: CurveInk
  /** With band and ticks, and heavy. */
  isMarked?: boolean
  width?: number
  /** Length of a tick. */
  tick?: number
}

/** One survival curve: faint under 10 at risk, gone under 5; marked it has its 95 % band and ticks for last words. */
export function SurvivalCurve({ points, x, y, ink, isMarked, width = isMarked ? 4 : 2, tick = 12 }: CurveProps) {
  const runs = visibleRuns(points)
  const full = runs.filter((run) => run.weight === 'full')
  const isHeavy = width >= 2.5
  return (
    <g fill="none" data-curve={isMarked ? 'marked' : 'other'}>
      {isMarked &&
        full
          .flatMap((run) => bandPlaces(run, { x, y }))
          .map((places, i) => (
            <g key={i}>
              <path data-part="band" d={stepArea(places)} fill={ink.stroke} opacity=".13" />
              <path
                d={stepPath(places.map(([at, high]) => [at, high])) + stepPath(places.map(([at, , low]) => [at, low]))}
                stroke={ink.stroke}
                strokeWidth=".75"
                opacity=".55"
              />
            </g>
          ))}
      {isMarked &&
        isHeavy &&
        full.map((run, i) => (
          <path key={i} d={linePath(run, { x, y })} stroke="var(--color-paper)" strokeWidth={width + 3} opacity=".7" />
        ))}
      {runs.map((run, i) => (
        <path
          key={i}
          data-part={run.weight}
          d={linePath(run, { x, y })}
          stroke={ink.stroke}
          strokeWidth={run.weight === 'full' ? width : isMarked ? 1.75 : 1.1}
          opacity={run.weight === 'full' ? undefined : '.65'}
          strokeDasharray={ink.dash}
        />
      ))}
      {isMarked && (
        <path
          data-part="ticks"
          d={censorTicks(points, x, y)
            .map((at) => `M${at.x} ${Math.round((at.y - tick / 2) * 10) / 10}v${tick}`)
            .join('')}
          stroke={ink.stroke}
          strokeWidth="1"
        />
      )}
    </g>
  )
}
