import { DifferenceAxisCell, DifferenceCell, differenceReach } from '~/components/difference-bar'
import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { comparisonSentence, pairVerdict, untoldWords } from '~/domain/reliability/comparison-words'
import type { PairFigures } from '~/domain/reliability/figures.types'
import { pText } from '~/domain/reliability/reliability-words'
import { CsvLink, GuideLink } from './csv-link'
import type { SectionProps } from './curves-section'
import type { ShownComparison } from './shown-comparison'

const headings = { revision: 'Console revisions', release: 'Releases' } as const
const tableOf = { revision: 'comparedRevisions', release: 'comparedReleases' } as const

/** Whether revisions and releases can be told apart, by how much, and what the figures leave open. */
export function ComparisonSection({ here, shown, sections, tables }: SectionProps) {
  const { comparisons, query } = shown
  return (
    <Section
      number={sections.comparison!}
      id="comparison"
      heading="Can they be told apart?"
      margin={
        <>
          <p>
            <b>Log-rank test,</b> failures on the day they were found. Each pair’s <i>p</i> is raised for the number of pairs
            (Holm), since of many pairs one differs by luck. <GuideLink to="worked-examples#two-groups">Worked by hand</GuideLink>
          </p>
          <p>
            <b>Days</b> are mean days without failure in the first year; their intervals are each pair’s own. The test looks at
            every day followed, also later ones. <GuideLink to="worked-examples#difference">Worked by hand</GuideLink>
          </p>
        </>
      }
    >
      {comparisons.map((comparison) => (
        <div key={comparison.by} className="cmp">
          {comparisons.length > 1 && <h3>{headings[comparison.by]}</h3>}
          <Compared comparison={comparison} number={tables[tableOf[comparison.by]]!} />
          <CsvLink here={here} query={query} table="comparison">
            Every pair as CSV
          </CsvLink>
        </div>
      ))}
    </Section>
  )
}

function Compared({ comparison, number }: { comparison: ShownComparison; number: number }) {
  const { reference, beside, others } = comparison
  const hasDays = beside.some((pair) => pair.meanDifference !== null)
  const reach = differenceReach([...beside, ...others].flatMap(({ meanDifference }) => meanDifference ?? []))
  return (
    <>
      <p>
        {comparisonSentence(comparison) ?? 'No test can be made: too little failed while more than one of them was followed.'}
      </p>
      <div>
        <Pairs
          pairs={beside}
          number={number}
          reach={reach}
          head={`Beside ${reference}`}
          nameOf={(pair) => pair.second}
          caption={`Mean days without failure in the first year that each has more or less than ${reference}, with 95\u00a0% interval${hasDays ? `, on a scale of ${reach} days to both sides` : ''}.`}
        />
      </div>
      {others.length > 0 && (
        <details>
          <summary className="min-h-[44px] py-2 font-semibold">
            {others.length === 1 ? 'The other pair' : `The other ${others.length} pairs`}
          </summary>
          <Pairs
            pairs={others}
            reach={reach}
            head="Pair"
            nameOf={(pair) => `${pair.second} beside ${pair.first}`}
            caption="The same for the pairs among the others."
          />
        </details>
      )}
      <div>
        <p className="b">What these figures cannot tell</p>
        <ul className="list-disc pl-5">
          {untoldWords(comparison).map((words) => (
            <li key={words}>{words}</li>
          ))}
        </ul>
      </div>
    </>
  )
}

type PairsProps = {
  pairs: PairFigures[]
  number?: number
  reach: number
  head: string
  nameOf: (pair: PairFigures) => string
  caption: string
}

function Pairs({ pairs, number, reach, head, nameOf, caption }: PairsProps) {
  return (
    <Table
      number={number}
      className="ivt"
      caption={caption}
      rows={pairs}
      rowKey={(pair) => `${pair.first}\n${pair.second}`}
      columns={[
        {
          key: 'name',
          head,
          isRowHead: true,
          cell: (pair) => (
            <>
              {nameOf(pair)}
              <small className="on-n soft">{pairVerdict(pair)}</small>
              <small className="on-n soft">{adjusted(pair)}</small>
            </>
          )
        },
        { key: 'days', head: 'Days in the first year', className: 'iv', cell: (pair) => <Days pair={pair} reach={reach} /> },
        {
          key: 'verdict',
          head: 'By the test',
          only: 'wide',
          cell: (pair) => (
            <>
              {pairVerdict(pair)}
              <small className="soft block">{adjusted(pair)}</small>
            </>
          )
        }
      ]}
      after={
        pairs.some((pair) => pair.meanDifference !== null) && (
          <tr className="ax" aria-hidden="true">
            <td />
            <td className="iv">
              <DifferenceAxisCell reach={reach} />
            </td>
            <td className="w" />
          </tr>
        )
      }
    />
  )
}

const adjusted = ({ logRank }: PairFigures) => logRank && `adjusted ${pText(logRank.adjustedP).replaceAll(' ', '\u00a0')}`

function Days({ pair: { meanDifference }, reach }: { pair: PairFigures; reach: number }) {
  if (meanDifference === null) return <span className="soft">not to be told</span>
  return (
    <>
      <DifferenceCell {...meanDifference} reach={reach} />
      {meanDifference.tau < 365 && <small className="soft block">up to day {meanDifference.tau} only</small>}
    </>
  )
}
