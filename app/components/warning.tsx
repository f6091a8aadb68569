import type { ReactNode } from 'react'
import { SeveritySign, severityWord, type Severity } from './severity'

export type WarningProps = {
  severity: Severity
  /** Runs in after the word: "Caution. Stored charge". */
  heading: ReactNode
  children?: ReactNode
  /** Why it is shown here: "Shown because you chose TM-6". */
  because?: ReactNode
}

/** A block that stops, cautions or notes, where the work begins. */
export function Warning({ severity, heading, children, because }: WarningProps) {
  return (
    <div className={`warn ${severity}`} role="note">
      <p className="wh">
        <SeveritySign severity={severity} />
        <span>
          <strong>{severityWord[severity]}.</strong> <strong>{heading}</strong>
        </span>
      </p>
      {typeof children === 'string' ? <p>{children}</p> : children}
      {because && <p className="small soft">{because}</p>}
    </div>
  )
}
