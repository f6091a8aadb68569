import type { ReactNode } from 'react'

export type TitleProps = {
  /** The heading as text; a release or a unit gives its identity tag as `tag` instead. */
  heading?: ReactNode
  tag?: ReactNode
  /** One plain sentence under the heading. */
  lead?: ReactNode
  /** What the expert adds, in the margin. */
  margin?: ReactNode
  /** Actions in the margin, first the solid one, then words. */
  actions?: ReactNode
  /** Something else in the margin, such as a search. */
  aside?: ReactNode
  /** A page without a trail stands a little lower. */
  isTop?: boolean
  /** The start page: its heading may run to two lines. */
  isHome?: boolean
  children?: ReactNode
}

/** The head of a page, over its numbered sections. */
export function Title({ heading, tag, lead, margin, actions, aside, isTop, isHome, children }: TitleProps) {
  return (
    <div className={['title', isTop && 'top', isHome && 'home'].filter(Boolean).join(' ')}>
      {tag ?? <h1>{heading}</h1>}
      {lead && <p className="lead">{lead}</p>}
      {children}
      {actions && <div className="mar stack">{actions}</div>}
      {aside && <div className="mar">{aside}</div>}
      {margin && <div className="mar mn">{margin}</div>}
    </div>
  )
}
