import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { causeWords, firstPowerWords, statementWords, type Cause, type Statement } from '~/domain/reports/report-words'
import type { ReportOnPage } from './report-facts'

type Props = {
  report: ReportOnPage
  history: { id: string; statement: Statement; statedOn: string; filedOn: string; notes: string }[]
  failure: { lastRunningOn: string | null; foundOn: string; cause: Cause } | null
}
type Row = { id: string; on: string; said: string; more: string }

/** The life of the unit in the order of its days. */
export function ReportHistory({ report, history, failure }: Props) {
  const works = report.firstPower === 'works'
  const rows: Row[] = [
    {
      id: 'fitted',
      on: report.installedOn,
      said: `Fitted, ${firstPowerWords[report.firstPower].label.toLowerCase()}`,
      more: works || !failure ? '' : causeText(failure.cause)
    },
    ...history.map(({ id, statement, statedOn, filedOn, notes }) => {
      const parts = [
        statement === 'failed' && failure ? causeText(failure.cause) : '',
        statement === 'failed' && failure?.lastRunningOn ? `Last worked ${failure.lastRunningOn}.` : '',
        notes,
        filedOn !== statedOn ? `Told ${filedOn}.` : ''
      ]
      return { id, on: statedOn, said: statementWords[statement].label, more: parts.filter(Boolean).join(' ') }
    })
  ]
  return (
    <Section number={2} heading="Since then">
      <Table
        caption="Each statement with its day. Between two of them nothing is assumed."
        rows={rows}
        rowKey={(row) => row.id}
        columns={[
          { key: 'on', head: 'Day', isRowHead: true, className: 'nw', cell: (row) => row.on },
          { key: 'said', head: 'Said', weight: 'bold', cell: (row) => row.said },
          { key: 'more', head: 'Also', cell: (row) => <span className="[overflow-wrap:anywhere]">{row.more}</span> }
        ]}
      />
    </Section>
  )
}

const causeText = (cause: Cause) =>
  cause === 'unknown' ? 'Cause not known: counts against the board.' : `Cause: ${causeWords[cause].label.toLowerCase()}.`
