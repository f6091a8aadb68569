import { Button } from '~/components/button'
import { ErrorSummary } from '~/components/error-summary'
import { SelectField, TextArea, TextField } from '~/components/field'
import { FileField } from '~/components/file-field'
import { Section } from '~/components/section'
import { TextLink } from '~/components/text-link'
import { intervalKinds, timeUnits } from '~/domain/survival/calculator.schema'
import { calculatorExamples } from '~/domain/survival/calculator-examples'
import type { FieldError } from '~/lib/domain-error'
import type { FormValues } from '~/lib/parse-form'

const here = '/calculators/survival'
const labels: Record<string, string> = {
  data: 'The table',
  file: 'The file',
  confidence: 'Confidence',
  interval: 'Kind of interval',
  tau: 'Time to read at',
  timeUnit: 'Unit of time'
}

export type CalculatorFormProps = {
  number: number
  values: FormValues
  errors: FieldError[]
  /** A file was sent, and a browser never sends it twice by itself. */
  fileIsGone: boolean
  hasFigures: boolean
}

/** One message a field: of several lines the first, and how many there are. */
function perField(errors: FieldError[]): FieldError[] {
  const fields = [...new Set(errors.map(({ path }) => path.split('.')[0]!))]
  return fields.map((path) => {
    const own = errors.filter((e) => e.path.split('.')[0] === path)
    const words = own.length === 1 ? own[0]!.message : `${own.length} lines cannot be used; the first is ${own[0]!.message}`
    return { path: path in labels ? path : '', message: words }
  })
}

/** The table, pasted or as a file, and how it is to be computed. Sent as a plain form: the answer is a page of its own. */
export function CalculatorForm({ number, values, errors, fileIsGone, hasFigures }: CalculatorFormProps) {
  const fields = perField(errors)
  const errorAt = (name: string) => fields.find(({ path }) => path === name)?.message
  const linesOf = (name: string) => errors.filter(({ path }) => path.startsWith(`${name}.`))
  return (
    <form method="post" action={here} encType="multipart/form-data" noValidate>
      <ErrorSummary errors={fields} before="this can be computed" labels={labels} />
      <Section
        number={number}
        id="table"
        heading={hasFigures ? 'Another table, or other settings' : 'Your table'}
        margin={<HowToWrite />}
      >
        {!hasFigures && (
          <p className="mb-6 max-w-[66ch]">
            No table at hand? See what comes out with an example: <Examples />.
          </p>
        )}
        <TextArea
          name="data"
          label="Paste a table"
          hint="One row a unit: how long it ran, and whether it failed. Straight from a spreadsheet, or as CSV."
          rows={hasFigures ? 8 : 12}
          spellCheck={false}
          placeholder={'days,failed,group\n120,1,A\n365,0,A\n80,1,B'}
          defaultValue={values.data ?? ''}
          error={errorAt('data')}
          isLong
        />
        <Lines errors={linesOf('data')} />
        <FileField
          name="file"
          label="Or choose a file"
          hint={
            fileIsGone
              ? 'The file that you sent was not kept: choose it again. CSV, at most 16 MiB and 200,000 rows.'
              : 'CSV, at most 16 MiB and 200,000 rows'
          }
          accept=".csv,.tsv,.txt,text/csv,text/plain,text/tab-separated-values"
          error={errorAt('file')}
        />
        <Lines errors={linesOf('file')} />
        <SelectField
          name="timeUnit"
          label="Unit of time"
          hint="Only names the axis; the numbers are taken as they stand."
          options={timeUnits.map((value) => ({ value, label: value }))}
          defaultValue={values.timeUnit ?? 'days'}
          error={errorAt('timeUnit')}
        />
        <TextField
          name="tau"
          label="Time to read at"
          isOptional
          hint="The share still working is read at this time, and the mean time in work counted up to it. In the unit above."
          inputMode="decimal"
          defaultValue={values.tau ?? ''}
          error={errorAt('tau')}
        />
        <TextField
          name="confidence"
          label="Confidence"
          unit="%"
          inputMode="decimal"
          defaultValue={values.confidence ?? '95'}
          error={errorAt('confidence')}
        />
        <SelectField
          name="interval"
          label="Kind of interval"
          hint="Of the curve’s limits. Failures known only between two days have limits by resampling instead."
          options={[...intervalKinds]}
          defaultValue={values.interval ?? 'log-log'}
          error={errorAt('interval')}
        />
        <div className="mt-6">
          <Button>Compute</Button>
        </div>
        {hasFigures && (
          <p className="small soft mt-4">
            Examples: <Examples />. <TextLink href={here}>Begin with an empty form</TextLink>
          </p>
        )}
      </Section>
    </form>
  )
}

function Examples() {
  return calculatorExamples.map(({ name, label }, i) => (
    <span key={name}>
      {i > 0 && ', '}
      <TextLink href={`${here}?example=${name}`}>{label.toLowerCase()}</TextLink>
    </span>
  ))
}

/** Each line that is wrong, below its field. */
function Lines({ errors }: { errors: FieldError[] }) {
  if (errors.length < 2) return null
  return (
    <ul className="small mb-4 list-disc pl-6">
      {errors.map(({ path, message }) => (
        <li key={path}>{message}</li>
      ))}
    </ul>
  )
}

function HowToWrite() {
  return (
    <>
      <p>
        <b>Columns</b>, in any order, by their headings: <b>time</b> (or days, weeks …) and <b>event</b> (failed, status, cause):
        0 or no for still working, 1 or yes for failed, or the cause’s name.
      </p>
      <p>
        <b>Failures found later:</b> lower and upper, the last time seen working and the time found failed. Leave upper empty when
        none was seen.
      </p>
      <p>
        <b>May be added:</b> group, entry (watched only from then on), weight (units that share the row).
      </p>
      <p>Commas, semicolons or tabs; with the latter two a decimal comma is read.</p>
    </>
  )
}
