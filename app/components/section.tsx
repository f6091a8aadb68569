import type { ReactNode } from 'react'

export type SectionProps = {
  number: number
  heading: ReactNode
  /** The place that the index line and other pages point at; without it `s` and the number. */
  id?: string
  /** Beside the section's top on a wide sheet, after it on a phone. */
  margin?: ReactNode
  children: ReactNode
}

/** A numbered section: heavy rule, number hanging in its column, main column, margin. */
export function Section({ number, heading, id = `s${number}`, margin, children }: SectionProps) {
  return (
    <section className="sec" id={id} aria-labelledby={`${id}-h`}>
      <span className="no" aria-hidden="true">
        {number}
      </span>
      <h2 id={`${id}-h`}>{heading}</h2>
      {children}
      {margin && <div className="mn up">{margin}</div>}
    </section>
  )
}

/** A margin note beside what it follows; `beside="top"` stands beside the section's top. */
export function MarginNote({ beside = 'previous', children }: { beside?: 'previous' | 'top'; children: ReactNode }) {
  return <div className={beside === 'top' ? 'mn up' : 'mn'}>{children}</div>
}

/** A heading inside a section; depth two is the deepest there is. */
export function SubHeading({ number, id, children }: { number?: string; id?: string; children: ReactNode }) {
  return (
    <h3 className="sub" id={id}>
      {number && <span className="n">{number}</span>}
      <span>{children}</span>
    </h3>
  )
}

/** A thin strip without a number, for the words that filter what follows. */
export function FilterStrip({ label, children }: { label: string; children: ReactNode }) {
  return (
    <section className="sec thin" aria-label={label}>
      <div className="full">{children}</div>
    </section>
  )
}
