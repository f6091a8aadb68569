import { isDatabaseAnswering } from '~/server/health.server'
import { logError } from '~/server/log.server'
import { services } from '~/server/services.server'

/** Whether this process can serve: 200 when the database answers, else 503, which is what who watches it looks at. */
export async function loader() {
  const isOk = await isDatabaseAnswering(services().db).catch((error: unknown) => {
    logError('health-failing', error)
    return false
  })
  return Response.json(
    { status: isOk ? 'ok' : 'failing' },
    { status: isOk ? 200 : 503, headers: { 'Cache-Control': 'no-store' } }
  )
}
