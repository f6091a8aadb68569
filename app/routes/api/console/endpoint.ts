import type { Route } from './+types/endpoint'
import { consoleJson } from '~/domain/public-data/consoles-json.server'
import { answerResource } from '~/server/answer-json.server'
import { services } from '~/server/services.server'

export const loader = ({ request, url, params }: Route.LoaderArgs) =>
  answerResource(request, () => consoleJson(services().db, url, params.console))
