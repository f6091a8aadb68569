import { Figure } from '~/components/figure'
import { Section } from '~/components/section'
import { SurvivalChart } from '~/components/survival-chart'
import { TextLink } from '~/components/text-link'
import { shareWords } from '~/domain/reliability/filter-words'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import { tooFew } from '~/domain/reliability/reliability-words'
import { CsvLink } from './csv-link'
import { asOfOf, NothingDrawn, unitOf, type SectionProps } from './curves-section'
import { EstimatorNotes } from './estimator-notes'
import { GroupTable } from './group-table'

type Props = SectionProps & {
  boardName: string
  filters: Pick<ReliabilityFilters, 'cause' | 'firstPower'>
  boardRevisionOf: Record<string, string>
  hrefOf: (release: string) => string | null
  hrefOfBoardRevision: (boardRevision: string) => string | null
}

/** The curves by release: the one with the most units marked, up to three beside it, all in the table. */
export function ReleasesSection(props: Props) {
  const { here, shown, sections, figures, tables, boardName, filters, boardRevisionOf, hrefOf, hrefOfBoardRevision } = props
  const { byRelease, markedRelease } = shown
  const beside = [...byRelease]
    .filter((g) => g.group !== markedRelease)
    .sort((a, b) => b.n - a.n)
    .slice(0, 3)
    .map((g) => g.group)
  const series = byRelease
    .filter((g) => g.group === markedRelease || beside.includes(g.group))
    .map((g) => ({ name: g.group, points: g.points, marked: g.group === markedRelease }))
  const boardRevision = (release: string) => {
    const letter = boardRevisionOf[release]
    const href = letter === undefined ? null : hrefOfBoardRevision(letter)
    return href === null ? letter : <TextLink href={href}>{letter}</TextLink>
  }
  return (
    <Section
      number={sections.releases!}
      id="releases"
      heading="Release by release"
      margin={
        <>
          <EstimatorNotes groups={byRelease} grain={shown.grain} />
          <p>
            Releases are fitted at different times, by different people: a difference between two curves is a question, no answer.
          </p>
        </>
      }
    >
      {figures.releases === null ? (
        <NothingDrawn of="release" />
      ) : (
        <Figure
          number={figures.releases}
          caption={`Share ${shareWords[filters.cause]}, by release of ${boardName}. The release with the most reports carries its 95\u00a0% band and ticks. Not drawn under ${tooFew} followed.`}
        >
          <SurvivalChart
            series={series}
            unit={unitOf(byRelease)}
            asOf={asOfOf(shown)}
            grain={shown.drawnGrain.release}
            share={shareWords[filters.cause]}
          />
        </Figure>
      )}
      <div className="wide">
        <GroupTable
          number={tables.releases!}
          what="Release"
          groups={byRelease}
          total={null}
          hrefOf={hrefOf}
          filters={filters}
          extra={{ head: 'Board revision', cell: boardRevision }}
        />
        <div className="under">
          <CsvLink here={here} query={shown.query} table="groups" />
        </div>
      </div>
    </Section>
  )
}
