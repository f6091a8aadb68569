import type { Route } from './+types/endpoint'
import { tableAsked } from '~/domain/reliability/reliability-export'
import { reliabilityTextAsked } from '~/domain/reliability/reliability.server'
import { answerApi } from '~/server/answer.server'
import { services } from '~/server/services.server'

/** A table of the reliability page under the same filters: the steps of the curves, or the one that `table` names. */
export function loader({ params, url }: Route.LoaderArgs) {
  return answerApi(async () => {
    const table = tableAsked(url.searchParams)
    const { text, asOf } = await reliabilityTextAsked(services(), params.board, url.searchParams, table)
    const name = table === 'curve' ? 'reliability' : table
    return new Response(text, {
      headers: {
        'Content-Type': 'text/csv; charset=utf-8; header=present',
        'Content-Disposition': `attachment; filename="${params.board}-${name}-${asOf}.csv"`
      }
    })
  })
}
