import type { Route } from './+types/endpoint'
import { computeWorker } from '~/domain/reliability/worker-client.server'
import { maxBytes } from '~/domain/survival/compute-survival.schema'
import { answerApi } from '~/server/answer.server'
import { readBody } from '~/server/read-body.server'

/** Computes survival from anybody's own data; nothing is stored. */
export function action({ request }: Route.ActionArgs) {
  return answerApi(async () => {
    if (request.method !== 'POST') return notAllowed()
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
