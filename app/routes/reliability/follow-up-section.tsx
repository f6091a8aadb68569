import { ButtonLink } from '~/components/button'
import { Figure, TwoDrawings } from '~/components/figure'
import { RangeBar, RangeFigure } from '~/components/range-bar'
import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { percentText } from '~/components/percent-text'
import { tooFew } from '~/domain/reliability/reliability-words'
import { CsvLink, GuideLink } from './csv-link'
import type { SectionProps } from './curves-section'
import { hasRange } from './numbering'
import type { ShownTotal } from './page-figures'

type Props = SectionProps & { consoleName: string; hrefOfBounds: string; hrefOfPlain: string }

/** How much of the time was seen, and what those who no longer answer could hide. */
export function FollowUpSection(props: Props) {
  const { shown, sections, hrefOfBounds, hrefOfPlain } = props
  const { all } = shown
  return (
    <Section
      number={sections.followUp!}
      id="silent"
      heading="What the silent could hide"
      margin={
        <>
          <p>
            <b>Completeness</b> is the days followed over the days there could have been (Clark).{' '}
            <GuideLink to="worked-examples#follow-up">Worked by hand</GuideLink>
          </p>
          {all.silent !== null && (
            <p>
              The truth lies inside the hatched length, most likely near the mark. Every check-in answered makes it shorter.{' '}
              <GuideLink to="worked-examples#silent">Worked by hand</GuideLink>
            </p>
          )}
        </>
      }
    >
      <div className="sil">
        <Completeness all={all} />
        {all.silent === null ? (
          <div>
            <p>
              Units whose owners no longer answer are counted up to their last word. What if they had all failed, or all still
              ran?
            </p>
            <p className="mt-3">
              <ButtonLink kind="outline" href={`${hrefOfBounds}#silent`}>
                Show what the silent could hide
              </ButtonLink>
            </p>
          </div>
        ) : (
          <SilentWords all={all} hrefOfPlain={hrefOfPlain} />
        )}
      </div>
      {all.silent !== null && <SilentFigure {...props} />}
      {all.silent !== null && <SilentTable {...props} />}
    </Section>
  )
}

function Completeness({ all: { followUp } }: { all: ShownTotal }) {
  if (followUp === null) return <p>Nobody could be followed for a day yet.</p>
  return (
    <div>
      <p className="read">
        {wholePercent(followUp.ratio)}
        <small> %</small>
      </p>
      <p>of the possible follow-up has been had.</p>
    </div>
  )
}

/** Rounded down: what was seen is not more. */
const wholePercent = (ratio: number) => Math.floor(ratio * 100 + 1e-9)

function SilentWords({ all: { silent, n }, hrefOfPlain }: { all: ShownTotal; hrefOfPlain: string }) {
  const { silent: count, heardOf } = silent!
  return (
    <div>
      <p>
        <b>
          {count} of {n} units {count === 1 ? 'is' : 'are'} silent:
        </b>{' '}
        their next check-in was due more than 30 days ago. {heardOf} without a failure {heardOf === 1 ? 'was' : 'were'} heard of
        in time, or had left by a known day.
      </p>
      <p>At worst each of them failed the day after its last word; at best each still runs.</p>
      <p className="mt-3">
        <ButtonLink kind="outline" href={`${hrefOfPlain}#silent`}>
          Count them up to their last word only
        </ButtonLink>
      </p>
    </div>
  )
}

/** The scale begins at 50, or at 0 where a figure lies lower. */
const scaleFrom = (rows: readonly ShownTotal[]) =>
  Math.min(1, ...rows.map((g) => (hasRange(g) ? g.silent!.atOneYear.worst! : 1))) < 0.5 ? 0 : 50

function SilentFigure({ shown, figures }: Props) {
  const { all } = shown
  if (figures.silent === null) return <p>Too few were followed for a year to say what the silent could change in it.</p>
  const { worst, reported, best } = all.silent!.atOneYear
  const range = { worst: worst!, reported: reported!, best: best!, from: scaleFrom([all]) }
  return (
    <Figure
      number={figures.silent}
      caption="Percent that work after one year, all revisions: if every silent unit had failed, as reported, and if every one still ran. Failures on the day they were found."
    >
      <TwoDrawings wide={<RangeFigure {...range} />} narrow={<RangeFigure {...range} isNarrow />} />
    </Figure>
  )
}

function SilentTable({ here, shown, tables, consoleName }: Props) {
  const { byRevision, all, query } = shown
  const rows = byRevision.length > 1 ? [...byRevision, { ...all, group: consoleName, isAll: true }] : byRevision
  const from = scaleFrom(rows)
  return (
    <div>
      <Table<ShownTotal & { isAll?: boolean }>
        number={tables.silent!}
        className="ivt"
        caption={`The same for each revision: percent working after one year, worst to best, on a scale from ${from} to 100.`}
        rows={rows}
        rowKey={(g) => g.group}
        columns={[
          {
            key: 'group',
            head: 'Revision',
            isRowHead: true,
            cell: (g) => (g.isAll ? 'all' : <span className="nw">{g.group}</span>)
          },
          { key: 'silent', head: 'Silent', isFigure: true, cell: (g) => `${g.silent?.silent ?? 0} of ${g.n}` },
          {
            key: 'followed',
            head: 'Followed, %',
            isFigure: true,
            only: 'wide',
            cell: (g) => (g.followUp === null ? '' : wholePercent(g.followUp.ratio))
          },
          { key: 'reported', head: 'As reported', isFigure: true, only: 'wide', cell: reportedText },
          { key: 'range', head: 'Worst to best', className: 'iv', cell: (g) => <Range group={g} from={from} /> }
        ]}
      />
      <CsvLink here={here} query={query} table="silent" />
    </div>
  )
}

function reportedText({ atOneYear: { atRisk }, silent, atOneYear }: ShownTotal) {
  const reported = silent?.atOneYear.reported ?? null
  return reported === null || atRisk < tooFew ? 'too few' : percentText(reported, atOneYear.lower)
}

function Range({ group, from }: { group: ShownTotal; from: number }) {
  if (!hasRange(group)) return <span className="soft">too few followed</span>
  const { worst, best, reported } = group.silent!.atOneYear
  const low = Math.floor(worst! * 100 + 1e-9)
  const bar = { worst: worst!, reported: reported!, best: best!, from }
  return (
    <>
      <b className="nw">{best! >= 1 ? `${low} or more` : `${low} to ${Math.ceil(best! * 100 - 1e-9)}`}</b>
      <span className="on-w in">
        <RangeBar {...bar} width={170} />
      </span>
      <span className="on-n">
        <RangeBar {...bar} width={110} />
      </span>
    </>
  )
}
