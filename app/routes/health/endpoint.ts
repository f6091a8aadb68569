import { sql } from 'kysely'
import { services } from '~/server/services.server'

/** Whether this process can serve: the database answers. */
export async function loader() {
  const { rows } = await sql<{ ok: number }>`select 1 as ok`.execute(services().db)
  return Response.json({ status: rows[0]?.ok === 1 ? 'ok' : 'failing' }, { headers: { 'Cache-Control': 'no-store' } })
}
