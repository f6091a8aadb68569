import type { ReactNode } from 'react'
import { DimensionAcross } from './dimension'

export type EmptyProps = {
  /** One sentence: what is not there yet, and what it would be good for. */
  children: ReactNode
  /** The one thing to do, then a harmless one. */
  action?: ReactNode
  harmless?: ReactNode
  /** Words inside the outline. */
  words?: string
}

/** Nothing here yet: a dashed outline with its dimension, one sentence, one action and one harmless one. */
export function Empty({ children, action, harmless, words }: EmptyProps) {
  return (
    <div className="emp">
      <EmptyOutline width={300} words={words} />
      <div>
        {typeof children === 'string' ? <p>{children}</p> : children}
        {(action || harmless) && (
          <div className="emp-acts">
            {action}
            {harmless}
          </div>
        )}
      </div>
    </div>
  )
}

/** The outline alone, `width` pixels of the drawing wide. */
export function EmptyOutline({
  width,
  height = Math.round(width * 0.4),
  words
}: {
  width: number
  height?: number
  words?: string
}) {
  const [x0, y0, x1, y1] = [14, 34, width - 2, height - 6]
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width={width}
      height={height}
      className="h-auto max-w-full"
      role="img"
      aria-label="An empty outline: nothing measured yet"
    >
      <rect
        x={x0}
        y={y0}
        width={x1 - x0}
        height={y1 - y0}
        rx="8"
        fill="none"
        stroke="var(--color-edge)"
        strokeWidth="1.5"
        strokeDasharray="7 5"
      />
      <DimensionAcross from={x0} to={x1} y={15} foot={28} text="not measured yet" isSoft />
      {words && (
        <text x={(x0 + x1) / 2} y={(y0 + y1) / 2 + 5} textAnchor="middle" className="t-soft">
          {words}
        </text>
      )}
    </svg>
  )
}

/** A search that found nothing: what was asked, and where to go from here. */
export function NothingFound({ what, children }: { what: ReactNode; children?: ReactNode }) {
  return (
    <div className="grid gap-1">
      <p>
        <b>{what}</b>
      </p>
      {typeof children === 'string' ? <p>{children}</p> : children}
    </div>
  )
}
