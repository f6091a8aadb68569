import { Figure } from '~/components/figure'
import { IncidenceChart } from '~/components/incidence-chart'
import { Section, SubHeading } from '~/components/section'
import { Table } from '~/components/table'
import { tooFew } from '~/domain/reliability/reliability-words'
import type { CalculatorFigures } from '~/domain/survival/calculator-figures'
import { confidenceText, timeText } from '~/domain/survival/calculator-words'
import { chartName } from './chart-name'

/** Cumulative incidence by cause, a figure for each group that is drawn. */
export function CausesResult({ number, figures: { groups, options, readAt } }: { number: number; figures: CalculatorFigures }) {
  const drawn = groups.filter((g) => g.points !== null && g.causes.some((cause) => cause.points.length > 0))
  const rows = groups.flatMap((g) => g.causes.map((cause) => ({ group: g.name, ...cause }))).slice(0, 200)
  return (
    <Section number={number} heading="What failed">
      <p className="mb-4 max-w-[66ch]">
        The share that failed from each cause while the others were there too. One cause excludes the others, so the lines and the
        share still working add up to all.
      </p>
      {drawn.map((group, i) => (
        <div key={group.name} className="mb-6">
          {groups.length > 1 && <SubHeading>{group.name}</SubHeading>}
          <Figure
            number={2 + i}
            caption={`Cumulative incidence by cause, by Aalen and Johansen, the largest with its ${confidenceText(options.confidence)} band${group.causes.length > 6 ? '; the six largest are drawn' : ''}.`}
          >
            <IncidenceChart
              causes={largest(group.causes)}
              unit="day"
              plainUnit={options.timeUnit}
              reading={readAt === null ? undefined : { days: readAt, words: `${timeText(readAt)} ${options.timeUnit}` }}
              grain={group.causeGrain}
              sure={confidenceText(options.confidence)}
            />
          </Figure>
        </div>
      ))}
      <Table
        number={2}
        caption={`Share failed from each cause by the last time at which ${tooFew} units were at risk, with its standard error.`}
        rows={rows}
        rowKey={(row) => `${row.group}\n${row.name}`}
        columns={[
          ...(groups.length > 1 ? [{ key: 'group', head: 'Group', cell: (row: (typeof rows)[number]) => row.group }] : []),
          { key: 'cause', head: 'Cause', isRowHead: true, className: 'break-words', cell: (row) => row.name },
          {
            key: 'until',
            head: `By, ${options.timeUnit}`,
            isFigure: true,
            cell: (row) => (row.until === null ? '' : timeText(row.until))
          },
          { key: 'share', head: 'Share failed', isFigure: true, cell: (row) => row.last?.toFixed(4) ?? 'too few' },
          { key: 'error', head: 'Standard error', isFigure: true, cell: (row) => row.standardError?.toFixed(4) ?? '' }
        ]}
      />
    </Section>
  )
}

function largest(causes: CalculatorFigures['groups'][number]['causes']) {
  const most = [...causes].sort((a, b) => (b.last ?? 0) - (a.last ?? 0)).slice(0, 6)
  return most.map((cause, i) => ({ name: chartName(most, i), points: cause.points }))
}
