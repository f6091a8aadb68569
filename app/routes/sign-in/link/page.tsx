import { data, redirect } from 'react-router'
import type { Route } from './+types/page'
import { Actions, Button, ButtonLink } from '~/components/button'
import { ErrorSummary } from '~/components/error-summary'
import { TextField } from '~/components/field'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Title } from '~/components/title'
import { displayNameSchema } from '~/domain/accounts/account.schema'
import { lookAtLink, signInByLink, type LinkState } from '~/domain/accounts/sign-in-by-mail.server'
import { formValues, parseForm } from '~/lib/parse-form'
import { answerForm, formAnswer } from '~/server/answer.server'
import { requestInfoContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'
import { sessionCookie, sessionToken } from '~/server/session.server'

const statusOfLink: Record<LinkState['kind'], number> = { open: 200, used: 410, expired: 410, unknown: 404 }

export const meta: Route.MetaFunction = () => [{ title: 'Sign in by mail · Fettle' }, { name: 'robots', content: 'noindex' }]

/** Shows what the link is good for and uses nothing up. */
export async function loader({ params }: Route.LoaderArgs) {
  const link = await lookAtLink(services(), params.token)
  return data(link, { status: statusOfLink[link.kind] })
}

export async function action({ request, params, url, context }: Route.ActionArgs) {
  const given = services()
  const form = await readForm(request)
  const link = await lookAtLink(given, params.token)
  const name = link.kind === 'open' && link.isNew ? parseForm(displayNameSchema, form) : null
  if (name !== null && !name.ok) return formAnswer(name.errors, name.values)
  return answerForm(url, formValues(form), async () => {
    const signedIn = await signInByLink(given, {
      token: params.token,
      displayName: name?.value.displayName ?? null,
      oldSession: sessionToken(given.config, request),
      ip: context.get(requestInfoContext).ip
    })
    throw redirect(signedIn.returnTo, { headers: { 'Set-Cookie': sessionCookie(given.config).set(signedIn.sessionToken) } })
  })
}

const dead: Record<Exclude<LinkState['kind'], 'open'>, { heading: string; lead: string }> = {
  used: {
    heading: 'This link was used',
    lead: 'Each link signs in once. If that was not you, ask for a new one and end the other sessions in your account.'
  },
  expired: { heading: 'This link has lapsed', lead: 'A link holds for 15 minutes after it was asked for. Ask for a new one.' },
  unknown: {
    heading: 'This link does not hold',
    lead: 'It may have lost a piece on the way: mail programs break long lines. Copy the whole of it, or ask for a new one.'
  }
}

export default function SignInByLink({ loaderData, actionData }: Route.ComponentProps) {
  const errors = actionData?.errors ?? []
  const trail = [{ label: 'Boards', href: '/' }, { label: 'Sign in', href: '/sign-in' }, { label: 'By mail' }]
  if (loaderData.kind !== 'open')
    return (
      <SiteSheet trail={trail} isForm>
        <Title {...dead[loaderData.kind]}>
          <div className="mt-6">
            <Actions>
              <ButtonLink href="/sign-in">Ask for a new link</ButtonLink>
            </Actions>
          </div>
        </Title>
      </SiteSheet>
    )
  const { email, isNew } = loaderData
  return (
    <SiteSheet trail={trail} isForm>
      <Title
        heading={isNew ? 'Open an account' : 'One more press'}
        lead={isNew ? 'This address is new here.' : 'The link is good. Nothing has happened yet.'}
        margin={<p>Mail programs open links on their own, to look for harm. That is why this page waits for you.</p>}
      />
      <Section
        number={1}
        heading={isNew ? 'Who you are here' : 'Sign in'}
        margin={
          <p>
            <b>Not your address?</b> Then somebody else’s link reached you. Close this page and nothing happens.
          </p>
        }
      >
        <form method="post" noValidate className="space-y-6">
          <ErrorSummary errors={errors} before="the account can be opened" />
          <p>
            You will be signed in as <b>{email}</b>, which nobody else gets to see.
          </p>
          {isNew && (
            <TextField
              name="displayName"
              label="Display name"
              hint="Stands beside your reports and releases, for all to see. It can be changed later."
              autoComplete="nickname"
              maxLength={60}
              defaultValue={actionData?.values.displayName ?? ''}
              error={errors.find((e) => e.path === 'displayName')?.message}
              required
            />
          )}
          <Actions>
            <Button>{isNew ? 'Open the account and sign in' : 'Sign in'}</Button>
          </Actions>
        </form>
      </Section>
    </SiteSheet>
  )
}
