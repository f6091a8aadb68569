import type { Route } from './+types/endpoint'
import { filtersFor, reliabilityCsv, tableAsked } from '~/domain/reliability/reliability-export'
import { reliabilityAsked } from '~/domain/reliability/reliability.server'
import { answerApi } from '~/server/answer.server'
import { services } from '~/server/services.server'

/** A table of the reliability page under the same filters: the steps of the curves, or the one that `table` names. */
export function loader({ params, url }: Route.LoaderArgs) {
  return answerApi(async () => {
    const table = tableAsked(url.searchParams)
    const figures = await reliabilityAsked(services(), params.board, url.searchParams, (filters) => filtersFor(table, filters))
    const name = table === 'curve' ? 'reliability' : table
    return new Response(reliabilityCsv(params.board, figures, table), {
      headers: {
        'Content-Type': 'text/csv; charset=utf-8; header=present',
        'Content-Disposition': `attachment; filename="${params.board}-${name}-${figures.filters.asOf}.csv"`
      }
    })
  })
}
