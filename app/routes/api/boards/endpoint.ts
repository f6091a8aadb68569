import type { Route } from './+types/endpoint'
import { boardsJson } from '~/domain/public-data/releases-json.server'
import { answerResource } from '~/server/answer-json.server'
import { services } from '~/server/services.server'

export const loader = ({ request, url }: Route.LoaderArgs) => answerResource(request, () => boardsJson(services().db, url))
