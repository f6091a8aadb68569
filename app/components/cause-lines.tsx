import type { Plot } from './chart-frame'
import { spreadLabels, visibleRuns, type Scale } from './chart-geometry'
import { usePointing } from './chart-reader'
import type { ReadPoint } from './chart-reading'
import type { CurveInk } from './curve-ink'
import { bandPaths, knownPath } from './curve-paths'

/** `survival` of a point is here the share failed by the cause. */
export type DrawnCause = { name: string; points: ReadPoint[]; isMarked: boolean; ink: CurveInk }

/** The end of its line. */
export const lastOf = ({ points }: DrawnCause) => visibleRuns(points, 0).at(-1)?.steps.at(-1)

export const shareText = (share: number) => (share * 100).toFixed(1)

/** One cause's line, marked with its band; faint under 10 at risk, gone under 5. */
export function CauseLine({ cause: { points, isMarked, ink }, x, y }: { cause: DrawnCause; x: Scale; y: Scale }) {
  const runs = visibleRuns(points, 0)
  const full = runs.filter((run) => run.weight === 'full')
  return (
    <g fill="none" data-curve={isMarked ? 'marked' : 'other'}>
      {isMarked &&
        full.map((run, i) => {
          const { area, edges } = bandPaths(run, { x, y })
          return (
            <g key={i} stroke={ink.stroke}>
              {area !== '' && <path data-part="band" d={area} fill={ink.stroke} stroke="none" opacity=".13" />}
              <path d={edges} strokeWidth=".75" opacity=".55" />
            </g>
          )
        })}
      {runs.map((run, i) => (
        <path
          key={i}
          data-part={run.weight}
          d={knownPath(run, { x, y })}
          stroke={ink.stroke}
          strokeWidth={run.weight === 'full' ? (isMarked ? 3.5 : 2.25) : 1.25}
          strokeDasharray={ink.dash}
          opacity={run.weight === 'full' ? undefined : '.65'}
        />
      ))}
    </g>
  )
}

type LabelProps = { drawn: DrawnCause[]; x: Scale; y: Scale; plot: Plot; isNarrow?: boolean }

/** Each cause's name and share at its line's end, with a leader; moved apart where they would meet. */
export function CauseLabels({ drawn, x, y, plot, isNarrow }: LabelProps) {
  const { mark } = usePointing()
  const ended = drawn.flatMap((cause) => {
    const end = lastOf(cause)
    return end ? [{ cause, share: end.survival, endX: x(end.time), endY: y(end.survival) }] : []
  })
  const places = spreadLabels(
    ended.map((end) => end.endY),
    isNarrow ? 37 : 20,
    plot.top + 4,
    plot.bottom - (isNarrow ? 20 : 4)
  )
  return ended.map(({ cause: { name, ink, isMarked }, share, endX, endY }, i) => (
    <g key={name} onPointerEnter={() => mark(name)}>
      <path
        d={`M${endX + 3} ${endY}H${Math.max(endX + 3, plot.right + 2)}L${plot.right + 10} ${places[i]}h6`}
        stroke="var(--color-edge)"
        fill="none"
      />
      <path
        d={`M${plot.right + 18} ${places[i]}h22`}
        stroke={ink.stroke}
        strokeWidth={isMarked ? 3.5 : 2.25}
        strokeDasharray={ink.dash}
      />
      <text x={plot.right + 46} y={places[i]! + 5} className={`${isMarked ? 'font-bold' : 't-b'} ${ink.textClass}`}>
        {isNarrow ? (
          <>
            <tspan>{name}</tspan>
            <tspan x={plot.right + 46} dy="16">
              {shareText(share)} %
            </tspan>
          </>
        ) : (
          `${name} ${shareText(share)} %`
        )}
      </text>
    </g>
  ))
}
