import type { Route } from './+types/endpoint'
import { boardJson } from '~/domain/public-data/releases-json.server'
import { answerResource } from '~/server/answer-json.server'
import { services } from '~/server/services.server'

export const loader = ({ request, url, params }: Route.LoaderArgs) =>
  answerResource(request, () => boardJson(services().db, url, params.board))
