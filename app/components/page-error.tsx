import type { ReactNode } from 'react'
import { Actions, ButtonLink } from './button'
import { Title } from './title'

export type PageErrorProps = {
  status: number
  /** What the server said, when it is meant for the reader: "There is no release 1.3.0 of Buttress." */
  message?: ReactNode
  /** The number that finds this failure in the log. */
  reference?: string
  /** A better way on than the start page. */
  way?: { label: string; href: string }
}

const says: Record<number, { heading: string; lead: string }> = {
  400: { heading: 'This cannot be read', lead: 'Something in the address or the form is not as it should be.' },
  401: { heading: 'Sign in first', lead: 'This sheet belongs to somebody. Sign in, and you are brought back here.' },
  403: { heading: 'Not your sheet', lead: 'You are signed in, but this is for others: its maintainers, or a steward.' },
  404: {
    heading: 'No such sheet',
    lead: 'Nothing lies at this address. It may have been typed wrong, or never have been there.'
  },
  429: { heading: 'Too many at once', lead: 'Wait a minute, then try again. Nothing was changed.' },
  500: {
    heading: 'A fault on our side',
    lead: 'The page could not be made. What you sent last may not have been kept: look before you send it again.'
  }
}

/** What an error boundary shows: what is wrong, in plain words, and a way on. Stands inside a sheet. */
export function PageError({ status, message, reference, way }: PageErrorProps) {
  const { heading, lead } = says[status] ?? (status >= 500 ? says[500]! : says[400]!)
  return (
    <Title heading={heading} lead={message ?? lead} margin={<ErrorFacts status={status} reference={reference} />} isTop>
      <div className="mt-6">
        <Actions>
          {status === 401 ? (
            <ButtonLink href={way?.href ?? '/sign-in'}>{way?.label ?? 'Sign in'}</ButtonLink>
          ) : (
            way && <ButtonLink href={way.href}>{way.label}</ButtonLink>
          )}
          <ButtonLink kind={way || status === 401 ? 'outline' : 'solid'} href="/">
            To the boards
          </ButtonLink>
        </Actions>
      </div>
    </Title>
  )
}

function ErrorFacts({ status, reference }: { status: number; reference?: string }) {
  return (
    <>
      <p>
        <b>Answer {status}.</b>
      </p>
      {reference && (
        <p>
          Say this number when you write to us: <b>{reference}</b>
        </p>
      )}
    </>
  )
}
