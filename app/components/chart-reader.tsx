import {
  createContext,
  useContext,
  useId,
  useMemo,
  useRef,
  useState,
  useSyncExternalStore,
  type KeyboardEvent,
  type PointerEvent,
  type ReactNode
} from 'react'
import { nextStop } from './chart-reading'

/** The day under the cursor; null while nobody reads. */
const DayContext = createContext<number | null>(null)
type Pointing = { toDay: (day: number) => void; mark: (name: string | null) => void }
const PointingContext = createContext<Pointing>({ toDay: () => undefined, mark: () => undefined })

export const useCursorDay = () => useContext(DayContext)
/** For a drawing: moves the cursor to a day, or marks a line. */
export const usePointing = () => useContext(PointingContext)

const never = () => () => undefined
/** Whether scripts have taken over: what needs them is offered from then on. */
const useHasScripts = () =>
  useSyncExternalStore(
    never,
    () => true,
    () => false
  )

export type ChartReaderProps = {
  /** What the cursor reads: "Read the curves". */
  label: string
  /** Where the keys stop, rising. */
  stops: readonly number[]
  /** How finely a pointer reads. */
  step: number
  /** The day in words. */
  wordsOf: (day: number) => string
  /** All that is read at a day, in one sentence without the day. */
  spoken: (day: number) => string
  /** Lines in the order in which the up and down keys mark them; the marked one. */
  names: readonly string[]
  marked: string
  onMark: (name: string | null) => void
  /** The day that is read before anybody points. */
  idle: number
  /** The lines under the drawing; `day` is null before anybody reads. */
  lines: (day: number | null) => ReactNode
  /** The drawing fills the column. */
  isWide?: boolean
  /** In a small figure the lines stand in place of the hint, and only while somebody reads. */
  isCompact?: boolean
  children: ReactNode
}

/**
 * A drawing with a cursor over its days: one tab stop, worked by keys, mouse and touch, read out politely once a key is let go. Without
 * scripts the drawing stands as it is.
 */
export function ChartReader(props: ChartReaderProps) {
  const { label, stops, step, wordsOf, spoken, names, marked, onMark, idle, lines, isWide, isCompact, children } = props
  const hasScripts = useHasScripts()
  const [day, setDay] = useState<number | null>(null)
  const [said, setSaid] = useState('')
  const slider = useRef<HTMLDivElement>(null)
  const isHeld = useRef(false)
  const hint = useId()
  const [first, last] = [stops[0]!, stops.at(-1)!]
  const at = Math.min(last, Math.max(first, day ?? idle))
  const say = (now: number, name: string) =>
    setSaid(`${name === marked ? '' : `${name} marked. `}${capital(wordsOf(now))}: ${spoken(now)}.`)

  const pointing = useMemo<Pointing>(
    () => ({
      toDay: (asked) => setDay(Math.min(last, Math.max(first, Number((Math.round(asked / step) * step).toPrecision(12))))),
      mark: onMark
    }),
    [first, last, step, onMark]
  )

  // of a held key only the last day is read out, when it is let go
  function onKeyDown(event: KeyboardEvent) {
    isHeld.current = event.repeat
    if (event.altKey || event.ctrlKey || event.metaKey) return
    const { key } = event
    if (key === 'Escape') {
      setDay(null)
      onMark(null)
      setSaid('')
      slider.current?.blur()
      return
    }
    const turn = key === 'ArrowUp' ? -1 : key === 'ArrowDown' ? 1 : 0
    if (turn !== 0 && names.length > 1) {
      event.preventDefault()
      const name = names[(names.indexOf(marked) + turn + names.length) % names.length]!
      setDay(at)
      onMark(name)
      if (!event.repeat) say(at, name)
      return
    }
    const to = nextStop(key, at, stops)
    if (to === null) return
    event.preventDefault()
    setDay(to)
    if (!event.repeat) say(to, marked)
  }

  function leave(event: PointerEvent) {
    onMark(null)
    if (event.pointerType !== 'touch' && document.activeElement !== slider.current) setDay(null)
  }

  return (
    <PointingContext value={pointing}>
      <DayContext value={day}>
        <div className="chart">
          <div
            className={isWide ? 'chart-draw wide' : 'chart-draw'}
            onPointerLeave={leave}
            onPointerDown={() => slider.current?.focus({ preventScroll: true })}
          >
            {children}
            {hasScripts && (
              <div
                ref={slider}
                className="chart-slider"
                role="slider"
                tabIndex={0}
                aria-label={label}
                aria-describedby={hint}
                aria-valuemin={first}
                aria-valuemax={last}
                aria-valuenow={at}
                aria-valuetext={wordsOf(at)}
                onKeyDown={onKeyDown}
                onKeyUp={() => {
                  if (isHeld.current && day !== null) say(at, marked)
                  isHeld.current = false
                }}
              />
            )}
          </div>
          <div className={isCompact ? 'chart-compact' : undefined}>
            {!(isCompact && day === null) && lines(day)}
            <p className={isCompact && day !== null ? 'vh' : 'chart-hint'} id={hint} data-on={hasScripts || undefined}>
              <span className="by-touch">Touch the drawing to read other days.</span>
              <span className="by-keys">
                Point at a line to read other days. By keys: left and right
                {names.length > 1 && ', from line to line up and down'}; Escape leaves.
              </span>
            </p>
          </div>
          <p className="vh" aria-live="polite">
            {said}
          </p>
        </div>
      </DayContext>
    </PointingContext>
  )
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

export type CursorLineProps = {
  x: (day: number) => number
  top: number
  bottom: number
  /** Where the lines stand at a day. */
  levels: (day: number) => { y: number; isMarked: boolean }[]
}

/** The cursor in a drawing. */
export function CursorLine({ x, top, bottom, levels }: CursorLineProps) {
  const day = useCursorDay()
  if (day === null) return null
  const at = Math.round(x(day) * 10) / 10
  return (
    <g className="chart-cursor" pointerEvents="none">
      <path d={`M${at} ${top}V${bottom}`} stroke="var(--color-ink)" />
      {levels(day).map(({ y, isMarked }, i) => (
        <circle
          key={i}
          cx={at}
          cy={y}
          r={isMarked ? 4.5 : 3}
          fill="var(--color-paper)"
          stroke="var(--color-ink)"
          strokeWidth="1.5"
        />
      ))}
    </g>
  )
}

/** Where on a drawing the pointer is, in its own units. */
export function placeOf(event: PointerEvent<SVGSVGElement>): { x: number; y: number } {
  const box = event.currentTarget.getBoundingClientRect()
  const { width, height } = event.currentTarget.viewBox.baseVal
  return { x: ((event.clientX - box.left) * width) / box.width, y: ((event.clientY - box.top) * height) / box.height }
}
