import type { ReactNode } from 'react'
import { TickSign } from './signs'

/** A plain line that says what was done, where the eye is; it stays until the next page. */
export function DoneLine({ what, children }: { what: ReactNode; children?: ReactNode }) {
  return (
    <p className="done" role="status">
      <TickSign />
      <span>
        <b>{what}</b> {children}
      </span>
    </p>
  )
}
