import { redirect } from 'react-router'
import type { Route } from './+types/endpoint'
import { endSession } from '~/domain/accounts/sessions.server'
import { services } from '~/server/services.server'
import { sessionCookie, sessionToken } from '~/server/session.server'

/** Signing out changes something, so a mere link does not do it. */
export const loader = () => redirect('/account')

export async function action({ request }: Route.ActionArgs) {
  const { db, config } = services()
  await endSession(db, sessionToken(config, request))
  return redirect('/', { headers: { 'Set-Cookie': sessionCookie(config).clear() } })
}
