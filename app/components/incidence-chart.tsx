import { useMemo, useState } from 'react'
import type { TimeUnit } from './chart-geometry'
import { lastOf, shareText, type DrawnCause } from './cause-lines'
import { ReadingLines, spokenRow, type ReadingRow } from './chart-lines'
import { ChartReader } from './chart-reader'
import { dayWords, drawnTo, plainWords, pointerStep, readAt, stopsOf, type Reading } from './chart-reading'
import { curveInks } from './curve-ink'
import { TwoDrawings } from './figure'
import { IncidenceDrawing } from './incidence-drawing'

/** Share failed from one cause, over days. */
export type CauseCurve = {
  name: string
  points: {
    time: number
    estimate: number
    lower?: number | null
    upper?: number | null
    /** Faint under 10, gone under 5; without it all is drawn. */
    atRisk?: number
    since?: number
  }[]
}

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

const most = curveInks.length
const oneYear = { days: 365, words: '1 year' }

/** In drawing order: the one with the band last. Inks stay with their causes, whichever is pointed at. */
export function drawnCauses(causes: readonly CauseCurve[], pointed: string | null = null): DrawnCause[] {
  const shown = causes.slice(0, most)
  const marked = shown.some((cause) => cause.name === pointed) ? pointed : shown[0]?.name
  return shown
    .map(({ name, points }, i) => ({
      name,
      isMarked: name === marked,
      ink: curveInks[i]!,
      points: points.map(({ time, estimate, lower = null, upper = null, atRisk = Infinity, since }) => ({
        time,
        since,
        survival: estimate,
        lower,
        upper,
        atRisk
      }))
    }))
    .sort((a, b) => Number(a.isMarked) - Number(b.isMarked))
}

/** Cumulative incidence by cause; causes compete, so the lines add up to the share that failed. Read day by day like the survival figure. */
export function IncidenceChart(props: IncidenceChartProps) {
  const { causes, unit, plainUnit, reading = oneYear, grain = null, sure = '95\u00a0%' } = props
  const [pointed, setPointed] = useState<string | null>(null)
  const drawn = useMemo(() => drawnCauses(causes, pointed), [causes, pointed])
  const last = Math.max(0, ...drawn.map((c) => drawnTo(c.points)))
  const marked = drawn.at(-1)
  const stops = useMemo(() => stopsOf(marked?.points ?? [], last, reading.days, grain, 0), [marked, last, reading.days, grain])
  const names = useMemo(() => causes.slice(0, most).map((cause) => cause.name), [causes])
  const label = useMemo(() => inWords(drawnCauses(causes)), [causes])
  const drawing = { drawn, label, unit, plainUnit }
  const drawings = <TwoDrawings wide={<IncidenceDrawing {...drawing} />} narrow={<IncidenceDrawing {...drawing} isNarrow />} />
  if (marked === undefined || last === 0) return drawings
  const wordsOf = (day: number) => (plainUnit === undefined ? dayWords(day) : plainWords(day, plainUnit))
  const idle = Math.min(reading.days, last)
  const rowsAt = (day: number): ReadingRow[] => {
    const rows = names.map((name) => {
      const { points, isMarked, ink } = drawn.find((cause) => cause.name === name)!
      return { name, isMarked: isMarked && drawn.length > 1, textClass: ink.textClass, ...failedWords(readAt(points, day, 0)) }
    })
    // all causes have one risk set: where their rows differ, they are rows of failures only and do not tell it
    const isTold = rows.every(({ followed }) => followed === rows[0]!.followed)
    return isTold ? rows : rows.map((row) => ({ ...row, followed: '' }))
  }
  return (
    <ChartReader
      label="Read the shares failed, by cause"
      stops={stops}
      step={pointerStep(last, grain, plainUnit !== undefined)}
      wordsOf={wordsOf}
      spoken={(day) =>
        rowsAt(day)
          .map((row) => spokenRow(row, sure))
          .join('; ')
      }
      names={names}
      marked={marked.name}
      onMark={setPointed}
      idle={idle}
      lines={(day) => <ReadingLines head={`Failed by ${wordsOf(day ?? idle)}, ${sure} interval:`} rows={rowsAt(day ?? idle)} />}
    >
      {drawings}
    </ChartReader>
  )
}

/** The share failed with its interval; limits are rounded away from the claim. */
function failedWords(reading: Reading): Pick<ReadingRow, 'share' | 'interval' | 'followed'> {
  if (reading.kind === 'ended') return { share: 'nobody followed so long', interval: '', followed: '' }
  const followed = Number.isFinite(reading.atRisk) ? `${reading.atRisk} followed` : ''
  if (reading.kind === 'few') return { share: 'too few to say', interval: '', followed }
  const { lower, upper } = reading
  const interval =
    lower === null || upper === null
      ? ''
      : `${(Math.floor(lower * 1000 + 1e-9) / 10).toFixed(1)} to ${(Math.ceil(upper * 1000 - 1e-9) / 10).toFixed(1)}`
  if (reading.kind === 'open')
    return { share: `between ${shareText(reading.low)} and ${shareText(reading.high)} %`, interval, followed }
  if (reading.share === 0)
    return { share: 'none', interval: upper === null ? '' : `under ${interval.split(' to ')[1]}`, followed }
  return { share: `${shareText(reading.share)} %`, interval, followed }
}

function inWords(drawn: readonly DrawnCause[]): string {
  const parts = [...drawn].reverse().map((cause) => {
    const end = lastOf(cause)
    return `${cause.name} ${end === undefined ? 'too few to draw' : `${shareText(end.survival)} percent`}`
  })
  return `Share failed by cause: ${parts.join(', ')}`
}
