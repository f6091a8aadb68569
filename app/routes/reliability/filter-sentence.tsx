import { SentenceForm } from '~/components/sentence-form'
import type { SelectOption } from '~/components/field'
import { filterNames, type ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import type { FieldError } from '~/lib/domain-error'

const evidenceOptions: SelectOption[] = [
  { value: 'established', label: 'measured or code-read' },
  { value: 'measured', label: 'measured' },
  { value: 'code-read', label: 'code-read' },
  { value: 'symptom-only', label: 'only from the symptom' },
  { value: 'none', label: 'not checked' }
]
const firstPowerOptions: SelectOption[] = [{ value: 'set-aside', label: 'worked at first power' }]

type Props = {
  here: string
  board: { name: string; consoleName: string }
  choices: { releases: SelectOption[]; revisions: SelectOption[] }
  filters: ReliabilityFilters
  /** As they stand in the address, to fill the form again where they cannot be read. */
  asked: Record<string, string>
  errors: FieldError[]
}

/** Which reports are counted, as a sentence; its answer is an address. */
export function FilterSentence({ here, board, choices, filters, asked, errors }: Props) {
  const wrong = (name: string) => errors.find((e) => e.path === name)?.message
  const value = (name: string, read: string | null) => (wrong(name) ? asked[name] : (read ?? ''))
  // A value that is no choice still stands in the form, so that it can be seen and mended.
  const withAsked = (name: string, options: SelectOption[]) =>
    wrong(name) && asked[name] ? [...options, { value: asked[name], label: asked[name] }] : options
  return (
    <SentenceForm
      action={here}
      label="Which reports are counted"
      submit="Count again"
      isOutlined
      span="full"
      parts={[
        'Counting',
        {
          name: filterNames.release,
          label: 'Release',
          empty: `all releases of ${board.name}`,
          options: withAsked(filterNames.release, choices.releases),
          value: value(filterNames.release, filters.release),
          error: wrong(filterNames.release)
        },
        'in',
        {
          name: filterNames.revision,
          label: 'Console revision',
          empty: `every ${board.consoleName}`,
          options: withAsked(filterNames.revision, choices.revisions),
          value: value(filterNames.revision, filters.revision),
          error: wrong(filterNames.revision)
        },
        'fault',
        {
          name: filterNames.evidence,
          label: 'How the fault was established',
          empty: 'established in any way',
          options: withAsked(filterNames.evidence, evidenceOptions),
          value: value(filterNames.evidence, filters.evidence === 'any' ? null : filters.evidence),
          error: wrong(filterNames.evidence)
        },
        'and',
        {
          name: filterNames.firstPower,
          label: 'First power',
          empty: 'any first-power result',
          options: withAsked(filterNames.firstPower, firstPowerOptions),
          value: value(filterNames.firstPower, filters.firstPower === 'counted' ? null : filters.firstPower),
          error: wrong(filterNames.firstPower)
        },
        'as known on',
        {
          name: filterNames.asOf,
          label: 'As of',
          type: wrong(filterNames.asOf) ? 'text' : 'date',
          value: value(filterNames.asOf, filters.asOf),
          size: 10,
          error: wrong(filterNames.asOf)
        }
      ]}
    />
  )
}
