import type { ReactNode } from 'react'
import type { ReliabilityTable } from '~/domain/reliability/reliability-export'
import { TextLink } from '~/components/text-link'

type Props = { here: string; query: string; table: ReliabilityTable; children?: ReactNode }

/** A table's figures, unrounded and whole, under the same filters. */
export function CsvLink({ here, query, table, children = 'This table as CSV' }: Props) {
  return (
    <p className="csv">
      <TextLink document href={`${here}.csv?table=${table}&${query}`}>
        {children}
      </TextLink>
    </p>
  )
}

/** A figure's place in the guides. */
export function GuideLink({ to, children }: { to: string; children: ReactNode }) {
  return <TextLink href={`/guides/${to}`}>{children}</TextLink>
}
