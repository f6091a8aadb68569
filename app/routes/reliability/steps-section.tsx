import { Button } from '~/components/button'
import { SelectOptions } from '~/components/field'
import { Pager } from '~/components/pager'
import { Section } from '~/components/section'
import { Table, type Column } from '~/components/table'
import { TextLink } from '~/components/text-link'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import { CsvLink, GuideLink } from './csv-link'
import type { SectionProps } from './curves-section'
import { stepsPageSize, type ShownFigures } from './page-figures'

type Steps = ShownFigures['steps']
type Step = Steps['rows'][number]
type Mass = NonNullable<Steps['support']>['rows'][number]

const share = (value: number | null) => (value === null ? '' : value.toFixed(4))

/** Every step of one curve in figures, and where Turnbull places failures. */
export function StepsSection({
  here,
  shown,
  sections,
  tables,
  filters
}: SectionProps & { filters: Pick<ReliabilityFilters, 'cause'> }) {
  const { steps, query } = shown
  const { support } = steps
  const at = `${here}?${query}&steps=${encodeURIComponent(steps.key)}`
  return (
    <Section
      number={sections.steps!}
      id="steps"
      heading="Every step of the curve"
      margin={
        <>
          <p>
            <b>{steps.estimator === 'turnbull' ? 'By Turnbull.' : 'By Kaplan and Meier.'}</b>{' '}
            <GuideLink to={steps.estimator === 'turnbull' ? 'worked-examples#intervals' : 'worked-examples#curve'}>
              Worked by hand
            </GuideLink>
          </p>
          <p>
            <TextLink document href={`/api/v1${here}?${query}`}>
              All figures as JSON
            </TextLink>
          </p>
          <CsvLink here={here} query={query} table="hazard">
            Cumulative hazards as CSV
          </CsvLink>
        </>
      }
    >
      <StepsChoice here={here} query={query} steps={steps} />
      <div>
        <Table
          number={tables.steps!}
          isDense
          caption={stepsCaption(steps)}
          rows={steps.rows}
          rowKey={(row) => String(row.time)}
          columns={columnsOf(steps.estimator, filters.cause === 'all' ? 'Working' : 'Not so failed')}
        />
        <Pager
          page={steps.page}
          pageSize={stepsPageSize}
          total={steps.total}
          of="steps"
          hrefOf={(page) => `${at}&page=${page}#steps`}
          words={{ back: 'Before', on: 'After' }}
        />
        <CsvLink here={here} query={query} table="curve">
          Every step of every curve as CSV
        </CsvLink>
      </div>
      {support !== null && (
        <div>
          <Table<Mass>
            number={tables.support!}
            isDense
            caption={`Where the curve of ${steps.label} can fall: by how much, and when. Between two days it is not determined.`}
            rows={support.rows}
            rowKey={(row) => `${row.lower} ${row.upper}`}
            columns={[
              { key: 'when', head: 'When', isRowHead: true, cell: whenText },
              { key: 'mass', head: 'Share failed', isFigure: true, weight: 'bold', cell: (row) => share(row.mass) }
            ]}
          />
          <Pager
            page={support.page}
            pageSize={stepsPageSize}
            total={support.total}
            of="stretches"
            hrefOf={(page) => `${at}&masses=${page}#steps`}
            words={{ back: 'Before', on: 'After' }}
          />
          <CsvLink here={here} query={query} table="support" />
        </div>
      )}
      <p className="small">
        Lives of your own? <TextLink href="/calculators/survival">The survival calculator</TextLink> makes the same figures from
        any table.
      </p>
    </Section>
  )
}

function StepsChoice({ here, query, steps }: { here: string; query: string; steps: Steps }) {
  if (steps.choices.length < 2) return null
  return (
    <form action={`${here}#steps`} method="get" key={steps.key}>
      {[...new URLSearchParams(query)].map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <div className="mk">
        <label htmlFor="steps-of">Curve of</label>
        <select id="steps-of" name="steps" defaultValue={steps.key}>
          <SelectOptions options={steps.choices} />
        </select>
        <Button kind="outline">Show its steps</Button>
      </div>
    </form>
  )
}

function whenText({ lower, upper }: Mass): string {
  if (upper === null) return `after day ${lower}, no end`
  return lower === upper ? `on day ${upper}` : `after day ${Math.max(0, lower)}, up to day ${upper}`
}

const stepsCaption = ({ label, estimator }: Steps) =>
  estimator === 'turnbull'
    ? `The curve of ${label}: one row for each day of a last word on which it is known, and for each end of a stretch on which it is. Limits are 95\u00a0%, by resampling; marked ≥ where the lower one is an exact bound.`
    : `The curve of ${label}: one row for each day with a failure or a last word. Limits are 95\u00a0%, log-log; marked ≥ where the lower one is the exact bound of a curve without a failure.`

/** @param head what the share is one of, as short as a column is wide */
function columnsOf(estimator: Steps['estimator'], head: string): Column<Step>[] {
  const isTurnbull = estimator === 'turnbull'
  const counted: Column<Step>[] = isTurnbull
    ? []
    : [
        { key: 'failed', head: 'Failed', isFigure: true, cell: (row) => row.events },
        { key: 'censored', head: 'Last word', isFigure: true, cell: (row) => row.censored }
      ]
  return [
    { key: 'time', head: 'Day', isFigure: true, isRowHead: true, cell: (row) => row.time },
    { key: 'risk', head: isTurnbull ? 'Perhaps at risk' : 'At risk', isFigure: true, cell: (row) => row.atRisk },
    ...counted,
    {
      key: 'survival',
      head,
      isFigure: true,
      weight: 'bold',
      cell: (row) => (row.bound || row.survival >= 1 ? 'none failed' : share(row.survival))
    },
    { key: 'lower', head: 'Lower', isFigure: true, cell: (row) => (row.bound ? `≥ ${share(row.lower)}` : share(row.lower)) },
    { key: 'upper', head: 'Upper', isFigure: true, cell: (row) => (row.bound ? '' : share(row.upper)) }
  ]
}
