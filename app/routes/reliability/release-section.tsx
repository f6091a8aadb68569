import { Figure } from '~/components/figure'
import { Section } from '~/components/section'
import { SurvivalChart } from '~/components/survival-chart'
import { tooFew } from '~/domain/reliability/reliability-words'
import { GroupTable } from './group-table'
import type { ShownFigures } from './page-figures'
import { NothingDrawn, unitOf } from './revision-sections'

type Props = { number: number; figure: number | null; shown: ShownFigures; boardName: string }

/** The curves by release: the one with the most units marked, up to three beside it, all in the table. */
export function ReleaseSection({ number, figure, shown, boardName }: Props) {
  const { byRelease, markedRelease } = shown
  const asOf = new URLSearchParams(shown.query).get('as-of')!
  const beside = [...byRelease]
    .filter((g) => g.group !== markedRelease)
    .sort((a, b) => b.n - a.n)
    .slice(0, 3)
    .map((g) => g.group)
  const series = byRelease
    .filter((g) => g.group === markedRelease || beside.includes(g.group))
    .map((g) => ({ name: g.group, points: g.points, marked: g.group === markedRelease }))
  return (
    <Section
      number={number}
      heading="Release by release"
      margin={
        <p>
          Releases are fitted at different times, by different people: a difference between two curves is a question, no answer.
        </p>
      }
    >
      {figure === null ? (
        <NothingDrawn of="release" />
      ) : (
        <Figure
          number={figure}
          caption={`Share still working, by release of ${boardName}. The release with the most reports carries its 95\u00a0% band and ticks. Not drawn under ${tooFew} followed.`}
        >
          <SurvivalChart series={series} unit={unitOf(byRelease)} asOf={asOf} />
        </Figure>
      )}
      <div className="mt-8">
        <GroupTable number={2} what="Release" groups={byRelease} total={null} />
      </div>
    </Section>
  )
}
