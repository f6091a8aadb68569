import { memo, useId, useMemo, type PointerEvent } from 'react'
import {
  axisFloor,
  faintUnder,
  linear,
  timeAxis,
  visibleRuns,
  type Scale,
  type SurvivalPoint,
  type TimeUnit
} from './chart-geometry'
import { curveInks } from './curve-ink'
import { knownPath } from './curve-paths'
import { TwoDrawings } from './figure'
import { spokenRow } from './chart-lines'
import { ChartReader, CursorLine, placeOf, useCursorDay, usePointing } from './chart-reader'
import { dayWords, drawnTo, pointerStep, readAt, readingText, readingWords, stopsOf } from './chart-reading'
import { SurvivalCurve } from './survival-curve'

export type Strip = {
  name: string
  points: SurvivalPoint[]
  /** Beside the name: "23 fitted, 7 failed". */
  counts: string
}

export type SurvivalStripsProps = {
  strips: Strip[]
  unit: TimeUnit
  /** Percent at the foot of all strips; without it the tens under the lowest curve, at most 60. */
  floor?: number
  reading?: { days: number; words: string }
  /** The points are thinned: exact at its multiples (`drawnCurves`). */
  grain?: number | null
  /** What the share is one of; "still working". */
  share?: string
}

const oneYear = { days: 365, words: '1 year' }
const shortUnit: Record<TimeUnit, string> = { year: 'y', month: 'm', day: 'd' }

/** Small multiples: one revision each with band and ticks, the others as hairlines, one scale for all, one cursor over all. */
export function SurvivalStrips({
  strips,
  unit,
  floor,
  reading = oneYear,
  grain = null,
  share = 'still working'
}: SurvivalStripsProps) {
  const id = useId()
  const lowest = Math.min(
    1,
    ...strips.flatMap((s) => visibleRuns(s.points).flatMap((run) => run.steps.map((step) => step.survival)))
  )
  const last = Math.max(0, ...strips.map((s) => drawnTo(s.points)))
  const stops = useMemo(
    () => [...new Set(strips.flatMap((s) => stopsOf(s.points, last, reading.days, grain)))].sort((a, b) => a - b),
    [strips, last, reading.days, grain]
  )
  const shared = { strips, unit, reading, floor: floor ?? Math.min(60, axisFloor(lowest)), lastDay: Math.max(1, last) }
  const idle = Math.min(reading.days, last)
  const grid = (
    <div className="strips">
      {strips.map((strip, i) => (
        <div key={strip.name}>
          <p className="sh">
            <b>{strip.name}</b> <span className="soft nw">{strip.counts}</span>
          </p>
          <TwoDrawings
            wide={<StripDrawing {...shared} strip={strip} hairsId={`${id}wide`} isFirst={i === 0} />}
            narrow={<StripDrawing {...shared} strip={strip} hairsId={`${id}narrow`} isFirst={i === 0} isNarrow />}
          />
          {last > 0 && <StripLine strip={strip} idle={idle} />}
        </div>
      ))}
    </div>
  )
  if (last === 0) return grid
  return (
    <ChartReader
      label="Read the strips"
      stops={stops}
      step={pointerStep(last, grain, false)}
      wordsOf={dayWords}
      spoken={(day) =>
        strips.map(({ name, points }) => spokenRow({ name, ...readingWords(readAt(points, day)) }, '95\u00a0%')).join('; ')
      }
      names={noNames}
      marked=""
      onMark={doNothing}
      idle={idle}
      lines={(day) => (
        <p className="chart-lines soft">
          Under each strip: {share} on {dayWords(day ?? idle)}, 95&nbsp;% interval.
        </p>
      )}
      isWide
    >
      {grid}
    </ChartReader>
  )
}

/** Where a strip's line ends, in words. */
function atEnd({ points }: Strip): string {
  const end = drawnTo(points)
  if (end === 0) return ', not drawn'
  const { share, interval } = readingWords(readAt(points, end))
  return `; the line goes to ${dayWords(end)}, ${share}${interval === '' ? '' : `, ${interval}`}`
}

const noNames: string[] = []
const doNothing = () => undefined

/** A strip's figures at the cursor's day. */
function StripLine({ strip, idle }: { strip: Strip; idle: number }) {
  const { share, interval, followed } = readingWords(readAt(strip.points, useCursorDay() ?? idle))
  return (
    <p className="strip-line">
      <b>{share}</b>
      {interval && `, ${interval}`}
      <span className="soft">{followed || '\u00a0'}</span>
    </p>
  )
}

/** All curves as hairlines; the strip's own lies under its heavy line. */
const hairlines = (strips: readonly Strip[], { x, y }: { x: Scale; y: Scale }) =>
  strips
    .flatMap((strip) => visibleRuns(strip.points))
    .map((run) => knownPath(run, { x, y }))
    .join('')

type StripProps = Required<Omit<SurvivalStripsProps, 'grain' | 'share'>> & {
  strip: Strip
  lastDay: number
  isNarrow?: boolean
  /** The hairlines are written once a size, in its first strip, and used again in the others. */
  hairsId: string
  isFirst: boolean
}

const StripDrawing = memo(function StripDrawing(props: StripProps) {
  const { strips, strip, unit, floor, reading, lastDay, isNarrow, hairsId, isFirst } = props
  const { toDay } = usePointing()
  const clip = useId()
  const [width, bottom, right] = isNarrow ? [156, 100, 152] : [252, 132, 248]
  const axis = timeAxis(lastDay, unit)
  const x = linear(0, axis.days, 28, right)
  const y = linear(floor / 100, 1, bottom, 10)
  const point = (event: PointerEvent<SVGSVGElement>) => toDay(((placeOf(event).x - 28) / (right - 28)) * axis.days)
  const isSparse = !strip.points.some((p) => p.atRisk >= faintUnder)
  return (
    <svg
      onPointerMove={point}
      onPointerDown={point}
      viewBox={`0 0 ${width} ${bottom + 24}`}
      width={width}
      height={bottom + 24}
      role="img"
      aria-label={`${strip.name}: ${isSparse ? 'too few for a band, ' : ''}${readingText(strip.points, reading.days, reading.words)}${atEnd(strip)}`}
    >
      <clipPath id={clip}>
        <rect x="26" y="4" width={right - 26} height={bottom - 4} />
      </clipPath>
      {[0, 1, 2, 3, 4].map((i) => {
        const level = floor + ((100 - floor) / 4) * i
        return (
          <g key={i}>
            <path d={`M28 ${y(level / 100)}H${right}`} stroke="var(--color-hair)" />
            {i % 2 === 0 && (
              <text x="23" y={y(level / 100) + 5} textAnchor="end" className="t-soft">
                {level}
              </text>
            )}
          </g>
        )
      })}
      {floor > 0 && <path className="ln" strokeWidth="1.25" d={`M24 ${bottom - 6}l8 -4M24 ${bottom - 10}l8 -4`} />}
      {axis.ticks.map(({ label, days }, i) => (
        <g key={label}>
          <path className="ln" strokeWidth="1" d={`M${x(days)} ${bottom}v5`} />
          <text x={x(days)} y={bottom + 20} textAnchor={i === axis.ticks.length - 1 ? 'end' : 'middle'} className="t-soft">
            {i === axis.ticks.length - 1 ? `${label} ${shortUnit[unit]}` : label}
          </text>
        </g>
      ))}
      <g clipPath={`url(#${clip})`}>
        <g fill="none" stroke="var(--color-edge)" strokeWidth=".75" opacity=".75">
          {isFirst ? <path id={hairsId} d={hairlines(strips, { x, y })} /> : <use href={`#${hairsId}`} />}
        </g>
        <SurvivalCurve points={strip.points} x={x} y={y} ink={curveInks[0]!} isMarked width={2.25} tick={7} />
      </g>
      <CursorLine
        x={x}
        top={4}
        bottom={bottom}
        levels={(day) => {
          const at = readAt(strip.points, day)
          return at.kind === 'known' ? [{ y: y(at.share), isMarked: false }] : []
        }}
      />
    </svg>
  )
})
