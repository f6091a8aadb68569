import { IntervalAxisCell, IntervalCell } from '~/components/interval-bar'
import { Table, type Column } from '~/components/table'
import { tooFew } from '~/domain/reliability/reliability-words'
import type { ShownTotal } from './page-figures'

type Props = {
  number: number
  /** What a row is: a revision, a release. */
  what: string
  groups: ShownTotal[]
  /** All together, as the last row. */
  total: ShownTotal | null
}

/** Fitted, failed, at risk, first power and one year with their intervals, on one scale. */
export function GroupTable({ number, what, groups, total }: Props) {
  const rows = total === null ? groups : [...groups, total]
  const from = scaleFrom(rows)
  const columns: Column<ShownTotal>[] = [
    {
      key: 'group',
      head: what,
      isRowHead: true,
      cell: (g) => (
        <>
          {g.group === total?.group ? 'all' : <span className="nw">{g.group}</span>}
          <small className="on-n soft">{g.fitted} fitted,</small>
          <small className="on-n soft">{g.events} failed</small>
        </>
      )
    },
    { key: 'fitted', head: 'Fitted', isFigure: true, only: 'wide', cell: (g) => g.fitted },
    { key: 'events', head: 'Failed', isFigure: true, only: 'wide', cell: (g) => g.events },
    { key: 'first', head: 'Works at first power', className: 'iv', cell: (g) => <FirstPower group={g} from={from} /> },
    { key: 'year', head: 'Works after one year', className: 'iv', cell: (g) => <OneYear group={g} from={from} /> },
    { key: 'risk', head: 'Followed a year', isFigure: true, only: 'wide', cell: (g) => g.atOneYear.atRisk }
  ]
  return (
    <Table
      number={number}
      className="ivt"
      caption={`Percent, with 95\u00a0% interval, on a scale from ${from} to 100. ≥ stands where nothing had failed by then: the lower limit alone is known.`}
      rows={rows}
      rowKey={(g) => g.group}
      columns={columns}
      after={
        <tr className="ax" aria-hidden="true">
          <td />
          <td className="w" />
          <td className="w" />
          <td className="iv">
            <IntervalAxisCell from={from} />
          </td>
          <td className="iv">
            <IntervalAxisCell from={from} />
          </td>
          <td className="w" />
        </tr>
      }
    />
  )
}

function FirstPower({ group, from }: { group: ShownTotal; from: number }) {
  if (group.firstPower === null || group.firstPower.n < tooFew) return <span className="soft">too few</span>
  const { estimate, lower, upper } = group.firstPower
  return <IntervalCell estimate={estimate} lower={lower} upper={upper} from={from} />
}

function OneYear({ group, from }: { group: ShownTotal; from: number }) {
  const { survival, lower, upper, atRisk } = group.atOneYear
  if (survival === 0) return <span>none</span>
  if (survival === null || atRisk < tooFew) return <span className="soft">too few followed</span>
  return <IntervalCell estimate={survival} lower={lower} upper={upper} note={`${atRisk} followed`} from={from} />
}

/** The scale begins at 50, or at 0 where a figure lies lower. */
function scaleFrom(rows: readonly ShownTotal[]): number {
  const shares = rows.flatMap((g) => [
    g.firstPower && g.firstPower.n >= tooFew ? g.firstPower.estimate : 1,
    g.atOneYear.survival !== null && g.atOneYear.atRisk >= tooFew ? g.atOneYear.survival : 1
  ])
  return Math.min(...shares) < 0.5 ? 0 : 50
}
