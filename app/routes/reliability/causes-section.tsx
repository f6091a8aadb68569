import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { causes, causeWords, type Cause } from '~/domain/reports/report-words'
import type { ShownTotal } from './page-figures'

/** What the failures came from, as their authors say. */
export function CausesSection({ number, all }: { number: number; all: ShownTotal }) {
  const by = all.failuresByCause
  const laid = by.board + by.unknown
  const rows = causes.map((cause) => ({ cause, failures: by[cause] })).filter((row) => row.failures > 0)
  if (rows.length === 0)
    return (
      <Section number={number} heading="What failed">
        <p>Nothing is known to have failed among the {all.n} units in the curve.</p>
      </Section>
    )
  return (
    <Section
      number={number}
      heading="What failed"
      margin={
        by['wrong-diagnosis'] > 0 && (
          <p>
            <b>Wrong diagnosis:</b> the board was sound, the fault lay elsewhere.{' '}
            <TextLink href="/guides/safety">Check before soldering</TextLink>
          </p>
        )
      }
    >
      <p className="mb-4 max-w-[66ch]">
        Of the {all.events} failures, {laid} {laid === 1 ? 'is' : 'are'} laid to the board.
        {by.unknown > 0 &&
          ` That includes ${by.unknown} of unknown cause, which ${by.unknown === 1 ? 'counts' : 'count'} against it.`}{' '}
        The curves above fall at every failure, whatever its cause: they say whether the console still works.
      </p>
      <Table<{ cause: Cause; failures: number }>
        number={3}
        caption="Failures in the curve, by the cause that their authors gave."
        rows={rows}
        rowKey={(row) => row.cause}
        columns={[
          {
            key: 'cause',
            head: 'Cause',
            isRowHead: true,
            cell: (row) => (row.cause === 'unknown' ? 'Not known' : causeWords[row.cause].label)
          },
          { key: 'n', head: 'Failures', isFigure: true, cell: (row) => row.failures },
          {
            key: 'against',
            head: 'Counts against',
            cell: (row) => (row.cause === 'board' || row.cause === 'unknown' ? 'the board' : 'not the board')
          }
        ]}
      />
    </Section>
  )
}
