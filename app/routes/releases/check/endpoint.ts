import type { Route } from './+types/endpoint'
import { runOf } from '~/domain/releases/check-runs.server'
import { draftToEdit } from '~/domain/releases/board-releases.server'
import { answerApi } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { services } from '~/server/services.server'

/** How far the upload or check of a draft is; asked while it runs. */
export const loader = ({ params, context }: Route.LoaderArgs) =>
  answerApi(
    async () => {
      const { release } = await draftToEdit(services().db, context.get(actorContext), params.board, params.version)
      return runOf(release.id) ?? { phase: 'none', step: null }
    },
    { 'Cache-Control': 'private, no-store' }
  )
