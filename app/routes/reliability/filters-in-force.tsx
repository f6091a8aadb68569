import { TextLink } from '~/components/text-link'
import { filtersInForce } from '~/domain/reliability/filter-words'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import type { Day } from '~/lib/dates'

type Props = { here: string; filters: ReliabilityFilters; today: Day }

const withQuery = (here: string, query: string) => (query === '' ? here : `${here}?${query}`)

/** What narrows the figures, each with the way to take it away. Nothing when all is counted. */
export function FiltersInForce({ here, filters, today }: Props) {
  const inForce = filtersInForce(filters, today)
  if (inForce.length === 0) return null
  return (
    <div className="inf">
      <span className="soft">In force</span>
      <ul>
        {inForce.map(({ name, words, without }) => (
          <li key={name}>
            <b>{words}</b>{' '}
            <TextLink href={withQuery(here, without)} aria-label={`Take away: ${words}`}>
              take away
            </TextLink>
          </li>
        ))}
      </ul>
      {inForce.length > 1 && <TextLink href={here}>Count all</TextLink>}
    </div>
  )
}
