import { Section } from '~/components/section'
import { Table } from '~/components/table'
import type { CalculatorFigures, CalculatorGroup } from '~/domain/survival/calculator-figures'
import { confidenceText } from '~/domain/survival/calculator-words'

const share = (value: number | null) => (value === null ? '' : value.toFixed(4))
const openAtMost = 30

/** Every step of every curve, folded where there are many. */
export function StepsResult({ number, figures }: { number: number; figures: CalculatorFigures }) {
  const { groups } = figures
  const shown = groups.filter((g) => g.steps.length > 0)
  const left = groups.reduce((sum, g) => sum + g.stepCount - g.steps.length, 0)
  return (
    <Section number={number} heading={groups.length > 1 ? 'Every step of the curves' : 'Every step of the curve'}>
      {shown.map((group) => (
        <details key={group.name} open={shown.length === 1 && group.steps.length <= openAtMost} className="mb-3">
          <summary className="min-h-[44px] py-2 font-semibold break-words">
            {group.name}:{' '}
            {group.steps.length < group.stepCount
              ? `the first ${group.steps.length} of ${group.stepCount} steps`
              : `${group.stepCount} steps`}
          </summary>
          <Steps figures={figures} group={group} />
        </details>
      ))}
      {shown.length === 0 && <p>No curve has a step.</p>}
      {left > 0 && (
        <p className="small soft mt-3">
          {left} further steps are not shown: a page holds 600. The endpoint and the command line give them all.
        </p>
      )}
    </Section>
  )
}

function Steps({ figures: { options, method }, group }: { figures: CalculatorFigures; group: CalculatorGroup }) {
  const kind =
    method === 'turnbull'
      ? 'by resampling'
      : `${options.interval}; marked ≥ where the lower one is the exact bound of a curve without a failure`
  return (
    <Table
      isDense
      caption={`${group.name}: share still working, with ${confidenceText(options.confidence)} limits, ${kind}.`}
      rows={group.steps}
      rowKey={(row) => String(row.time)}
      columns={[
        { key: 'time', head: `Time, ${options.timeUnit}`, isFigure: true, isRowHead: true, cell: (row) => row.time },
        { key: 'risk', head: method === 'turnbull' ? 'Possibly at risk' : 'At risk', isFigure: true, cell: (row) => row.atRisk },
        ...(method === 'turnbull'
          ? []
          : [
              { key: 'failed', head: 'Failed', isFigure: true, cell: (row: CalculatorGroup['steps'][number]) => row.events },
              { key: 'left', head: 'Left', isFigure: true, cell: (row: CalculatorGroup['steps'][number]) => row.censored }
            ]),
        {
          key: 'survival',
          head: 'Working',
          isFigure: true,
          weight: 'bold',
          cell: (row) => (row.bound ? 'none failed' : share(row.survival))
        },
        { key: 'lower', head: 'Lower', isFigure: true, cell: (row) => (row.bound ? `≥ ${share(row.lower)}` : share(row.lower)) },
        { key: 'upper', head: 'Upper', isFigure: true, cell: (row) => (row.bound ? '' : share(row.upper)) }
      ]}
    />
  )
}
