import type { Route } from './+types/endpoint'
import { reliabilityJson } from '~/domain/reliability/reliability-export'
import { reliabilityAsked } from '~/domain/reliability/reliability.server'
import { answerApi } from '~/server/answer.server'
import { services } from '~/server/services.server'

/** A board's reliability as JSON, under the filters of its page. */
export function loader({ params, url }: Route.LoaderArgs) {
  return answerApi(
    async () => reliabilityJson(params.board, await reliabilityAsked(services(), params.board, url.searchParams)),
    { 'Cache-Control': 'public, max-age=60' }
  )
}
