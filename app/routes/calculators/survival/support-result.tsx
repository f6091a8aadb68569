import { Section } from '~/components/section'
import { Table } from '~/components/table'
import type { CalculatorFigures } from '~/domain/survival/calculator-figures'
import { timeText } from '~/domain/survival/calculator-words'

/** The innermost intervals of the Turnbull estimate and the mass on each. */
export function SupportResult({ number, figures: { groups, options } }: { number: number; figures: CalculatorFigures }) {
  const rows = groups.flatMap((g) => g.support.map((cell) => ({ group: g.name, ...cell })))
  const left = groups.reduce((sum, g) => sum + g.supportCount, 0) - rows.length
  return (
    <Section number={number} heading="Where the failures can lie">
      <p className="mb-4 max-w-[66ch]">
        The data place failures only within these intervals, and say nothing about where inside them: there the share still
        working is not determined. Outside them it is.
      </p>
      <Table
        number={2}
        caption={`Innermost intervals, after “from” up to and including “to”, in ${options.timeUnit}, with the share that failed there.`}
        rows={rows}
        rowKey={(row) => `${row.group}\n${row.lower}\n${row.upper}`}
        columns={[
          ...(groups.length > 1 ? [{ key: 'group', head: 'Group', cell: (row: (typeof rows)[number]) => row.group }] : []),
          { key: 'from', head: 'From', isFigure: true, isRowHead: true, cell: (row) => timeText(row.lower) },
          { key: 'to', head: 'To', isFigure: true, cell: (row) => (row.upper === null ? 'no end' : timeText(row.upper)) },
          { key: 'mass', head: 'Share failed', isFigure: true, cell: (row) => row.mass.toFixed(4) }
        ]}
      />
      {left > 0 && <p className="small soft">{left} further intervals are not shown; the endpoint gives them all.</p>}
    </Section>
  )
}
