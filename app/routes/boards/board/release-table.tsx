import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import type { BoardPage } from '~/domain/boards/board-page.server'
import type { BoardRelease } from '~/domain/releases/board-releases.server'
import { releasePath } from '~/domain/releases/release-path'

/** The releases of a board by version; drafts among them for its maintainers. */
export function ReleaseTable({ board, releases }: { board: BoardPage; releases: BoardRelease[] }) {
  if (releases.length === 0) return <p className="soft">There is none yet.</p>
  const withdrawn = releases.filter((r) => r.withdrawnReason)
  return (
    <>
      <Table
        number={1}
        caption={
          board.canDraft
            ? 'By version, the highest first. Drafts are seen by maintainers alone.'
            : 'By version, the highest first.'
        }
        rows={releases}
        rowKey={(r) => r.version}
        columns={[
          {
            key: 'version',
            head: 'Version',
            isRowHead: true,
            cell: (r) => <TextLink href={releasePath(board.slug, r.version)}>{r.version}</TextLink>
          },
          {
            key: 'state',
            head: 'State',
            cell: (r) => (
              <>
                <b>{r.state}</b>
                {r.isNewest && ', newest'}
              </>
            )
          },
          { key: 'revision', head: 'Board revision', only: 'wide', cell: (r) => r.boardRevision },
          {
            key: 'on',
            head: 'Published',
            className: 'nw',
            cell: (r) => r.publishedOn ?? <span className="soft">changed {r.changedOn}</span>
          }
        ]}
      />
      {withdrawn.map((r) => (
        <p key={r.version} className="small mt-3 max-w-[66ch]">
          <b>Why {r.version} is withdrawn:</b> {r.withdrawnReason}
        </p>
      ))}
    </>
  )
}
