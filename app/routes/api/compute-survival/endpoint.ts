import type { Route } from './+types/endpoint'
import { callerOf, countUse } from '~/domain/accounts/rate-limit.server'
import { computeWorker } from '~/domain/reliability/worker-client.server'
import { maxBytes } from '~/domain/survival/compute-survival.schema'
import { answerApi } from '~/server/answer.server'
import { requestInfoContext } from '~/server/context'
import { readBody } from '~/server/read-body.server'
import { services } from '~/server/services.server'

const perMinute = { kind: 'compute', limit: 60, windowMs: 60_000 }

/** Computes survival from anybody's own data; nothing is stored. */
export function action({ request, context }: Route.ActionArgs) {
  return answerApi(async () => {
    if (request.method !== 'POST') return notAllowed()
    await countUse(services(), perMinute, callerOf(context.get(requestInfoContext).ip))
    const body = await readBody(request, 'application/json', maxBytes)
    const text = await computeWorker().run({ kind: 'survival', body }, 60_000)
    return new Response(text, { headers: { 'Content-Type': 'application/json', 'Cache-Control': 'no-store' } })
  })
}

export const loader = () => notAllowed()

const notAllowed = () =>
  Response.json(
    { type: 'about:blank', title: 'Method not allowed', status: 405, detail: 'Send the data with POST.', errors: [] },
    { status: 405, headers: { Allow: 'POST', 'Content-Type': 'application/problem+json' } }
  )
