import type { ReactNode } from 'react'
import { CrossSign, DottedSign, FitsSign, WithCareSign } from './signs'
import { TextLink } from './text-link'

export type Fit = 'fits' | 'fits-with-care' | 'does-not-fit' | 'untested'

export const fitWord: Record<Fit, string> = {
  fits: 'fits',
  'fits-with-care': 'with care',
  'does-not-fit': 'does not fit',
  untested: 'untested'
}

function FitSign({ fit }: { fit: Fit }) {
  if (fit === 'fits') return <FitsSign />
  if (fit === 'fits-with-care') return <WithCareSign />
  if (fit === 'does-not-fit') return <CrossSign />
  return <DottedSign />
}

/** Shape and word of a fit claim, in ink only. */
export function FitMark({ fit }: { fit: Fit }) {
  return (
    <span className="fw">
      <FitSign fit={fit} />
      {fitWord[fit]}
    </span>
  )
}

/** One cell a console revision; `reason` is one short sentence. */
export type FitCell = { code: string; fit: Fit; reason?: ReactNode; href?: string }

/** The fit strip: what the maintainer claims for each console revision, and why. */
export function FitStrip({ cells }: { cells: FitCell[] }) {
  return (
    <ol className={cells.length > 7 ? 'fit many' : 'fit'}>
      {cells.map(({ code, fit, reason, href }) => (
        <li key={code}>
          <b>{href ? <TextLink href={href}>{code}</TextLink> : code}</b>
          <FitMark fit={fit} />
          <span className="why">{reason}</span>
        </li>
      ))}
    </ol>
  )
}
