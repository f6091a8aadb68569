import { SentenceForm } from '~/components/sentence-form'
import type { SelectOption } from '~/components/field'
import { causeFilterWords } from '~/domain/reliability/filter-words'
import { causeFilters, filterNames } from '~/domain/reliability/reliability-filters'
import { filledFilter, type FilterFormProps } from './filled-filter'
import { MoreFilters } from './more-filters'

const causeOptions: SelectOption[] = causeFilters
  .filter((cause) => cause !== 'all')
  .map((cause) => ({ value: cause, label: causeFilterWords[cause] }))

/** Which reports are counted, as a sentence; its answer is an address. */
export function FilterSentence(props: FilterFormProps) {
  const { here, board, choices, filters } = props
  const select = (name: string, label: string, empty: string, options: SelectOption[], read: string | null) => {
    const { error, value, withTyped } = filledFilter(props, name, read)
    return { name, label, empty, options: withTyped(options), value, error }
  }
  const asOf = filledFilter(props, filterNames.asOf, filters.asOf)
  return (
    <SentenceForm
      action={here}
      label="Which reports are counted"
      submit="Count again"
      isOutlined
      span="full"
      parts={[
        'Counting',
        select(filterNames.release, 'Release', `all releases of ${board.name}`, choices.releases, filters.release),
        'in',
        select(filterNames.revision, 'Console revision', `every ${board.consoleName}`, choices.revisions, filters.revision),
        'until',
        select(
          filterNames.cause,
          'What ends a life',
          causeFilterWords.all,
          causeOptions,
          filters.cause === 'all' ? null : filters.cause
        ),
        'as known on',
        {
          name: filterNames.asOf,
          label: 'As of',
          type: asOf.error ? 'text' : 'date',
          value: asOf.value,
          size: 10,
          error: asOf.error
        }
      ]}
    >
      <MoreFilters {...props} />
    </SentenceForm>
  )
}
