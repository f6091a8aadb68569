import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import type { LatestReport } from '~/domain/reports/latest.server'

/** What installers said last about the boards of a maintainer; failures stand out. */
export function LatestReports({ reports }: { reports: LatestReport[] }) {
  if (reports.length === 0)
    return (
      <p className="soft">
        Nobody has reported on your boards yet. Installers find <TextLink href="/report">the report form</TextLink> on every
        release page.
      </p>
    )
  return (
    <Table
      caption="On any of your boards, the one filed last first."
      rows={reports}
      rowKey={(r) => r.id}
      isFolded
      columns={[
        {
          key: 'what',
          head: 'Report',
          isRowHead: true,
          cell: (r) => <TextLink href={`/reports/${r.id}`}>{r.what}</TextLink>
        },
        {
          key: 'says',
          head: 'What it says',
          cell: (r) =>
            r.isExcluded ? (
              <span className="soft">excluded by a steward</span>
            ) : (
              <>
                {r.isFailure ? <b>{r.says}</b> : r.says}
                {r.cause && <span className="soft">, {r.cause}</span>}
              </>
            )
        },
        { key: 'by', head: 'By', cell: (r) => r.by ?? <span className="soft">not said</span> },
        { key: 'filed', head: 'Filed', cell: (r) => r.filedOn }
      ]}
    />
  )
}
