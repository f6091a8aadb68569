import type { Route } from './+types/endpoint'
import { consolesJson } from '~/domain/public-data/consoles-json.server'
import { answerResource } from '~/server/answer-json.server'
import { services } from '~/server/services.server'

export const loader = ({ request, url }: Route.LoaderArgs) => answerResource(request, () => consolesJson(services().db, url))
