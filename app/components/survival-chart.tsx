import { useId, useMemo, useState } from 'react'
import { describeCurves } from './chart-description'
import type { SurvivalPoint, TimeUnit } from './chart-geometry'
import { ReadingLine, ReadingLines, spokenRow, type ReadingRow } from './chart-lines'
import { ChartReader } from './chart-reader'
import { dayWords, drawnTo, plainWords, pointerStep, readAt, readingText, readingWords, stopsOf } from './chart-reading'
import { curveInks } from './curve-ink'
import { TwoDrawings } from './figure'
import { SurvivalDrawing, unitWords } from './survival-drawing'
import { byName, type DrawnSeries } from './survival-labels'

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
  /** What the share is one of; "still working". */
  share?: string
  /** The confidence of the limits in words. */
  sure?: string
  /** One curve in a small figure: no label, no rows below. */
  isSmall?: boolean
}

const oneYear = { days: 365, words: '1 year' }
export const stillWorking = 'still working'

/**
 * What is drawn, in drawing order: the marked series last, over the others; at most four. Inks stay with their series, whichever is pointed at.
 */
export function drawnSeries(series: readonly SurvivalSeries[], pointed: string | null = null): DrawnSeries[] {
  const marked = series.find((s) => s.marked) ?? series[0]
  if (!marked) return []
  const beside = series.filter((s) => s !== marked).slice(0, 3)
  const inked = [
    ...beside.map((s, i) => ({ ...s, isMarked: false, ink: curveInks[i + 1]! })),
    { ...marked, isMarked: true, ink: curveInks[0]! }
  ]
  if (!inked.some((s) => s.name === pointed)) return inked
  return inked.map((s) => ({ ...s, isMarked: s.name === pointed })).sort((a, b) => Number(a.isMarked) - Number(b.isMarked))
}

const inWords = (drawn: DrawnSeries[], props: SurvivalChartProps) => {
  const { days, words } = props.reading ?? oneYear
  const parts = [...drawn]
    .reverse()
    .map((s) => `${s.name}${s.isMarked && drawn.length > 1 ? ' (marked)' : ''} ${s.says ?? readingText(s.points, days, words)}`)
  const share = props.share ?? stillWorking
  if (props.plainUnit !== undefined) return `Share ${share} by ${props.plainUnit}: ${parts.join('; ')}.`
  return `Share ${share} by ${unitWords[props.unit]} after fitting, as of ${props.asOf}: ${parts.join('; ')}.`
}

/**
 * The survival figure, drawn twice: wide and narrow, with a cursor that reads each line day by day. A table with the same figures belongs
 * beside it.
 */
export function SurvivalChart(props: SurvivalChartProps) {
  const { series, unit, plainUnit, reading = oneYear, grain = null, sure = '95\u00a0%', isSmall } = props
  const share = props.share ?? stillWorking
  const [pointed, setPointed] = useState<string | null>(null)
  const drawn = useMemo(() => drawnSeries(series, pointed), [series, pointed])
  const label = useMemo(
    () => inWords(drawnSeries(series), { series, unit, plainUnit, share, reading: props.reading, asOf: props.asOf }),
    [series, unit, plainUnit, share, props.reading, props.asOf]
  )
  const marked = drawn.at(-1)
  const last = Math.max(0, ...drawn.map((s) => drawnTo(s.points)))
  const stops = useMemo(() => stopsOf(marked?.points ?? [], last, reading.days, grain), [marked, last, reading.days, grain])
  const wordsOf = (day: number) => (plainUnit === undefined ? dayWords(day) : plainWords(day, plainUnit))
  const id = useId()
  const descriptionId = last > 0 ? id : undefined
  const drawing = { drawn, label, share, descriptionId, unit, plainUnit, reading, isSmall }
  const drawings = <TwoDrawings wide={<SurvivalDrawing {...drawing} />} narrow={<SurvivalDrawing {...drawing} isNarrow />} />
  if (marked === undefined || last === 0) return drawings
  const idle = Math.min(reading.days, last)
  const named = byName(drawn)
  const rowsAt = (day: number): ReadingRow[] =>
    named.map(({ name, points, isMarked, ink }) => ({
      name,
      isMarked: isMarked && drawn.length > 1,
      textClass: ink.textClass,
      ...readingWords(readAt(points, day))
    }))
  return (
    <ChartReader
      label={isSmall ? `Read the curve of ${marked.name}` : drawn.length > 1 ? 'Read the curves' : 'Read the curve'}
      stops={stops}
      step={pointerStep(last, grain, plainUnit !== undefined)}
      wordsOf={wordsOf}
      spoken={(day) =>
        [...rowsAt(day)]
          .sort((a, b) => Number(b.isMarked) - Number(a.isMarked))
          .map((row) => spokenRow(row, sure))
          .join('; ')
      }
      names={named.map((s) => s.name)}
      marked={marked.name}
      onMark={setPointed}
      idle={idle}
      lines={(day) => {
        const at = `${share[0]!.toUpperCase()}${share.slice(1)} ${plainUnit === undefined ? 'on' : 'at'} ${wordsOf(day ?? idle)}`
        const rows = rowsAt(day ?? idle)
        return isSmall ? (
          <ReadingLine head={`${at}:`} row={rows[0]!} />
        ) : (
          <ReadingLines head={`${at}, ${sure} interval:`} rows={rows} />
        )
      }}
      isCompact={isSmall}
    >
      {drawings}
      <p className="vh" id={descriptionId}>
        {describeCurves(drawnSeries(series).reverse(), { sure, wordsOf, grain, unit: plainUnit ?? 'days' })}
      </p>
    </ChartReader>
  )
}
