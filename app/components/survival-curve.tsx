import { useId } from 'react'
import { censorTicks, visibleRuns, type Run, type SurvivalPoint } from './chart-geometry'
import type { CurveInk } from './curve-ink'
import { bandPaths, boxPath, knownPath, openBoxes, slantPath, type Places } from './curve-paths'

export type CurveProps = Places & {
  points: readonly SurvivalPoint[]
  ink: CurveInk
  /** With band and ticks, and heavy. */
  isMarked?: boolean
  width?: number
  /** Length of a tick. */
  tick?: number
}

/**
 * One survival curve: faint under 10 at risk, gone under 5; marked it has its 95 % band and ticks for last words. Where S is not determined it is
 * a hatched box, a thin slant on those not marked.
 */
export function SurvivalCurve({ points, x, y, ink, isMarked, width = isMarked ? 4 : 2, tick = 12 }: CurveProps) {
  const runs = visibleRuns(points)
  const full = runs.filter((run) => run.weight === 'full')
  const places = { x, y }
  return (
    <g fill="none" data-curve={isMarked ? 'marked' : 'other'}>
      {isMarked && full.map((run, i) => <Band key={i} {...bandPaths(run, places)} stroke={ink.stroke} />)}
      {isMarked &&
        width >= 2.5 &&
        full.map((run, i) => (
          <path key={i} d={knownPath(run, places)} stroke="var(--color-paper)" strokeWidth={width + 3} opacity=".7" />
        ))}
      {runs.map((run, i) => (
        <g key={i} opacity={run.weight === 'full' ? undefined : '.65'}>
          <Open run={run} places={places} ink={ink} isMarked={isMarked} />
          <path
            data-part={run.weight}
            d={knownPath(run, places)}
            stroke={ink.stroke}
            strokeWidth={run.weight === 'full' ? width : isMarked ? Math.min(1.75, width * 0.6) : 1.1}
            strokeDasharray={ink.dash}
          />
        </g>
      ))}
      {isMarked && tick > 0 && (
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

const Band = ({ area, edges, stroke }: { area: string; edges: string; stroke: string }) => (
  <g>
    {area !== '' && <path data-part="band" d={area} fill={stroke} opacity=".13" />}
    <path d={edges} stroke={stroke} strokeWidth=".75" opacity=".55" />
  </g>
)

/** Hatched as everywhere where something lies between two ends and nobody knows where. */
function Open({ run, places, ink, isMarked }: { run: Run; places: Places; ink: CurveInk; isMarked?: boolean }) {
  const hatch = useId()
  const boxes = openBoxes(run, places)
  if (boxes.length === 0) return null
  if (!isMarked)
    return <path data-part="open" d={slantPath(boxes)} stroke={ink.stroke} strokeWidth="1.1" strokeDasharray={ink.dash} />
  return (
    <>
      <pattern id={hatch} width="4" height="4" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
        <path d="M0 0V4" stroke={ink.stroke} strokeWidth="1.6" />
      </pattern>
      <path data-part="open" d={boxPath(boxes)} fill={`url(#${hatch})`} stroke={ink.stroke} />
    </>
  )
}
