import type { ReactNode } from 'react'

export type FigureSpan = 'main' | 'hang' | 'wide' | 'full'

export type FigureProps = {
  /** Counted anew on each page. */
  number?: number
  /** How to read it. */
  caption: ReactNode
  /** The main column; with the number column (`hang`); with the margin (`wide`); the whole sheet. */
  span?: FigureSpan
  id?: string
  children: ReactNode
}

/** A drawing with its number and caption below. */
export function Figure({ number, caption, span = 'main', id, children }: FigureProps) {
  return (
    <figure id={id} className={span === 'main' ? undefined : span}>
      {children}
      <figcaption>
        {number !== undefined && <b>Fig. {number}</b>} {caption}
      </figcaption>
    </figure>
  )
}

/** Drawn twice, so that 14 px text stays 14 px: wide from 900 px, narrow below. Only one of the two is ever shown or read out. */
export function TwoDrawings({ wide, narrow }: { wide: ReactNode; narrow: ReactNode }) {
  return (
    <>
      <div className="on-w">{wide}</div>
      <div className="on-n">{narrow}</div>
    </>
  )
}

/** The legend beside a figure with balloons: one entry a balloon, in their order. */
export function Keys({ children }: { children: ReactNode[] }) {
  return (
    <ol className="keys">
      {children.map((entry, i) => (
        <li key={i}>
          <span>{entry}</span>
        </li>
      ))}
    </ol>
  )
}
