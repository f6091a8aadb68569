import { redirect } from 'react-router'
import type { Route } from './+types/endpoint'
import { callerOf, countUse } from '~/domain/accounts/rate-limit.server'
import { answerPage } from '~/server/answer.server'
import { requestInfoContext } from '~/server/context'
import { authenticator } from '~/server/github-sign-in.server'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

const perCaller = { kind: 'github-caller', limit: 60, windowMs: 3_600_000 }

/** Somebody who types the address wants to sign in. */
export const loader = () => redirect('/sign-in')

/** Begins a sign-in: the answer sends the browser to the provider. */
export async function action({ request, url, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const given = services()
  return answerPage(url, async () => {
    await countUse(given, perCaller, callerOf(context.get(requestInfoContext).ip))
    const asked = new URL('/sign-in/github', given.config.publicOrigin)
    asked.searchParams.set('return', String(form.get('return') ?? ''))
    const headers = { Cookie: request.headers.get('Cookie') ?? '' }
    return authenticator(given).authenticate('github', new Request(asked, { method: 'POST', headers }))
  })
}
