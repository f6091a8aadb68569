import type { ReactNode } from 'react'
import { SeveritySign, severityWord, type Severity } from './severity'

export type FindingProps = {
  id?: string
  severity: Severity
  heading: ReactNode
  where?: ReactNode
  /** The place on the board, in mm. */
  place?: ReactNode
  expected?: ReactNode
  found?: ReactNode
  /** The stable code, as METHODS names it. */
  code: string
  answer?: { by?: string; on?: string; text: ReactNode }
  /** An enlarged picture of the very place, for the margin, with its caption. */
  detail?: { drawing: ReactNode; caption: ReactNode }
  /** A field for the answer, while it is a draft. */
  children?: ReactNode
}

/** What the bundle check found: sign and word hang in the number column, then where, expected, found, code. */
export function Finding({ id, severity, heading, where, place, expected, found, code, answer, detail, children }: FindingProps) {
  const rows: [string, ReactNode][] = [
    ['Where', where],
    ['Place', place],
    ['Expected', expected],
    ['Found', found],
    ['Code', <code key="code">{code}</code>]
  ]
  return (
    <>
      <div className="find" id={id}>
        <span className="sg">
          <SeveritySign severity={severity} size={26} />
          <b>{severityWord[severity]}</b>
        </span>
        <div>
          <h3>{heading}</h3>
          <dl>
            {rows
              .filter(([, value]) => value !== undefined && value !== null && value !== '')
              .map(([label, value]) => (
                <div className="contents" key={label}>
                  <dt>{label}</dt>
                  <dd>{value}</dd>
                </div>
              ))}
          </dl>
          {answer && (
            <div className="ans">
              <span className="by">
                {answer.by ?? 'The maintainer’s answer'}
                {answer.on && `, ${answer.on}`}
              </span>
              {answer.text}
            </div>
          )}
          {children}
        </div>
      </div>
      {detail && (
        <figure className="det">
          {detail.drawing}
          <figcaption>{detail.caption}</figcaption>
        </figure>
      )}
    </>
  )
}
