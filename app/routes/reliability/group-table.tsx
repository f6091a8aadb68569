import { faintUnder } from '~/components/chart-geometry'
import { IntervalAxisCell, IntervalCell } from '~/components/interval-bar'
import { SmallCurve } from '~/components/small-curve'
import { Table, type Column } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { causeFilterWords, causeNames } from '~/domain/reliability/filter-words'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import { tooFew } from '~/domain/reliability/reliability-words'
import type { ShownGroup, ShownTotal } from './page-figures'
import { smallScale } from './small-scale'

type Row = ShownTotal & { points: ShownGroup['points'] | null }

type Props = {
  number: number
  /** What a row is: a revision, a release. */
  what: string
  groups: ShownGroup[]
  /** All together, as the last row. */
  total: ShownTotal | null
  /** The page of a group's own figures; null where this is it. */
  hrefOf: (group: string) => string | null
  filters: Pick<ReliabilityFilters, 'cause' | 'firstPower'>
  /** A column more, beside the name. */
  extra?: { head: string; cell: (group: string) => React.ReactNode }
}

/** The page's own answer: first power and one year with their intervals, how many stand behind them, what fails most, and a small curve. */
export function GroupTable({ number, what, groups, total, hrefOf, filters, extra }: Props) {
  const rows: Row[] = total === null ? groups : [...groups, { ...total, points: null }]
  const from = scaleFrom(rows)
  const scale = smallScale(groups)
  const isOneCause = filters.cause !== 'all'
  const columns: Column<Row>[] = [
    {
      key: 'group',
      head: what,
      isRowHead: true,
      cell: (g) => <RowHead row={g} href={g.points === null ? null : hrefOf(g.group)} extra={extra} />
    },
    ...(extra ? [{ key: 'extra', head: extra.head, cell: (g: Row) => g.points && extra.cell(g.group), className: 'ex' }] : []),
    {
      key: 'curve',
      head: 'Curve',
      className: 'cv',
      cell: (g) => g.points && hasCurve(g.points) && <SmallCurve points={g.points} {...scale} />
    },
    // Of units that worked at first power all did.
    ...(filters.firstPower === 'counted'
      ? [{ key: 'first', head: 'Works at first power', className: 'iv', cell: (g: Row) => <FirstPower group={g} from={from} /> }]
      : []),
    {
      key: 'year',
      head: isOneCause ? 'Without that for one year' : 'Works after one year',
      className: 'iv',
      cell: (g) => <OneYear group={g} from={from} />
    },
    { key: 'risk', head: 'Followed a year', isFigure: true, only: 'wide', cell: (g) => g.atOneYear.atRisk },
    { key: 'cause', head: 'Most failures by', className: 'cs', cell: (g) => <Commonest group={g} /> }
  ]
  return (
    <Table
      number={number}
      className="ivt gt"
      caption={`${isOneCause ? `Only ${causeFilterWords[filters.cause]} count after first power. ` : ''}Percent, with 95\u00a0% interval, on a scale from ${from} to 100. ≥ stands where nothing had failed by then: the exact lower bound alone is known. The curves run to the same day; their tick is one year.`}
      rows={rows}
      rowKey={(g) => g.group}
      columns={columns}
      after={
        <tr className="ax" aria-hidden="true">
          {columns.map((c) => (
            <td key={c.key} className={[c.only === 'wide' && 'w', c.className].filter(Boolean).join(' ')}>
              {c.className === 'iv' && <IntervalAxisCell from={from} />}
            </td>
          ))}
        </tr>
      }
    />
  )
}

function RowHead({ row, href, extra }: { row: Row; href: string | null; extra: Props['extra'] }) {
  const isTotal = row.points === null
  return (
    <>
      {isTotal ? 'all' : href === null ? <span className="nw">{row.group}</span> : <TextLink href={href}>{row.group}</TextLink>}
      <small className="soft">{row.fitted} fitted,</small>
      <small className="soft">{row.events} failed</small>
      {extra && !isTotal && (
        <small className="on-n">
          {extra.head.toLowerCase()} {extra.cell(row.group)}
        </small>
      )}
    </>
  )
}

function FirstPower({ group, from }: { group: ShownTotal; from: number }) {
  if (group.firstPower === null || group.firstPower.n < tooFew) return <span className="soft">too few</span>
  const { estimate, lower, upper, works, n } = group.firstPower
  return <IntervalCell estimate={estimate} lower={lower} upper={upper} note={`${works} of ${n}`} from={from} />
}

function OneYear({ group, from }: { group: ShownTotal; from: number }) {
  const { survival, lower, upper, atRisk } = group.atOneYear
  if (survival === 0) return <span>none</span>
  if (survival === null || atRisk < tooFew) return <span className="soft">too few followed</span>
  const cell = <IntervalCell estimate={survival} lower={lower} upper={upper} note={`${atRisk} followed`} from={from} />
  return atRisk < faintUnder ? <span className="soft">{cell}</span> : cell
}

function Commonest({ group: { commonestCause: cause, events } }: { group: ShownTotal }) {
  if (cause !== null)
    return (
      <>
        <span className="on-n soft">most failures by </span>
        {causeNames[cause].toLowerCase()}
      </>
    )
  return <span className="soft">{events === 0 ? 'none failed' : 'no one cause'}</span>
}

const hasCurve = (points: ShownGroup['points']) => points.some((p) => p.time > 0 && p.atRisk >= tooFew)

/** The scale begins at 50, or at 0 where a figure lies lower. */
function scaleFrom(rows: readonly ShownTotal[]): number {
  const shares = rows.flatMap((g) => [
    g.firstPower && g.firstPower.n >= tooFew ? g.firstPower.estimate : 1,
    g.atOneYear.survival !== null && g.atOneYear.atRisk >= tooFew ? g.atOneYear.survival : 1
  ])
  return Math.min(...shares) < 0.5 ? 0 : 50
}
