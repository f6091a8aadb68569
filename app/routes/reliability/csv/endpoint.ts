import type { Route } from './+types/endpoint'
import { reliabilityCsv } from '~/domain/reliability/reliability-export'
import { reliabilityAsked } from '~/domain/reliability/reliability.server'
import { answerApi } from '~/server/answer.server'
import { services } from '~/server/services.server'

/** The life tables of the reliability page under the same filters. */
export function loader({ params, url }: Route.LoaderArgs) {
  return answerApi(async () => {
    const figures = await reliabilityAsked(services(), params.board, url.searchParams)
    return new Response(reliabilityCsv(params.board, figures), {
      headers: {
        'Content-Type': 'text/csv; charset=utf-8; header=present',
        'Content-Disposition': `attachment; filename="${params.board}-reliability-${figures.filters.asOf}.csv"`
      }
    })
  })
}
