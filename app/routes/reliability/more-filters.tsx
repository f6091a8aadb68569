import { SelectField, TextField, type SelectGroup, type SelectOption } from '~/components/field'
import { evidenceFilterWords, methodFilterWords } from '~/domain/reliability/filter-words'
import { evidenceFilters, filterNames, methodFilters } from '~/domain/reliability/reliability-filters'
import { filledFilter, type FilterFormProps } from './filled-filter'

/** All values but the first, which is what an empty field means. */
const besides = <T extends string>([, ...values]: readonly T[], words: Record<T, string>): SelectOption[] =>
  values.map((value) => ({ value, label: words[value] }))

/** The filters that few need, under one disclosure; it stands open when one of them narrows the figures, or is wrong. */
export function MoreFilters(props: FilterFormProps) {
  const { filters, choices, errors } = props
  const read = {
    boardRevision: filters.boardRevision,
    batch: filters.batch,
    evidence: filters.evidence === 'any' ? null : filters.evidence,
    method: filters.method === 'any' ? null : filters.method,
    firstPower: filters.firstPower === 'counted' ? null : filters.firstPower,
    since: filters.since,
    silent: filters.silent === 'as-reported' ? null : filters.silent
  }
  const keys = Object.keys(read) as (keyof typeof read)[]
  const isWrong = (key: keyof typeof read) => errors.some((e) => e.path === filterNames[key])
  const used = keys.filter((key) => (read[key] !== null && key !== 'silent') || isWrong(key))
  const pick = (key: keyof typeof read, label: string, empty: string, options: (SelectOption | SelectGroup)[], hint?: string) => {
    const { value, error, withTyped } = filledFilter(props, filterNames[key], read[key])
    return (
      <SelectField
        name={filterNames[key]}
        label={label}
        hint={hint}
        empty={empty}
        options={withTyped(options)}
        defaultValue={value}
        error={error}
      />
    )
  }
  const since = filledFilter(props, filterNames.since, filters.since)
  return (
    <details className="nar" open={used.length > 0} key={used.join()}>
      <summary>More to narrow by</summary>
      <div className="mf">
        {choices.boardRevisions.length > 1 || used.includes('boardRevision')
          ? pick('boardRevision', 'Board revision', 'every board revision', choices.boardRevisions)
          : null}
        {choices.batches.groups.length > 0 || used.includes('batch')
          ? pick(
              'batch',
              'Batch',
              'every batch, and boards of none',
              choices.batches.groups,
              choices.batches.isCutOff ? 'The newest ones. Choose a release to see its own.' : undefined
            )
          : null}
        {pick('evidence', 'Fault of the console', evidenceFilterWords.any, besides(evidenceFilters, evidenceFilterWords))}
        {pick('method', 'Method', methodFilterWords.any, besides(methodFilters, methodFilterWords))}
        {pick('firstPower', 'Counted', 'from first power', [{ value: 'set-aside', label: 'given it worked on the bench' }])}
        <TextField
          name={filterNames.since}
          label="Fitted since"
          type={since.error ? 'text' : 'date'}
          defaultValue={since.value}
          error={since.error}
        />
        {pick('silent', 'Silent units', 'counted up to their last word', [
          { value: 'bounds', label: 'also at worst and at best' }
        ])}
      </div>
    </details>
  )
}
