import { Figure } from '~/components/figure'
import { Section } from '~/components/section'
import { SurvivalChart } from '~/components/survival-chart'
import { tooFew } from '~/domain/reliability/reliability-words'
import { GroupTable } from './group-table'
import type { ShownFigures } from './page-figures'
import { unitOf } from './revision-sections'

/** The curves by release: the one with the most units marked, up to three beside it, all in the table. */
export function ReleaseSection({ shown, boardName }: { shown: ShownFigures; boardName: string }) {
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
      number={4}
      heading="Release by release"
      margin={
        <p>
          Releases are fitted at different times, by different people: a difference between two curves is a question, no answer.
        </p>
      }
    >
      <Figure
        number={3}
        caption={`Share still working, by release of ${boardName}. The release with the most reports carries its 95 % band and ticks. Not drawn under ${tooFew} followed.`}
      >
        <SurvivalChart series={series} unit={unitOf(byRelease)} asOf={asOf} />
      </Figure>
      <div className="mt-8">
        <GroupTable number={2} what="Release" groups={byRelease} total={null} />
      </div>
    </Section>
  )
}
