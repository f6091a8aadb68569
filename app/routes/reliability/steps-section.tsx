import { Button } from '~/components/button'
import { SelectField } from '~/components/field'
import { Pager } from '~/components/pager'
import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { stepsPageSize, type ShownFigures } from './page-figures'

const share = (value: number | null) => (value === null ? '' : value.toFixed(4))

/** Every step of one curve in figures. */
export function StepsSection({ number, here, shown }: { number: number; here: string; shown: ShownFigures }) {
  const { steps, query } = shown
  const hrefOf = (page: number) => `${here}?${query}&steps=${encodeURIComponent(steps.key)}&page=${page}#steps`
  return (
    <Section
      number={number}
      id="steps"
      heading="Every step of the curve"
      margin={
        <p>
          <TextLink document href={`${here}.csv?${query}`}>
            All curves as CSV
          </TextLink>
        </p>
      }
    >
      <form action={`${here}#steps`} method="get" className="mb-6" key={steps.key}>
        {[...new URLSearchParams(query)].map(([name, value]) => (
          <input key={name} type="hidden" name={name} value={value} />
        ))}
        <SelectField name="steps" label="Curve of" options={steps.choices} defaultValue={steps.key} />
        <div className="mt-3">
          <Button kind="outline">Show its steps</Button>
        </div>
      </form>
      <Table
        number={4}
        isDense
        caption={`The curve of ${steps.label}: one row for each day with a failure or a last word. Limits are 95 %, log-log; marked ≥ where the lower one is the exact bound of a curve without a failure.`}
        rows={steps.rows}
        rowKey={(row) => String(row.time)}
        columns={[
          { key: 'time', head: 'Day', isFigure: true, isRowHead: true, cell: (row) => row.time },
          { key: 'risk', head: 'At risk', isFigure: true, cell: (row) => row.atRisk },
          { key: 'failed', head: 'Failed', isFigure: true, cell: (row) => row.events },
          { key: 'censored', head: 'Last word', isFigure: true, cell: (row) => row.censored },
          {
            key: 'survival',
            head: 'Working',
            isFigure: true,
            weight: 'bold',
            cell: (row) => (row.bound ? 'none failed' : share(row.survival))
          },
          {
            key: 'lower',
            head: 'Lower',
            isFigure: true,
            cell: (row) => (row.bound ? `≥ ${share(row.lower)}` : share(row.lower))
          },
          { key: 'upper', head: 'Upper', isFigure: true, cell: (row) => (row.bound ? '' : share(row.upper)) }
        ]}
      />
      <Pager
        page={steps.page}
        pageSize={stepsPageSize}
        total={steps.total}
        of="steps"
        hrefOf={hrefOf}
        words={{ back: 'Before', on: 'After' }}
      />
      <p className="small mt-6">
        Lives of your own? <TextLink href="/calculators/survival">The survival calculator</TextLink> makes the same figures from
        any table.
      </p>
    </Section>
  )
}
