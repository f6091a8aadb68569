import { useEffect, useRef, type ReactNode } from 'react'
import { TickSign } from './signs'

/**
 * A plain line that says what was done, where the eye is; it stays until the next page. It comes with a page of its own, where a status is
 * not announced by itself: with scripts it takes the focus, which is.
 */
export function DoneLine({ what, children }: { what: ReactNode; children?: ReactNode }) {
  const line = useRef<HTMLParagraphElement>(null)
  useEffect(() => line.current?.focus({ preventScroll: true }), [what])
  return (
    <p className="done" role="status" tabIndex={-1} ref={line}>
      <TickSign />
      <span>
        <b>{what}</b> {children}
      </span>
    </p>
  )
}
