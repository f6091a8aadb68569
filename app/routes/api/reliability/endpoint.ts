import type { Route } from './+types/endpoint'
import { reliabilityTextAsked } from '~/domain/reliability/reliability.server'
import { answerApi } from '~/server/answer.server'
import { services } from '~/server/services.server'

/** A board's reliability as JSON, under the filters of its page. */
export function loader({ params, url }: Route.LoaderArgs) {
  return answerApi(async () => {
    const { text } = await reliabilityTextAsked(services(), params.board, url.searchParams, 'json')
    return new Response(text, {
      headers: { 'Content-Type': 'application/json; charset=utf-8', 'Cache-Control': 'public, max-age=60' }
    })
  })
}
