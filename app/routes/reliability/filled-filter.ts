import type { SelectGroup, SelectOption } from '~/components/field'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import type { FieldError } from '~/lib/domain-error'

export type FilterFormProps = {
  here: string
  board: { name: string; consoleName: string }
  choices: {
    releases: SelectOption[]
    revisions: SelectOption[]
    boardRevisions: SelectOption[]
    batches: { groups: SelectGroup[]; isCutOff: boolean }
  }
  filters: ReliabilityFilters
  /** As they stand in the address, to fill the form again where they cannot be read. */
  asked: Record<string, string>
  errors: FieldError[]
}

/** What a filter's field is filled with: what was read, or what was typed where that is wrong, also when it is no choice. */
export function filledFilter({ asked, errors }: Pick<FilterFormProps, 'asked' | 'errors'>, name: string, read: string | null) {
  const error = errors.find((e) => e.path === name)?.message
  const typed = error === undefined ? undefined : asked[name]
  return {
    error,
    value: typed ?? read ?? '',
    withTyped: <T extends SelectOption | SelectGroup>(options: T[]): (T | SelectOption)[] =>
      typed ? [...options, { value: typed, label: typed }] : options
  }
}
