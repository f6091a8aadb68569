import { queryWith } from '~/domain/reliability/filter-words'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import type { Day } from '~/lib/dates'

type Change = Parameters<typeof queryWith>[1]

/** Where the names on the page lead: the same figures of that one alone; null where this page is it already. */
export function hrefsOf(here: string, filters: ReliabilityFilters, today: Day) {
  const to = (change: Change) => {
    const query = queryWith(filters, change, today)
    return query === '' ? here : `${here}?${query}`
  }
  return {
    to,
    revision: (revision: string) => (filters.revision === revision ? null : to({ revision })),
    release: (release: string) => (filters.release === release ? null : to({ release, boardRevision: null })),
    boardRevision: (boardRevision: string) => (filters.boardRevision === boardRevision ? null : to({ boardRevision })),
    batch: (batch: string) => (filters.batch === batch ? null : to({ batch, release: null, boardRevision: null }))
  }
}
export type Hrefs = ReturnType<typeof hrefsOf>
