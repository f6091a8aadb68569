import { isDatabaseAnswering } from '~/server/health.server'
import { services } from '~/server/services.server'

/** Whether this process can serve: the database answers. */
export async function loader() {
  const isOk = await isDatabaseAnswering(services().db)
  return Response.json({ status: isOk ? 'ok' : 'failing' }, { headers: { 'Cache-Control': 'no-store' } })
}
