import { createHash } from 'node:crypto'
import { isNoneMatchHit } from '~/lib/byte-range'
import { answerApi } from './answer.server'

/**
 * A read-only JSON resource of the API: the answer with an entity tag over its bytes, kept by caches for a minute and asked for again with the
 * tag after it; expected failures as problem details, which are not kept.
 */
export function answerResource(request: Request, work: () => Promise<unknown>): Promise<Response> {
  return answerApi(async () => {
    const body = JSON.stringify(await work())
    const etag = `"${createHash('sha256').update(body).digest('base64url').slice(0, 27)}"`
    const headers = { ETag: etag, 'Cache-Control': 'public, max-age=60', 'Access-Control-Allow-Origin': '*' }
    if (isNoneMatchHit(request.headers.get('If-None-Match'), etag)) return new Response(null, { status: 304, headers })
    return new Response(request.method === 'HEAD' ? null : body, {
      headers: { ...headers, 'Content-Type': 'application/json' }
    })
  })
}
